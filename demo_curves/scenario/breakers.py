"""Miniature circuit-breakers: bands B, C and D inside IEC 60898-1, and two breakers outside it on purpose."""

from demo_curves.drawing.degrade import Scan
from demo_curves.drawing.design import (
    AxisDesign,
    BandFill,
    CurveDesign,
    CurveLabel,
    GridStyle,
    Note,
    PlotDesign,
    SheetDesign,
)
from demo_curves.drawing.formulas import inverse_piece, with_vertices
from demo_curves.scenario.parts import DemoSheet, ScanCopy, a4, block, heading, line, remarks

RATINGS = [6, 10, 16, 20, 25, 32, 40]
TOP_S = 20000.0


def series(letter: str) -> dict[str, object]:
    """The series of one characteristic, one device a rating."""
    return {
        "key": f"riverside-{letter.lower()}{{rating}}",
        "kind": "mcb",
        "characteristic": letter,
        "standard": "IEC 60898-1",
        "ratings": RATINGS,
        "rated_voltage_v": 230,
        "ambient_reference_c": 30,
        "maker": "Quolvane",
        "series": f"QM {letter}",
        "breaking": [{"quantity": "Icn", "value_a": 6000, "voltage_v": 230, "supply": "ac"}],
    }


def single(key: str, letter: str, rating: int) -> dict[str, object]:
    """A breaker of one rating."""
    device = series(letter) | {"key": key, "rated_current_a": rating}
    del device["ratings"]
    return device


def fast_edge(pick_up: float, constant: float, step: float, **words: object) -> CurveDesign:
    """The fast edge: thermal line, then straight down at the step and out of the plot."""
    shape = with_vertices(inverse_piece(pick_up, constant, 2.0, TOP_S, step), [(step, 0.0002)])
    return line(str(words.pop("name")), shape, edge="fast", **words)


def slow_edge(pick_up: float, constant: float, step: float, last: float, **words: object) -> CurveDesign:
    """The slow edge: thermal line, step, and a floor that falls from 45 to 14 ms."""
    thermal = inverse_piece(pick_up, constant, 1.9, TOP_S, step)
    return line(str(words.pop("name")), with_vertices(thermal, [(step, 0.045), (last, 0.014)]), edge="slow", **words)


def _in_axis(high: float, label: str) -> AxisDesign:
    return AxisDesign(quantity="current", unit="xIn", low=1, high=high, label=label, labelled=(1, 2, 3, 5))


def _time_axis(low: float, ticks: str) -> AxisDesign:
    return AxisDesign(quantity="time", unit="s", low=low, high=10000, label="Tripping time t / s", ticks=ticks)


def band_b() -> DemoSheet:
    """Type B: a tinted band with dark blue edges."""
    blue = {"colour": "#153a70", "width_pt": 1.1}
    curves = (
        fast_edge(1.15, 12.0, 3.28, name="fast", **blue),
        slow_edge(1.375, 78.0, 4.72, 30.0, name="slow", **blue),
    )
    plot = PlotDesign(
        frame_pt=(92.4, 108.3, 498.9, 668.2),
        current=_in_axis(30, "Multiple of rated current  I / In"),
        value=_time_axis(0.001, "power"),
        curves=curves,
        bands=(BandFill(between=("fast", "slow"), colour="#dbe6f3"),),
        grid=GridStyle(major_colour="#7a7a7a", minor_colour="#bcbcbc", minor_width_pt=0.35, major_width_pt=0.7),
    )
    notes = (
        heading("Tripping characteristic type B", (92.4, 62)),
        Note(text="QM B series, 6 A to 40 A, 230 V a.c.", at_pt=(92.4, 80), size_pt=10),
        Note(text="Cold state, one pole loaded\nReference ambient 30 °C", at_pt=(318, 136), size_pt=8.5, boxed=True),
        remarks(
            (92.4, 716),
            "The band lies between the shortest and the longest time to clear.",
            "For other ambient temperatures correct the thermal part by 0.5 % of In per kelvin.",
        ),
    )
    title = block((92.4, 752), 406.5, "Type B, time-current band", "QM-101")
    design = SheetDesign(page=a4(200), plots=(plot,), notes=notes, title_block=title, border_pt=28)
    scan = ScanCopy(scan=Scan(angle_deg=0.9, stretch=(1.001, 0.999), seed=11), kind="jpg", dpi=200)
    return DemoSheet(
        name="mcb-b", title="Tripping characteristic type B", number="QM-101", design=design, devices=(series("B"),),
        seed=101, scan=scan,
    )  # fmt: skip


