"""The margin between two devices: how much longer the one surely waits than the other surely takes."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from curvelab.devices.device import Device
from curvelab.devices.meaning import TOTAL
from curvelab.devices.question import Path
from curvelab.records.answer import EdgeAnswer, TripTimes
from curvelab.records.arrays import Floats
from curvelab.records.curve import Edge, SheetKey


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Margin:
    """ln(time the upstream device surely waits / time the downstream device surely takes to clear).

    Above 0 the downstream device clears first. NaN where either is not known; ``lower`` and ``upper`` are the 95 %
    interval, NaN where the uncertainty is not known. -inf where the downstream device never trips, +inf where the
    upstream device never does.
    """

    best: Floats
    lower: Floats
    upper: Floats

    @property
    def sure(self) -> Floats:
        """What decides: the lower end of the interval; the best value where the uncertainty is not known."""
        return np.where(np.isnan(self.lower), self.best, self.lower)


class Asked:
    """A device's times at currents in A; those with intervals of the curves' own only when they are needed."""

    def __init__(self, device: Device, current_a: Floats, path: Path | None = None) -> None:
        self.device = device
        self.current_a = current_a
        self.path = path
        self.times = device.trip_time(current_a, path=path)

    @cached_property
    def own(self) -> TripTimes:
        """The same with intervals that leave out what the curves of one sheet share."""
        return self.device.trip_time(self.current_a, path=self.path, own=True)


def margin_between(upstream: Asked, downstream: Asked) -> Margin:
    """The margin at each current asked of both.

    What the calibration of one sheet does to both curves alike is not counted: it moves them together.
    """
    fast, slow = upstream.times.fast, downstream.times.slow
    if fast is None or slow is None or slow.meaning not in TOTAL:
        unknown = np.full(upstream.current_a.shape, np.nan)
        return Margin(best=unknown, lower=unknown, upper=unknown)
    with np.errstate(invalid="ignore", divide="ignore"):
        best = np.log(_waits(fast)) - np.log(_clears(slow))
    sheet = _one_sheet(upstream.device, "fast")
    shared = sheet is not None and sheet == _one_sheet(downstream.device, "slow")
    waits = _reach(fast, upstream.own.fast if shared else None)
    clears = _reach(slow, downstream.own.slow if shared else None)
    with np.errstate(invalid="ignore"):
        lower, upper = best - _together(waits[0], clears[1]), best + _together(waits[1], clears[0])
    return Margin(best=best, lower=lower, upper=upper)


def _waits(answer: EdgeAnswer) -> Floats:
    """The time in s an upstream device surely waits: at least its fast edge's."""
    return _known(answer, "at_least")


def _clears(answer: EdgeAnswer) -> Floats:
    """The time in s a downstream device surely takes to clear: at most its slow edge's."""
    return _known(answer, "at_most")


def _known(answer: EdgeAnswer, bound: str) -> Floats:
    status = np.asarray(answer.status)
    known = (status == "value") | (status == bound)
    return np.where(known, answer.value, np.where(status == "never", np.inf, np.nan))


def _one_sheet(device: Device, edge: Edge) -> SheetKey | None:
    """The sheet all lines of an edge come from; None where it is not one."""
    sheets = {curve.sheet for curve in device.record.curves if curve.edge == edge and curve.quantity == "time"}
    return next(iter(sheets)) if len(sheets) == 1 else None


_Reach = tuple[tuple[Floats, Floats], tuple[Floats, Floats]]
"""(own, common) downwards, and upwards, in ln time."""


def _reach(total: EdgeAnswer, own: EdgeAnswer | None) -> _Reach:
    """95 % reach of a time downwards and upwards; without ``own``, all of it is. A bound is open on its other side."""
    down, up = _reaches(total)
    if own is None:
        nothing = np.zeros_like(down)
        return (down, nothing), (up, nothing)
    own_down, own_up = _reaches(own)
    return (own_down, _rest(down, own_down)), (own_up, _rest(up, own_up))


def _reaches(answer: EdgeAnswer) -> tuple[Floats, Floats]:
    status = np.asarray(answer.status)
    down = np.where(status == "at_most", np.inf, _log_ratio(answer.value, answer.lower))
    up = np.where(status == "at_least", np.inf, _log_ratio(answer.upper, answer.value))
    never = status == "never"
    return np.where(never, 0.0, down), np.where(never, 0.0, up)


def _log_ratio(larger: float | Floats, smaller: float | Floats) -> Floats:
    return np.asarray(np.log(larger) - np.log(smaller))


def _rest(total: Floats, own: Floats) -> Floats:
    open_end = np.isinf(total)
    squares = np.where(open_end, 0.0, total) ** 2 - np.where(open_end, 0.0, own) ** 2
    return np.asarray(np.sqrt(np.maximum(squares, 0.0)))


def _together(first: tuple[Floats, Floats], second: tuple[Floats, Floats]) -> Floats:
    """Own parts are independent, what is common moves both times the same way."""
    return np.asarray(np.sqrt(first[0] ** 2 + second[0] ** 2 + (first[1] - second[1]) ** 2))
