"""A small reading with everything in it: numbers without meaning, built by hand."""

import numpy as np

from curvelab.records.axes import Axes, Axis, GridLine, Mark, PlaneMap
from curvelab.records.budget import UncertaintyBudget
from curvelab.records.curve import Conditions, Curve, Part, SheetKey, typed_part
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.records.finding import Finding
from curvelab.records.fit import CurveFit, FitGap, Kink, Piece
from curvelab.records.form import FormParameter, PublishedForm
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.sheet import Pixels, Sheet
from curvelab.records.trace import Gap, Trace
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import CurveEntry, SheetEntry, Worksheet

WIDTH, HEIGHT = 440, 600
FRAME = (40.0, 30.0, 400.0, 560.0)
NAN = float("nan")


def axes(quantity="time"):
    """Two decades of current along x, four of the value along y, from the frame's corners."""
    x0, y0, x1, y1 = FRAME
    centre, reach = np.array([(x0 + x1) / 2, (y0 + y1) / 2]), (y1 - y0) / 2
    per_x, per_y = 2 / (x1 - x0), -4 / (y1 - y0)
    projective = [1.0, per_x * reach, 0.0, 0.0, 0.0, per_y * reach, 0.0, 0.0]
    covariance = np.diag([1e-8] * 6 + [0.0] * 2)
    plane = PlaneMap(centre=centre, reach=reach, projective=projective, powers=(), warp=[], covariance=covariance)
    marks = (Mark(at=(x0, y1), value=1, residual=0.25), Mark(at=(x1, y1), value=100, origin="label", residual=-0.25))
    up = (Mark(at=(x0, y1), value=0.01), Mark(at=(x0, y0), value=100))
    unit = {"time": "s", "let_through": "A2s", "peak": "A"}[quantity]
    grid = tuple(
        GridLine(axis=axis, value=value, points=points, sd=0.05, width=1.0, darkness=0.5)
        for axis, value, points in [
            ("current", 10.0, [[220.0, y0], [220.0, y1]]),
            ("value", 1.0, [[x0, 295.0], [x1, 295.0]]),
        ]
    )
    return Axes(
        current=Axis(quantity="current", scale="log", unit="xIn", factor=1.0, direction="x", marks=marks),
        value=Axis(quantity=quantity, scale="log", unit=unit, factor=1.0, direction="y", marks=up),
        map=plane,
        frame=FRAME,
        mark_residual_rms=0.25,
        grid=grid,
    )


def sheet():
    grey = np.full((HEIGHT, WIDTH), 250, dtype=np.uint8)
    grey[30:560, 40:401:36] = 170
    grey[30:561:53, 40:400] = 170
    pixels = Pixels(grey=grey, colour=None, to_place=np.array([[1.0, 0, 0], [0, 1.0, 0]]))
    return Sheet(file="b.png", sha256="ab" * 32, page=1, pages=1, width=WIDTH, height=HEIGHT, unit="px", pixels=pixels)


def part(current, value, sd=0.01):
    current, value = np.asarray(current, float), np.asarray(value, float)
    known = np.full(current.shape, sd)
    return Part(current=current, value=value, sd_current=known, sd_value=known, sd_common=known / 2)


SLOW = ([1.5, 2.0, 3.0, 5.0, 5.0, 50.0], [100.0, 30.0, 10.0, 4.0, 0.05, 0.05])
FAST = ([1.15, 1.5, 2.0, 3.0, 3.0, 50.0], [100.0, 20.0, 8.0, 3.0, 0.012, 0.012])


def read_curve(edge, points, quantity="time"):
    current, value = map(np.asarray, points)
    steep = np.array([0.01, 0.01, 0.01, NAN, NAN, 0.01])
    places = axes(quantity).places(current, value)
    trace = Trace(
        places=places,
        sd=np.full(current.shape, 0.05),
        correlation_length=3.0,
        gaps=(Gap(start=tuple(places[3].tolist()), end=tuple(places[4].tolist())),),
        ends_at_frame=(True, False),
        colour=(176, 32, 32),
        width=2.0,
        boundary=False,
        origin="guided",
        confidence=0.9,
    )
    curve = Curve(
        element="whole",
        edge=edge,
        meaning="clearing",
        quantity=quantity,
        base="xIn",
        parts=(part(current, value),),
        conditions=Conditions(start="cold"),
        at={"tr": 2.0, "ir": 1.0},
        leaves_top=True,
        sheet=SheetKey(sha256="ab" * 32),
    )
    return ReadCurve(
        trace=trace,
        current=current,
        value=value,
        sd_current=np.full(current.shape, 0.01),
        sd_value=steep,
        curve=curve,
        devices=("riverside-b16",),
        label="B16",
        fit=fit_of(curve.parts),
    )