def bands_c_and_d() -> DemoSheet:
    """Types C and D on one plot, crossing each other."""
    red, green = {"colour": "#a01818", "width_pt": 1.2}, {"colour": "#0d5c3a", "width_pt": 1.2, "dash_pt": (7.0, 2.6)}
    of_c, of_d = {"devices": ("riverside-c{rating}",)}, {"devices": ("riverside-d{rating}",)}
    label = CurveLabel(text="C", along=0.79, offset_pt=(-9, 0), size_pt=9)
    label_d = CurveLabel(text="D", along=0.8, offset_pt=(9, 0), size_pt=9)
    curves = (
        fast_edge(1.14, 10.5, 5.6, name="C fast", labels=(label,), **red, **of_c),
        slow_edge(1.355, 70.0, 9.3, 50.0, name="C slow", **red, **of_c),
        fast_edge(1.19, 17.0, 11.2, name="D fast", **green, **of_d),
        slow_edge(1.42, 94.0, 18.4, 110.0, name="D slow", labels=(label_d,), **green, **of_d),
    )
    plot = PlotDesign(
        frame_pt=(98.2, 92.7, 522.6, 610.4),
        current=_in_axis(50, "Multiple of rated current, I/In"),
        value=_time_axis(0.01, "plain"),
        curves=curves,
        grid=GridStyle(major_colour="#6c8c6c", minor_colour="#b9d0b9", major_width_pt=0.8, minor_width_pt=0.45),
        legend_at_pt=(372, 106),
        legend=(("C slow", "Type C, limits"), ("D slow", "Type D, limits")),
    )
    notes = (
        heading("Time-current bands, types C and D", (98.2, 58), 13),
        Note(
            text="QM C and QM D series, 6 A to 40 A. Starting from cold at 30 °C.\n"
            "Clearing times; arcing time included. Below 10 ms see the let-through sheet.",
            at_pt=(98.2, 672),
            size_pt=8,
        ),
    )
    title = block((98.2, 762), 424.4, "Types C and D, time-current bands", "QM-102")
    design = SheetDesign(page=a4(200), plots=(plot,), font="serif", notes=notes, title_block=title)
    scan = ScanCopy(
        scan=Scan(angle_deg=-1.4, stretch=(0.999, 1.002), blur_px=0.8, noise=2.5, light=0.12, seed=12),
        kind="tif",
        dpi=150,
    )
    return DemoSheet(
        name="mcb-c-d", title="Time-current bands, types C and D", number="QM-102", design=design,
        devices=(series("C"), series("D")), seed=102, renderer="resvg", pdf="reportlab-pdf", scan=scan,
    )  # fmt: skip


def late_breaker() -> DemoSheet:
    """Out of standard on purpose: the slow edge never trips at 1.45 In."""
    curves = (
        fast_edge(1.17, 14.0, 5.7, name="fast", width_pt=1.4),
        slow_edge(1.53, 80.0, 9.1, 30.0, name="slow", width_pt=1.4),
    )
    plot = PlotDesign(
        frame_pt=(86.6, 96.1, 480.3, 560.8),
        current=_in_axis(30, "I / In"),
        value=_time_axis(0.01, "spaced"),
        curves=curves,
        bands=(BandFill(between=("fast", "slow"), colour="#9a9a9a", hatch_pt=6.0),),
        grid=GridStyle(major_colour="#606060", minor_colour="#a8a8a8", minor=(2, 3, 4, 5, 6, 8)),
    )
    notes = (
        heading("QM C 16 A, withdrawn 1998 issue", (86.6, 66), 12),
        Note(text="Trial lot. Not for new work.", at_pt=(392, 83), size_pt=8),
        remarks(
            (86.6, 622),
            "Thermal release of the 1998 lot, cold, 30 °C.",
            "Magnetic release between 5.7 and 9.1 In.",
            "Superseded by sheet QM-102.",
        ),
    )
    title = block((86.6, 754), 393.7, "QM C 16 A", "QM-087")
    design = SheetDesign(page=a4(200), plots=(plot,), font="stix", notes=notes, title_block=title, border_pt=22)
    scan = ScanCopy(
        scan=Scan(angle_deg=0.6, blur_px=0.6, noise=3, light=0.04, seed=13), kind="g4", dpi=300, level=186.0
    )
    return DemoSheet(
        name="mcb-late-thermal", title="QM C 16 A, withdrawn issue", number="QM-087", design=design,
        devices=(single("riverside-late-c16", "C", 16),), seed=103, renderer="pdfium", scan=scan,
        note="Out of standard on purpose: no tripping at 1.45 In",
    )  # fmt: skip


def loose_magnetic_breaker() -> DemoSheet:
    """Out of standard on purpose: a magnetic band of 4 to 8 In sold as type C."""
    curves = (
        fast_edge(1.15, 11.0, 4.0, name="fast", colour="#202020", width_pt=1.0, dash_pt=(6.0, 2.5)),
        slow_edge(1.37, 76.0, 8.0, 30.0, name="slow", colour="#202020", width_pt=1.6),
    )
    plot = PlotDesign(
        frame_pt=(82.3, 88.9, 472.2, 606.6),
        current=AxisDesign(quantity="current", unit="A", low=20, high=600, label="Current / A", labelled=(1, 2, 5)),
        value=_time_axis(0.01, "plain"),
        curves=tuple(_in_amperes(curve, 20.0) for curve in curves),
        grid=GridStyle(major_colour="#c27f62", minor_colour="#e8c3b1", frame_colour="#7a3b20"),
        legend_at_pt=(352, 104),
        legend=(("slow", "Longest time"), ("fast", "Shortest time")),
    )
    notes = (
        heading("QM C 20 A", (82.3, 58)),
        Note(text="Magnetic release 4 to 8 In", at_pt=(82.3, 76), size_pt=9),
        remarks(
            (82.3, 668), "Made to order for long pump cables. Cold, 30 °C.", "Check the loop impedance against 8 In."
        ),
    )
    title = block((82.3, 756), 389.9, "QM C 20 A, special", "QM-131")
    design = SheetDesign(page=a4(200), plots=(plot,), notes=notes, title_block=title)
    return DemoSheet(
        name="mcb-loose-magnetic", title="QM C 20 A, special", number="QM-131", design=design,
        devices=(single("riverside-loose-c20", "C", 20),), seed=104, pdf="reportlab-pdf",
        note="Out of standard on purpose: magnetic band 4 to 8 In",
    )  # fmt: skip


def _in_amperes(curve: CurveDesign, rated_current_a: float) -> CurveDesign:
    return line(
        curve.name, (curve.current * rated_current_a, curve.value), edge=curve.edge, colour=curve.colour,
        width_pt=curve.width_pt, dash_pt=curve.dash_pt,
    )  # fmt: skip
