"""Between the sheet and the values: what a place means, and where values are."""

from typing import Any

import numpy as np

from curvelab.errors import AxesError, InputError
from curvelab.records.axes import Axes, Axis
from curvelab.records.curve import COVERAGE_FACTOR
from curvelab.records.reading import ReadCurve
from curvelab.workbench.draft import Draft
from curvelab.workbench.failures import Unknown

NEAR = 12.0
"""A trace further from a place, in the sheet's unit, is not meant."""
LN10 = float(np.log(10.0))


def located(draft: Draft, place: tuple[float, float]) -> dict[str, Any]:
    """Current and value of a place with relative standard uncertainties of the map, and the trace that passes it.

    Raises
    ------
    Unknown
        The draft's axes are not known yet.
    """
    axes, curves = _read(draft)
    # Far off the page values and their uncertainty pass all numbers.
    with np.errstate(over="ignore", invalid="ignore", divide="ignore"):
        current, value = axes.values([place])
        covariance = axes.map.covariance_at([place])[0]
    sd_current, sd_value = (
        _relative(axis, float(number[0]), float(covariance[k, k]))
        for k, (axis, number) in enumerate(((axes.current, current), (axes.value, value)))
    )
    return {
        "current": _finite(current[0]),
        "time": _finite(value[0]),
        "sd_current": sd_current,
        "sd_time": sd_value,
        "curve": _nearest(curves, place),
    }


def placed(draft: Draft, current: float, value: float) -> dict[str, Any]:
    """The place of a current and a value; errors as for `located`."""
    axes, _ = _read(draft)
    for axis, number in ((axes.current, current), (axes.value, value)):
        if axis.scale == "log" and number <= 0:
            raise InputError(f"{number:g} is not on a log axis", "A number above 0")
    try:
        with np.errstate(all="ignore"):
            ((x, y),) = axes.places([current], [value])
    except AxesError as error:
        raise InputError(error.problem) from None
    return {"x": float(x), "y": float(y)}


def _read(draft: Draft) -> tuple[Axes, tuple[ReadCurve, ...]]:
    reading = draft.work.reading
    if reading is None or reading.axes is None:
        raise Unknown("The axes are not known yet", "", "Wait for the reading, or give marks")
    return reading.axes, reading.curves


def _relative(axis: Axis, number: float, variance: float) -> float | None:
    """A relative standard uncertainty from the variance of the scaled coordinate."""
    sd = float(np.sqrt(max(variance, 0.0)))
    if axis.scale == "linear":
        return _finite(sd / abs(number)) if number else None
    return _finite(sd * LN10)


def _nearest(curves: tuple[ReadCurve, ...], place: tuple[float, float]) -> dict[str, Any] | None:
    best: tuple[float, int, int] | None = None
    for index, read in enumerate(curves):
        if read.trace is not None and len(read.trace.places):
            away = np.hypot(*(read.trace.places - place).T)
            nearest = int(np.argmin(away))
            if away[nearest] <= NEAR and (best is None or away[nearest] < best[0]):
                best = (float(away[nearest]), index, nearest)
    if best is None:
        return None
    _, index, nearest = best
    read = curves[index]
    current, value = float(read.current[nearest]), float(read.value[nearest])
    return {
        "index": index,
        "edge": read.curve.edge,
        "current": current,
        "time": value,
        "interval_current": _interval(current, float(read.sd_current[nearest])),
        "interval_time": _interval(value, float(read.sd_value[nearest])),
    }


def _interval(value: float, sd: float) -> list[float] | None:
    if not np.isfinite(sd):
        return None
    factor = float(np.exp(COVERAGE_FACTOR * sd))
    return [value / factor, value * factor]


def _finite(number: Any) -> float | None:
    return float(number) if np.isfinite(number) else None