def fit_of(parts):
    budget = UncertaintyBudget(
        calibration=1e-3,
        warp=0.0,
        snapping=0.0,
        trace=5e-4,
        correlation=2e-4,
        smoothing=1e-4,
        edge=3e-4,
        tabulation=1e-5,
    )
    line = Piece(
        form="line",
        start=0.5,
        end=1.5,
        degree=1,
        knots=np.array([0.5, 0.5, 1.5, 1.5]),
        coefficients=np.array([0.1, 0.3]),
        covariance=np.array([[1e-8, 2e-9], [2e-9, 1e-8]]),
    )
    form = PublishedForm(
        name="adiabatic",
        standard="",
        parameters=(FormParameter(name="i2t", value=123.4, sd=0.002),),
        from_current=1.5,
        to_current=3.0,
        rms=3e-5,
        excess=0.2,
        also=("another name",),
        rivals=("another form",),
    )
    return CurveFit(
        rising=False,
        pieces=(line,),
        kinks=(Kink(log_current=0.3, log_value=1.2, sd_log_current=1e-4, sd_log_value=2e-4, turn=0.7),),
        gaps=(FitGap(start=(0.1, 2.0), end=(0.2, 1.9), bridged=True),),
        parts=parts,
        smoothing=(np.inf, 12.5),
        edf=2.0,
        residual_rms=1e-4,
        noise_scale=1.1,
        correlation=2.5,
        strays=(3, 17),
        budget=budget,
        moved=1e-5,
        forms=(form,),
    )


def reading(quantity="time"):
    curves = (read_curve("fast", FAST, quantity), read_curve("slow", SLOW, quantity))
    entries = (CurveEntry(edge="slow", through=((150.0, 200.0),), avoid=((60.0, 500.0, 120.0, 540.0),)),)
    finding = Finding(
        device="riverside-b16",
        standard="IEC 60898-1",
        clause="9.10.1.2",
        requirement="trips within 1 h at 1.45 In",
        limit=3600.0,
        unit="s",
        value=None,
        interval=None,
        outcome="not covered",
        advisory=False,
        source="table 7",
        rule="conventional-trip",
        current=1.45,
        base="xIn",
    )
    accepted = Acceptance(code="label_doubtful", place=(40.0, 560.0), reason="it is 1", name="A. Reviewer")
    return Reading(
        worksheet=Worksheet(sheet=SheetEntry(file="b.png", plot=2), curves=entries),
        sheet=sheet(),
        axes=axes(quantity),
        curves=curves,
        devices=(
            DeviceRecord(
                nameplate=Nameplate(key="riverside-b16", kind="mcb", rated_current_a=16.0),
                curves=tuple(each.curve for each in curves),
            ),
        ),
        findings=(finding,),
        warnings=(
            ReadingWarning(code="label_doubtful", text="1 or 7?", at=(40.0, 560.0), accepted=accepted),
            ReadingWarning(code="gap", text="The line is not seen here"),
        ),
        program_version="0.1.0",
    )


def typed_reading():
    points = typed_part([160.0, 160.0], [5.0, 0.1])
    curve = Curve(element="whole", edge="slow", meaning="clearing", base="A", parts=(points,), source="a table")
    unknown = np.array([NAN, NAN])
    read = ReadCurve(
        trace=None,
        current=points.current,
        value=points.value,
        sd_current=unknown,
        sd_value=unknown,
        curve=curve,
        devices=(),
    )
    return Reading(
        worksheet=Worksheet(),
        sheet=None,
        axes=None,
        curves=(read,),
        devices=(),
        findings=(),
        warnings=(),
        program_version="0.1.0",
    )
