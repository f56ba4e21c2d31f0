"""Residual-current devices, general and type S, and an RCBO whose two sheets make one device."""

from collections.abc import Mapping

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
from demo_curves.drawing.formulas import Line, straight
from demo_curves.scenario.breakers import fast_edge, slow_edge
from demo_curves.scenario.parts import DemoSheet, ScanCopy, a4, block, heading, line, remarks

# Multiples of the rated residual operating current: inside IEC 61008-1 Table 1 (general 0.3 s, 0.15 s, 0.04 s at one,
# two and five times; type S at most 0.5 s, 0.2 s, 0.15 s and at least 0.13 s, 0.06 s, 0.05 s).
GENERAL_FAST = straight([(0.62, 10), (0.62, 0.11), (1, 0.06), (2, 0.03), (5, 0.013), (500, 0.011)])
GENERAL_SLOW = straight([(0.88, 10), (0.88, 0.27), (1, 0.23), (2, 0.115), (5, 0.036), (500, 0.031)])
DELAYED_FAST = straight([(0.64, 10), (0.64, 0.24), (1, 0.16), (2, 0.085), (5, 0.066), (500, 0.06)])
DELAYED_SLOW = straight([(0.87, 10), (0.87, 0.48), (1, 0.43), (2, 0.185), (5, 0.138), (500, 0.125)])


def _band(fast: Line, slow: Line, scale: float, **look: object) -> tuple[CurveDesign, CurveDesign]:
    words = {"element": "residual"} | look
    return (
        line("fast", (fast[0] * scale, fast[1]), edge="fast", **words),
        line("slow", (slow[0] * scale, slow[1]), edge="slow", **words),
    )


def rcd(key: str, residual_current_a: float, delay: str) -> dict[str, object]:
    """A residual-current device's nameplate."""
    return {
        "key": key,
        "kind": "rcd",
        "standard": "IEC 61008-1",
        "rated_current_a": 40 if delay == "general" else 63,
        "rated_residual_current_a": residual_current_a,
        "residual_waveform": "A",
        "residual_delay": delay,
        "rated_voltage_v": 230,
        "maker": "Quolvane",
        "series": "QR",
        "breaking": [{"quantity": "IDm", "value_a": 1000, "voltage_v": 230, "supply": "ac"}],
    }


def general() -> DemoSheet:
    """General type, 30 mA, the axis in milliamperes and the time in milliseconds."""
    plot = PlotDesign(
        frame_pt=(90.1, 112.4, 510.7, 470.3),
        current=AxisDesign(
            quantity="current", unit="mA", low=10, high=1000, label="Residual current / mA", labelled=(1, 2, 3, 5)
        ),
        value=AxisDesign(quantity="time", unit="ms", low=5, high=1000, label="Break time / ms", labelled=(1, 2, 5)),
        curves=_band(GENERAL_FAST, GENERAL_SLOW, 0.03, colour="#1c4f8a", width_pt=1.5),
        bands=(BandFill(between=("fast", "slow"), colour="#e2ebf5"),),
        grid=GridStyle(major_colour="#868686", minor_colour="#c6c6c6"),
    )
    notes = (
        heading("QR residual-current device, 30 mA", (90.1, 64)),
        Note(text="General type, waveform A, 40 A, 230 V a.c.", at_pt=(90.1, 84), size_pt=9.5),
        Note(text="Suddenly applied sinusoidal\nresidual current", at_pt=(352, 140), size_pt=8, boxed=True),
        remarks(
            (90.1, 536),
            "Tested at 20 °C with a sinusoidal residual current applied suddenly at 0°.",
            "Does not trip at or below 15 mA.",
            "Short-circuit protection by a fuse of at most 63 A gG, or by QM breakers up to 40 A.",
            "Test monthly with the button T.",
        ),
    )
    title = block((90.1, 752), 420.6, "QR 30 mA general, break time", "QR-301")
    design = SheetDesign(page=a4(200), plots=(plot,), notes=notes, title_block=title)
    scan = ScanCopy(scan=Scan(angle_deg=1.8, blur_px=0.8, noise=4, light=0.14, paper=229, seed=31), kind="jpg", dpi=200)
    return DemoSheet(
        name="rcd-general", title="QR 30 mA general, break time", number="QR-301", design=design,
        devices=(rcd("riverside-rcd30", 0.03, "general"),), seed=301, renderer="pdfium", scan=scan,
    )  # fmt: skip


