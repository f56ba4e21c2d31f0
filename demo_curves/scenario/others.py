"""The pump feeder's relay at two time settings, and the let-through sheet of the type C breakers."""

from demo_curves.drawing.degrade import Scan
from demo_curves.drawing.design import AxisDesign, CurveLabel, GridStyle, Note, PlotDesign, SheetDesign
from demo_curves.drawing.formulas import relay_line, straight
from demo_curves.scenario.breakers import single
from demo_curves.scenario.parts import DemoSheet, ScanCopy, a4, block, heading, line, remarks


def relay() -> DemoSheet:
    """IEC 60255-151 very inverse at tms 0.1 and 0.5, mean lines with +-5 % in time."""
    curves = tuple(
        line(
            f"tms {tms}",
            relay_line("IEC very inverse", tms, (1.05, 20.0)),
            edge="mean",
            meaning="relay_output",
            at={"tms": tms},
            width_pt=1.2,
            labels=(CurveLabel(text=f"tms = {tms}", along=0.5, offset_pt=(34, -14), size_pt=8),),
        )
        for tms in (0.1, 0.5)
    )
    plot = PlotDesign(
        frame_pt=(94.6, 104.9, 660.3, 468.2),
        current=AxisDesign(
            quantity="current", unit="xIr", low=1, high=30, label="Multiple of setting current", labelled=(1, 2, 3, 5)
        ),
        value=AxisDesign(quantity="time", unit="s", low=0.05, high=100, label="Operating time / s", labelled=(1, 2, 5)),
        curves=curves,
        grid=GridStyle(major_colour="#5b8f8f", minor_colour="#b5d2d2"),
    )
    notes = (
        heading("QP 51 overcurrent relay, IEC very inverse", (94.6, 66)),
        Note(text="Tolerance ±5 % in time. Output contact, without breaker time.", at_pt=(94.6, 84), size_pt=9),
    )
    title = block((94.6, 520), 565.7, "QP 51, IEC very inverse", "QP-601")
    page = a4(200, landscape=True)
    design = SheetDesign(page=page, plots=(plot,), font="serif", notes=notes, title_block=title)
    device = {
        "key": "riverside-relay-51",
        "kind": "relay",
        "characteristic": "IEC very inverse",
        "standard": "IEC 60255-151",
        "rated_current_a": 400,
        "maker": "Quolvane",
        "series": "QP",
        "tolerance_time": [-0.05, 0.05],
        "settings": {
            "ir": {"from": 0.5, "to": 2.4, "base": "xIn"},
            "tms": {"from": 0.05, "to": 1.0},
        },
    }
    scan = ScanCopy(scan=Scan(angle_deg=1.1, blur_px=0.7, noise=4, seed=61), kind="g4", dpi=300, level=196.0)
    return DemoSheet(
        name="relay-very-inverse", title="QP 51, IEC very inverse", number="QP-601", design=design, devices=(device,),
        seed=601, renderer="resvg", scan=scan,
    )  # fmt: skip


def let_through() -> DemoSheet:
    """Largest let-through of two groups of type C breakers, inside energy limiting class 3."""
    groups = (
        ("6 A to 16 A", (6, 10, 16), [(0.3, 1500), (1, 6800), (3, 19500), (6, 32000)], "#7a2d00"),
        ("20 A to 32 A", (20, 25, 32), [(0.3, 2300), (1, 10400), (3, 29000), (6, 46000)], "#00407a"),
    )
    curves = tuple(
        line(
            name,
            straight([(kilo * 1000.0, energy) for kilo, energy in vertices]),
            devices=tuple(f"riverside-c{rating}" for rating in ratings),
            colour=colour,
            width_pt=1.4,
            labels=(CurveLabel(text=name, along=0.45, offset_pt=(0, 0), boxed=True, size_pt=8),),
        )
        for name, ratings, vertices, colour in groups
    )
    plot = PlotDesign(
        frame_pt=(98.3, 100.7, 500.9, 528.4),
        current=AxisDesign(
            quantity="current", unit="kA", low=0.2, high=10, label="Prospective current / kA", labelled=(1, 2, 5)
        ),
        value=AxisDesign(
            quantity="let_through", unit="A2s", low=1000, high=100000, label="Let-through I²t / A²s", ticks="power"
        ),
        curves=curves,
    )
    notes = (
        heading("QM C, largest let-through energy", (98.3, 62)),
        Note(text="230 V a.c., one pole, up to Icn = 6 kA", at_pt=(98.3, 80), size_pt=9),
        remarks(
            (98.3, 592),
            "Largest value over the making angle, power factor as tested.",
            "Not to be extended beyond 6 kA.",
        ),
    )
    title = block((98.3, 752), 402.6, "QM C, let-through", "QM-110")
    design = SheetDesign(page=a4(200), plots=(plot,), notes=notes, title_block=title)
    devices = tuple(single(f"riverside-c{rating}", "C", rating) for _, ratings, _, _ in groups for rating in ratings)
    return DemoSheet(
        name="mcb-c-let-through", title="QM C, let-through", number="QM-110", design=design, devices=devices,
        seed=602, renderer="agg",
    )  # fmt: skip
