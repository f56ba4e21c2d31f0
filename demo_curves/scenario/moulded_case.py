"""An adjustable moulded-case breaker: long-time, short-time and instantaneous elements, a sheet each."""

from collections.abc import Mapping
from dataclasses import replace

from demo_curves.drawing.degrade import Scan
from demo_curves.drawing.design import AxisDesign, CurveLabel, GridStyle, Note, PlotDesign, SheetDesign
from demo_curves.drawing.formulas import inverse_piece, straight
from demo_curves.scenario.parts import DemoSheet, ScanCopy, a4, block, heading, line, remarks

KEY = "riverside-feeder-250"


def breaker() -> Mapping[str, object]:
    """The nameplate and settings, the same on all its sheets."""
    return {
        "key": KEY,
        "kind": "mccb",
        "standard": "IEC 60947-2",
        "rated_current_a": 250,
        "rated_voltage_v": 400,
        "ambient_reference_c": 40,
        "utilisation_category": "A",
        "maker": "Quolvane",
        "series": "QC",
        "settings": {
            "ir": {"from": 0.4, "to": 1.0, "base": "xIn"},
            "tr": {"steps": [2, 4, 8, 16], "at": "6 Ir"},
            "isd": {"from": 2, "to": 10, "base": "xIr"},
            "tsd": {"steps": [0.1, 0.2, 0.3, 0.4]},
            "ii": {"from": 4, "to": 12, "base": "xIn"},
        },
        "breaking": [
            {"quantity": "Icu", "value_a": 36000, "voltage_v": 400, "supply": "ac"},
            {"quantity": "Ics", "value_a": 36000, "voltage_v": 400, "supply": "ac"},
        ],
    }


def _sheet(name: str, title: str, number: str, plot: PlotDesign) -> DemoSheet:
    left, _, right, bottom = plot.frame_pt
    notes = (
        heading(f"QC 250, {title}", (left, 60), 13),
        Note(
            text="Electronic release, settings Ir 0.4 to 1.0 In (In = 250 A), 400 V a.c.", at_pt=(left, 78), size_pt=8.5
        ),
        remarks(
            (left, bottom + 56),
            "From cold at 40 °C, all poles loaded.",
            "The lines of an element are its shortest and its longest time to clear.",
        ),
    )
    design = SheetDesign(
        page=a4(200), plots=(plot,), notes=notes, title_block=block((left, 750), right - left, title, number),
        border_pt=20,
    )  # fmt: skip
    return DemoSheet(
        name=name, title=f"QC 250, {title}", number=number, design=design, devices=(breaker(),), seed=int(number[-3:]),
    )  # fmt: skip


def long_time() -> DemoSheet:
    """The overload element at two time settings; t at 6 Ir is 80 to 100 % of the setting."""
    curves = []
    for setting, colour in ((2, "#8a1c1c"), (8, "#1c3f8a")):
        for edge, pick_up, share in (("fast", 1.08, 0.8), ("slow", 1.2, 1.0)):
            constant = share * setting * ((6.0 / pick_up) ** 2 - 1.0)
            shape = inverse_piece(pick_up, constant, 2.0, 20000.0, 18.0)
            label = CurveLabel(text=f"tr = {setting} s", along=0.55, offset_pt=(0, 0), boxed=True, size_pt=7)
            curves.append(
                line(
                    f"tr {setting} {edge}",
                    shape,
                    edge=edge,
                    element="overload",
                    at={"tr": setting},
                    colour=colour,
                    width_pt=1.2,
                    labels=(label,) if edge == "slow" else (),
                )
            )
    plot = PlotDesign(
        frame_pt=(90.8, 98.4, 500.2, 660.3),
        current=AxisDesign(quantity="current", unit="xIr", low=1, high=20, label="I / Ir", labelled=(1, 2, 3, 5)),
        value=AxisDesign(quantity="time", unit="s", low=0.1, high=1000, label="Clearing time / s"),
        curves=tuple(curves),
    )
    scan = ScanCopy(scan=Scan(angle_deg=-0.7, blur_px=0.7, noise=2, seed=51), kind="tif", dpi=150)
    return replace(_sheet("mccb-long-time", "long-time element", "QC-501", plot), scan=scan)


def short_time() -> DemoSheet:
    """The delayed element at tsd = 0.2 s: pick-up within 10 %, then a definite time."""
    words = {"element": "delayed", "at": {"tsd": 0.2}, "width_pt": 1.4}
    fast = straight([(0.91, 50), (0.91, 0.17), (20, 0.165)])
    slow = straight([(1.09, 50), (1.09, 0.25), (20, 0.245)])
    plot = PlotDesign(
        frame_pt=(96.1, 98.4, 456.9, 520.7),
        current=AxisDesign(quantity="current", unit="xIsd", low=0.5, high=10, label="I / Isd", labelled=(1, 2, 5)),
        value=AxisDesign(quantity="time", unit="s", low=0.01, high=10, label="Clearing time / s"),
        curves=(line("fast", fast, edge="fast", **words), line("slow", slow, edge="slow", **words)),
        grid=GridStyle(major_colour="#7d8a9c", minor_colour="#c3ccd8"),
    )
    return _sheet("mccb-short-time", "short-time element, tsd = 0.2 s", "QC-502", plot)


def instantaneous() -> DemoSheet:
    """The instantaneous element: within 12 % of its setting."""
    fast = straight([(0.88, 5), (0.88, 0.009), (20, 0.007)])
    slow = straight([(1.12, 5), (1.12, 0.06), (3, 0.035), (20, 0.025)])
    words = {"element": "instantaneous", "width_pt": 1.4, "colour": "#202060"}
    plot = PlotDesign(
        frame_pt=(96.1, 98.4, 456.9, 520.7),
        current=AxisDesign(quantity="current", unit="xIi", low=0.5, high=10, label="I / Ii", labelled=(1, 2, 5)),
        value=AxisDesign(quantity="time", unit="s", low=0.001, high=1, label="Clearing time / s"),
        curves=(line("fast", fast, edge="fast", **words), line("slow", slow, edge="slow", **words)),
        grid=GridStyle(major_colour="#7d8a9c", minor_colour="#c3ccd8"),
    )
    return _sheet("mccb-instantaneous", "instantaneous element", "QC-503", plot)
