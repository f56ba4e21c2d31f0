"""gG fuse-links: a family of mean pre-arcing lines inside the gates of IEC 60269, and one link with both its lines."""

import math

from demo_curves.drawing.degrade import Scan
from demo_curves.drawing.design import AxisDesign, CurveLabel, GridStyle, Note, PlotDesign, SheetDesign
from demo_curves.drawing.formulas import Line, smooth_through
from demo_curves.scenario.parts import DemoSheet, ScanCopy, a4, block, heading, line

# In: Imin(10 s), Imax(5 s), Imin(0.1 s), Imax(0.1 s) in A, and pre-arcing I2t at 0.01 s in A2s, from and to.
# The currents are from memory of the IEC 60269 gate table, the I2t values published there.
GATES = {
    16: (33, 65, 85, 150, 300, 1000),
    20: (42, 85, 110, 200, 500, 1800),
    25: (52, 110, 150, 260, 1000, 3000),
    32: (75, 150, 200, 350, 1800, 5000),
    40: (95, 190, 260, 450, 3000, 9000),
    50: (125, 250, 350, 610, 5000, 16000),
    63: (160, 320, 450, 820, 9000, 27000),
    80: (215, 425, 610, 1100, 16000, 46000),
    100: (290, 580, 820, 1450, 27000, 86000),
    125: (355, 715, 1100, 1910, 46000, 140000),
    160: (460, 950, 1450, 2590, 86000, 250000),
    200: (610, 1250, 1910, 3420, 140000, 400000),
}


def pre_arcing_line(rating: int) -> Line:
    """A smooth mean line amid the gates, from the conventional time to adiabatic melting."""
    ten_s, five_s, tenth_low, tenth_high, energy_low, energy_high = GATES[rating]
    conventional_s = 3600.0 * (1 if rating <= 63 else 2 if rating <= 160 else 3)
    seven_s = math.sqrt(ten_s * five_s)
    tenth = math.sqrt(tenth_low * tenth_high)
    hundredth = math.sqrt(math.sqrt(energy_low * energy_high) / 0.01)
    vertices = [
        (1.42 * rating * (conventional_s / 20000.0) ** 0.03, 20000.0),
        (1.42 * rating, conventional_s),
        (seven_s, math.sqrt(50.0)),
        (tenth, 0.1),
        (hundredth, 0.01),
        (hundredth * 3.3, 0.0009),
    ]
    return smooth_through(vertices)


def link(key: str, rating: int) -> dict[str, object]:
    """A gG link's nameplate."""
    return {
        "key": key,
        "kind": "fuse",
        "characteristic": "gG",
        "standard": "IEC 60269-2",
        "rated_current_a": rating,
        "rated_voltage_v": 400,
        "maker": "Quolvane",
        "series": "QF",
        "breaking": [{"quantity": "Icn", "value_a": 80000, "voltage_v": 400, "supply": "ac"}],
    }


def family() -> DemoSheet:
    """Twelve ratings on one sheet, a mean line each, +-10 % in current stated."""
    curves = tuple(
        line(
            f"{rating}",
            pre_arcing_line(rating),
            edge="mean",
            meaning="pre_arcing",
            devices=(f"riverside-gg{rating}",),
            width_pt=0.9,
            labels=(
                CurveLabel(text=f"{rating}", along=0.05 + 0.03 * (step % 2), offset_pt=(0, 0), boxed=True, size_pt=6.5),
            ),
        )
        for step, rating in enumerate(GATES)
    )
    plot = PlotDesign(
        frame_pt=(84.7, 86.4, 538.1, 690.9),
        current=AxisDesign(
            quantity="current", unit="A", low=10, high=10000, label="Prospective current (r.m.s.) / A",
            labelled=(1, 2, 5), ticks="thousands",
        ),
        value=AxisDesign(quantity="time", unit="s", low=0.001, high=10000, label="Pre-arcing time / s", ticks="power"),
        curves=curves,
        grid=GridStyle(major_width_pt=0.7, minor_width_pt=0.3, major_colour="#707070", minor_colour="#b4b4b4"),
        tick_size_pt=7.5,
    )  # fmt: skip
    notes = (
        heading("QF fuse-links gG, 16 A to 200 A", (84.7, 54), 13),
        Note(text="Mean pre-arcing time-current characteristics", at_pt=(84.7, 70), size_pt=9),
        Note(text="Tolerance ±10 % in current.\nSinusoidal a.c., from cold.", at_pt=(392, 112), size_pt=8, boxed=True),
        Note(text="Numbers on the lines: rated current In in A", at_pt=(84.7, 735), size_pt=7.5),
    )
    title = block((84.7, 752), 453.4, "gG fuse-links, pre-arcing times", "QF-210")
    design = SheetDesign(page=a4(300), plots=(plot,), notes=notes, title_block=title)
    devices = tuple(link(f"riverside-gg{rating}", rating) | {"tolerance_current": [-0.1, 0.1]} for rating in GATES)
    scan = ScanCopy(
        scan=Scan(angle_deg=0.5, stretch=(1.0015, 0.9995), blur_px=0.9, noise=5, light=0.1, seed=21),
        kind="jpg",
        dpi=300,
        quality=60,
    )
    return DemoSheet(
        name="fuse-gg-family", title="gG fuse-links, pre-arcing times", number="QF-210", design=design,
        devices=devices, seed=201, scan=scan,
    )  # fmt: skip


def both_lines() -> DemoSheet:
    """One link with its shortest pre-arcing and longest operating line."""
    mean = pre_arcing_line(80)
    shortest = (mean[0] * 0.93, mean[1])
    arcing = 1.0 + 0.9 * (mean[0] / mean[0][-1]) ** 1.5
    longest = (mean[0] * 1.07, mean[1] * arcing)
    of_line = CurveLabel(text="pre-arcing, min.", along=0.45, offset_pt=(-78, 34), leader=True, size_pt=8)
    of_other = CurveLabel(text="operating, max.", along=0.4, offset_pt=(70, -36), leader=True, size_pt=8)
    curves = (
        line("pre-arcing", shortest, edge="fast", meaning="pre_arcing", labels=(of_line,), width_pt=1.3),
        line(
            "operating", longest, edge="slow", meaning="operating", labels=(of_other,), width_pt=1.3, dash_pt=(8.0, 3.0)
        ),
    )
    plot = PlotDesign(
        frame_pt=(96.5, 100.2, 668.8, 470.7),
        current=AxisDesign(quantity="current", unit="A", low=50, high=5000, label="I / A", labelled=(1, 2, 5)),
        value=AxisDesign(quantity="time", unit="s", low=0.01, high=10000, label="t / s", ticks="plain"),
        curves=curves,
        grid=GridStyle(major_colour="#8892b0", minor_colour="#ccd2e2", major_width_pt=0.9, minor_width_pt=0.5),
    )
    notes = (
        heading("QF 80 A gG", (96.5, 66)),
        Note(text="Shortest pre-arcing and longest operating time, 400 V a.c.", at_pt=(96.5, 84), size_pt=9),
    )
    title = block((96.5, 520), 572.3, "QF 80 A gG, pre-arcing and operating times", "QF-214")
    page = a4(200, landscape=True)
    design = SheetDesign(page=page, plots=(plot,), font="serif", notes=notes, title_block=title)
    return DemoSheet(
        name="fuse-gg80-both", title="QF 80 A gG, pre-arcing and operating times", number="QF-214", design=design,
        devices=(link("riverside-incomer-gg80", 80),), seed=202, renderer="pdfium", pdf="reportlab-pdf",
    )  # fmt: skip