def delayed() -> DemoSheet:
    """Type S, 100 mA, in multiples of the rated residual operating current."""
    plot = PlotDesign(
        frame_pt=(88.8, 100.6, 492.2, 520.9),
        current=AxisDesign(
            quantity="current", unit="xIdn", low=0.5, high=50, label="Multiple of IΔn", labelled=(1, 2, 5)
        ),
        value=AxisDesign(quantity="time", unit="s", low=0.02, high=2, label="Break time / s", labelled=(1, 2, 5)),
        curves=_band(DELAYED_FAST, DELAYED_SLOW, 1.0, width_pt=1.2),
        grid=GridStyle(major_colour="#5f5f5f", minor_colour="#a5a5a5", minor_width_pt=0.5),
    )
    notes = (
        heading("QR type S, IΔn = 100 mA", (88.8, 66)),
        Note(
            text="Upper line: longest break time\nLower line: shortest time", at_pt=(300, 130), size_pt=8.5, boxed=True
        ),
        remarks(
            (88.8, 588),
            "Selective with general type devices of at most 30 mA downstream.",
            "Rated current 63 A, 230 V a.c.",
            "Does not trip at or below 0.5 IΔn.",
        ),
    )
    title = block((88.8, 750), 403.4, "QR 100 mA type S, break time", "QR-305")
    design = SheetDesign(page=a4(200), plots=(plot,), font="stix", notes=notes, title_block=title, border_pt=25)
    return DemoSheet(
        name="rcd-delayed", title="QR 100 mA type S, break time", number="QR-305", design=design,
        devices=(rcd("riverside-rcd100-s", 0.1, "S"),), seed=302, renderer="agg-snapped", pdf="reportlab-pdf",
    )  # fmt: skip


def rcbo() -> Mapping[str, object]:
    """The RCBO's nameplate, the same on both its sheets."""
    return {
        "key": "riverside-rcbo-c20",
        "kind": "rcbo",
        "characteristic": "C",
        "standard": "IEC 61009-1",
        "rated_current_a": 20,
        "rated_residual_current_a": 0.03,
        "residual_waveform": "A",
        "residual_delay": "general",
        "rated_voltage_v": 230,
        "maker": "Quolvane",
        "series": "QMR",
        "breaking": [{"quantity": "Icn", "value_a": 6000, "voltage_v": 230, "supply": "ac"}],
    }


def rcbo_overcurrent() -> DemoSheet:
    """The overcurrent band of the 20 A RCBO, the current printed in tens of amperes."""
    look = {"width_pt": 1.3, "colour": "#101010"}
    pair = (fast_edge(1.16, 11.5, 5.5, name="fast", **look), slow_edge(1.38, 70.0, 9.2, 60.0, name="slow", **look))
    curves = tuple(line(curve.name, (curve.current * 20.0, curve.value), edge=curve.edge, **look) for curve in pair)
    plot = PlotDesign(
        frame_pt=(93.9, 94.3, 474.4, 640.1),
        current=AxisDesign(
            quantity="current", unit="A", factor=10, low=2, high=100, label="Current / A × 10", labelled=(1, 2, 5)
        ),
        value=AxisDesign(quantity="time", unit="s", low=0.01, high=10000, label="Time / s", ticks="plain"),
        curves=curves,
        grid=GridStyle(major_colour="#777777", minor_colour="#bdbdbd"),
    )
    notes = (
        heading("QMR C 20 A, overcurrent", (93.9, 60), 13),
        Note(text="Residual element: see sheet QMR-402", at_pt=(93.9, 78), size_pt=8.5),
        remarks(
            (93.9, 696), "Cold, 30 °C, one protected pole.", "Printed current times ten is the current in amperes."
        ),
    )
    title = block((93.9, 760), 380.5, "QMR C 20 A / 30 mA, overcurrent", "QMR-401")
    design = SheetDesign(page=a4(200), plots=(plot,), font="mono", notes=notes, title_block=title)
    return DemoSheet(
        name="rcbo-overcurrent", title="QMR C 20 A / 30 mA, overcurrent", number="QMR-401", design=design,
        devices=(rcbo(),), seed=401,
    )  # fmt: skip


def rcbo_residual() -> DemoSheet:
    """The residual element of the same RCBO."""
    fast, slow = ((shape[0] * 1.03, shape[1] * 0.93) for shape in (GENERAL_FAST, GENERAL_SLOW))
    look = {"element": "residual", "width_pt": 1.3}
    label = CurveLabel(text="longest", along=0.8, offset_pt=(0, -9), size_pt=8)
    plot = PlotDesign(
        frame_pt=(93.9, 94.3, 474.4, 430.6),
        current=AxisDesign(quantity="current", unit="xIdn", low=0.3, high=30, label="I / IΔn", labelled=(1, 3, 5)),
        value=AxisDesign(quantity="time", unit="s", low=0.005, high=1, label="Time / s", labelled=(1, 2, 5)),
        curves=(line("fast", fast, edge="fast", **look), line("slow", slow, labels=(label,), **look)),
        grid=GridStyle(major_colour="#777777", minor_colour="#bdbdbd"),
    )
    notes = (
        heading("QMR C 20 A, residual element 30 mA", (93.9, 60), 13),
        Note(text="Overcurrent: see sheet QMR-401", at_pt=(93.9, 78), size_pt=8.5),
        remarks(
            (93.9, 494),
            "IΔn = 30 mA, waveform A, general type.",
            "Break time after a suddenly applied sinusoidal residual current.",
            "The time of the overcurrent element is not included.",
        ),
    )
    title = block((93.9, 760), 380.5, "QMR C 20 A / 30 mA, residual", "QMR-402")
    design = SheetDesign(page=a4(200), plots=(plot,), font="mono", notes=notes, title_block=title)
    return DemoSheet(
        name="rcbo-residual", title="QMR C 20 A / 30 mA, residual", number="QMR-402", design=design,
        devices=(rcbo(),), seed=402, renderer="resvg",
    )  # fmt: skip
