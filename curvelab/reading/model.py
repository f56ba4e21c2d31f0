"""The station that fits traces and makes curves of them; typed points become curves as they are."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import partial

import numpy as np

from curvelab.devices.multiplier import scaled_by_setting
from curvelab.errors import FitError, WorksheetError
from curvelab.fit.curve import fit_curve
from curvelab.fit.order import keep_order
from curvelab.reading.follow import Followed
from curvelab.reading.points import fit_points, point_uncertainty
from curvelab.reading.remember import Remember
from curvelab.records.axes import Axes
from curvelab.records.curve import Curve, SheetKey, typed_part
from curvelab.records.fit import CurveFit
from curvelab.records.points import FitPoints
from curvelab.records.reading import ReadCurve
from curvelab.records.trace import Trace
from curvelab.records.worksheet import CurveEntry

AT_FRAME = 4.0
"""A line that ends this close to the plot's top, in px or pt, leaves the plot there."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Fitted:
    followed: Followed
    points: FitPoints
    fit: CurveFit


def _in_order(trace: Trace, axes: Axes, *, rising: bool) -> Trace:
    """The trace from its low-current end to its high-current end."""
    ends = axes.map.scaled(trace.places[[0, -1]])
    along = ends[:, 0] + (ends[:, 1] if rising else -ends[:, 1])
    if along[0] <= along[1]:
        return trace
    return replace(
        trace,
        places=trace.places[::-1],
        sd=trace.sd[::-1],
        gaps=tuple(replace(gap, start=gap.end, end=gap.start) for gap in reversed(trace.gaps)),
        ends_at_frame=(trace.ends_at_frame[1], trace.ends_at_frame[0]),
    )


def _leaves_top(trace: Trace, axes: Axes) -> bool:
    """True where the low-current end of a time curve lies at the greatest time of the plot."""
    if axes.value.quantity != "time" or not trace.ends_at_frame[0]:
        return False
    x0, y0, x1, y1 = axes.frame
    corners = axes.map.scaled([(x0, y0), (x1, y0), (x0, y1), (x1, y1)])
    end = axes.map.scaled(trace.places[:1])[0]
    top = axes.map.places([(end[0], corners[:, 1].max())])[0]
    return bool(np.hypot(*(top - trace.places[0])) <= AT_FRAME)


def _band_of(entry: CurveEntry) -> tuple[object, ...]:
    """What the two edges of one band share."""
    return (entry.element, entry.devices, entry.conditions, tuple(sorted(entry.at.items())))


def _ordered(fitted: list[_Fitted]) -> list[_Fitted]:
    """The same fits with fast never above slow within each band."""
    result = list(fitted)
    for i, fast in enumerate(result):
        for j, slow in enumerate(result):
            of_one_band = _band_of(fast.followed.entry) == _band_of(slow.followed.entry)
            if of_one_band and (fast.followed.entry.edge, slow.followed.entry.edge) == ("fast", "slow"):
                fast_fit, slow_fit = keep_order(result[i].fit, result[j].fit)
                result[i], result[j] = replace(result[i], fit=fast_fit), replace(result[j], fit=slow_fit)
    return result


def _curve(entry: CurveEntry, *, base: str, quantity: str, fit_or_points: CurveFit | None) -> Curve:
    if entry.edge is None and entry.points:
        raise WorksheetError("A curve has no edge", "edge = 'fast', 'slow' or 'mean'", "Say which limit the line is")
    parts = fit_or_points.parts if fit_or_points else (typed_part(*zip(*entry.points, strict=True)),)
    curve = Curve(
        element=entry.element or "whole",
        edge=entry.edge or "mean",
        meaning=entry.meaning,
        quantity=quantity,  # type: ignore[arg-type]
        base=base,
        parts=parts,
        conditions=entry.conditions,
        at=entry.at,
        source=entry.source,
    )
    return scaled_by_setting(curve)


def fitted_curves(
    followed: Sequence[Followed], axes: Axes, sheet: SheetKey, remember: Remember, *, pixel: float
) -> tuple[ReadCurve, ...]:
    """Fit each trace and tabulate it; ``pixel`` is a pixel's size in the sheet's unit, 0 for exact strokes.

    Raises
    ------
    FitError
        The places of a trace cannot be one monotone curve.
    """
    fitted = []
    for number, each in enumerate(followed, start=1):
        try:
            trace, points, fit = fit_trace(each.trace, axes, remember, pixel=pixel)
        except FitError as error:
            raise FitError(f"[[curves]] {number}: {error.problem}", error.expected, error.fix) from error
        fitted.append(_Fitted(followed=replace(each, trace=trace), points=points, fit=fit))
    return tuple(_read_curve(each, axes, sheet) for each in _ordered(fitted))


def fit_trace(trace: Trace, axes: Axes, remember: Remember, *, pixel: float) -> tuple[Trace, FitPoints, CurveFit]:
    """The trace from low to high currents, its points in values, and the curve fitted to them.

    Raises
    ------
    FitError
        The places cannot be one monotone curve.
    """
    return remember("fit", (trace, axes), partial(_fit, trace, axes, pixel))


def _fit(trace: Trace, axes: Axes, pixel: float) -> tuple[Trace, FitPoints, CurveFit]:
    rising = axes.value.quantity != "time"
    ordered = _in_order(trace, axes, rising=rising)
    points = fit_points(ordered, axes, pixel)
    fit = fit_curve(points, rising=rising)
    if axes.snapped:
        fit = replace(fit, budget=replace(fit.budget, calibration=0.0, snapping=fit.budget.calibration))
    return ordered, points, fit


def _read_curve(fitted: _Fitted, axes: Axes, sheet: SheetKey) -> ReadCurve:
    entry, trace = fitted.followed.entry, fitted.followed.trace
    curve = _curve(entry, base=axes.current.base, quantity=axes.value.quantity, fit_or_points=fitted.fit)
    sd_current, sd_value = point_uncertainty(fitted.points)
    return ReadCurve(
        trace=trace,
        current=10.0**fitted.points.log_current,
        value=10.0**fitted.points.log_value,
        sd_current=sd_current,
        sd_value=sd_value,
        curve=replace(curve, leaves_top=_leaves_top(trace, axes), sheet=sheet),
        devices=entry.devices,
        tolerance=entry.tolerance,
        label=fitted.followed.label,
        fit=fitted.fit,
    )


def typed_curves(entries: Sequence[CurveEntry], quantity: str) -> tuple[ReadCurve, ...]:
    """Curves of points typed from a table; their uncertainty is not known."""
    result = []
    for entry in entries:
        curve = _curve(entry, base=entry.base or "A", quantity=quantity, fit_or_points=None)
        part = curve.parts[0]
        result.append(
            ReadCurve(
                trace=None,
                current=part.current,
                value=part.value,
                sd_current=part.sd_current,
                sd_value=part.sd_value,
                curve=curve,
                devices=entry.devices,
                tolerance=entry.tolerance,
            )
        )
    return tuple(result)
