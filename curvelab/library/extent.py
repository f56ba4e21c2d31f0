"""The coarse extent of a device's band: what the search over bands asks first, before it asks a device exactly.

At each of a row of fixed times stand four currents in A. ``holds_surely`` and ``trips_surely`` are on the safe side of
what the device would answer with its 95 % interval, ``holds_perhaps`` and ``trips_perhaps`` on the other side, so that
only a device between the two need be asked.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from curvelab.devices.breaking import breaking_capacity_a
from curvelab.devices.meaning import TOTAL, meaning_of
from curvelab.devices.question import Question, path_of, sees
from curvelab.records.arrays import Floats
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.device import DeviceRecord, Nameplate

STEP_TIMES_S = 10.0 ** np.arange(-3.0, 4.01, 0.5)
"""The fixed times: half a decade apart, so that few devices lie between two of them."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Extent:
    """The currents in A at the times, and between which currents the edges answer at all."""

    holds_surely: Floats
    holds_perhaps: Floats
    trips_surely: Floats
    trips_perhaps: Floats
    holds_from_a: float
    trips_to_a: float


class _Bounds(NamedTuple):
    """One curve's points moved by its interval towards smaller and towards larger currents and times."""

    low_a: Floats
    low_s: Floats
    high_a: Floats
    high_s: Floats
    whole: bool


def is_adjustable(record: DeviceRecord) -> bool:
    """Whether the device can only be asked at settings, or lacks the rating its curves count in."""
    times = [curve for curve in record.curves if curve.quantity == "time"]
    return bool(record.nameplate.settings) or any(_unit_a(curve.base, record.nameplate) is None for curve in times)


def extents_of(records: Sequence[DeviceRecord], times_s: Floats = STEP_TIMES_S) -> list[Extent | None]:
    """The extent of each device's band at times; None where it has no time curve or needs settings."""
    acting = [() if is_adjustable(record) else _acting(record) for record in records]
    bounds = iter(_bounds([curve for curves in acting for curve in curves]))
    return [
        _extent(record.nameplate, [(curve, next(bounds)) for curve in curves], times_s) if curves else None
        for record, curves in zip(records, acting, strict=True)
    ]


def _acting(record: DeviceRecord) -> tuple[tuple[Curve, float], ...]:
    """The curves that see a current when nothing else is said, and the amperes of one unit of their base."""
    plate = record.nameplate
    way = path_of(Question(), plate, "A")
    return tuple(
        (curve, _unit_a(curve.base, plate) or np.nan)
        for curve in record.curves
        if curve.quantity == "time" and sees(curve.element, way)
    )


def _extent(plate: Nameplate, curves: Sequence[tuple[tuple[Curve, float], _Bounds]], times_s: Floats) -> Extent:
    capacity_a = breaking_capacity_a(plate, Question(), path_of(Question(), plate, "A"))
    elements = dict.fromkeys(curve.element for (curve, _), _ in curves)
    own = [[one for one in curves if one[0][0].element == element] for element in elements]
    holds = [_holds([bounds for (curve, _), bounds in each if curve.edge == "fast"], times_s) for each in own]
    trips = [
        _trips(
            [(bounds, meaning_of(curve, plate.kind) in TOTAL) for (curve, _), bounds in each if curve.edge == "slow"],
            times_s,
        )
        for each in own
    ]
    starts = [_end_a(curve, 0) for curve, _ in curves if curve[0].edge == "fast" and not curve[0].leaves_top]
    ends = [_end_a(curve, -1) for curve, _ in curves if curve[0].edge == "slow"]
    surely = _least([one for one, _ in holds])
    # An element overtaken by another says nothing any more, and an answer has the interval of the one it is from.
    return Extent(
        holds_surely=_known(surely if capacity_a is None else np.minimum(surely, capacity_a), 0.0),
        holds_perhaps=_known(_greatest([other for _, other in holds]), np.inf),
        trips_surely=_known(_greatest([one for one, _ in trips]), np.inf),
        trips_perhaps=_known(_least([other for _, other in trips]), 0.0),
        holds_from_a=max(starts, default=0.0),
        trips_to_a=min(ends, default=0.0) if capacity_a is None else capacity_a,
    )


def _known(currents: Floats, otherwise: float) -> Floats:
    """Currents with the side that leaves the device to be asked where numbers are too large to be told."""
    return np.where(np.isnan(currents), otherwise, currents)


def _unit_a(base: str, plate: Nameplate) -> float | None:
    return {"A": 1.0, "xIn": plate.rated_current_a, "xIdn": plate.rated_residual_current_a}.get(base)


def _end_a(curve: tuple[Curve, float], index: int) -> float:
    line, unit_a = curve
    return float(line.parts[index].current[index]) * unit_a


def _bounds(curves: Sequence[tuple[Curve, float]]) -> list[_Bounds]:
    """A displacement along the normal moves neither coordinate further than its length. All curves in one go."""
    if not curves:
        return []
    counts = [sum(part.current.size for part in curve.parts) for curve, _ in curves]
    parts = [part for curve, _ in curves for part in curve.parts]
    current = np.concatenate([part.current for part in parts])
    value = np.concatenate([part.value for part in parts])
    by_current = np.concatenate([part.sd_current for part in parts])
    by_value = np.concatenate([part.sd_value for part in parts])
    with np.errstate(all="ignore"):
        current = current * np.repeat([unit_a for _, unit_a in curves], counts)
        # An unknown uncertainty has no weight; where none is known the curve is taken as it is.
        weight = np.where(by_current >= 0, by_current**-2.0, 0.0) + np.where(by_value >= 0, by_value**-2.0, 0.0)
        moved = np.where(weight > 0, np.exp(COVERAGE_FACTOR / np.sqrt(weight)), 1.0)
        columns = np.stack([current / moved, value / moved, current * moved, value * moved])
    stops = np.cumsum(counts)
    return [
        _Bounds(*columns[:, stop - count : stop].copy(), _is_plain(curve))  # type: ignore[call-arg]
        for (curve, _), count, stop in zip(curves, counts, stops, strict=True)
    ]


def _is_plain(curve: Curve) -> bool:
    """Whether the device's answer lies within these bounds all along: no gap, real times."""
    return len(curve.parts) == 1 and curve.conditions.time_kind != "virtual"


def _holds(curves: Sequence[_Bounds], times_s: Floats) -> tuple[Floats, Floats]:
    """Up to which current an element holds for each time: surely by all its curves, perhaps by any."""
    nothing, time = np.zeros(times_s.size), times_s[:, None]
    if not curves:
        return nothing, nothing
    surely = [np.where(each.low_s >= time, each.low_a, 0.0).max(axis=1) if each.whole else nothing for each in curves]
    perhaps = [_where_first(each.high_s < time, each.high_a, each.high_a.max()) for each in curves]
    return _least(surely), _greatest(perhaps)


def _trips(curves: Sequence[tuple[_Bounds, bool]], times_s: Floats) -> tuple[Floats, Floats]:
    """From which current an element trips within each time: surely by all its curves, perhaps by any."""
    never, time = np.full(times_s.size, np.inf), times_s[:, None]
    if not any(total for _, total in curves):
        return never, never
    surely = [
        np.where(each.high_s <= time, each.high_a, np.inf).min(axis=1) if each.whole and total else never
        for each, total in curves
    ]
    perhaps = [_above(each.low_s > time, each.low_a) for each, total in curves if total]
    return _greatest(surely), _least(perhaps)


def _least(rows: Sequence[Floats]) -> Floats:
    return rows[0] if len(rows) == 1 else np.asarray(np.min(rows, axis=0))


def _greatest(rows: Sequence[Floats]) -> Floats:
    return rows[0] if len(rows) == 1 else np.asarray(np.max(rows, axis=0))


def _where_first(chosen: NDArray[np.bool_], values: Floats, other: float) -> Floats:
    """The least value of those chosen in each row, or the other where none is."""
    least = np.where(chosen, values, np.inf).min(axis=1)
    return np.where(np.isinf(least), other, least)


def _above(chosen: NDArray[np.bool_], values: Floats) -> Floats:
    """The greatest value of those chosen in each row; the least of all where none is, infinite where all are."""
    greatest = np.where(chosen, values, -np.inf).max(axis=1)
    greatest = np.where(np.isneginf(greatest), values.min(), greatest)
    return np.where(chosen.all(axis=1), np.inf, greatest)
