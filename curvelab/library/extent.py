"""The coarse extent of a device's band: what the search over bands asks first, before it asks a device exactly.

At each of a row of fixed times stand four currents in A. ``holds_surely`` and ``trips_surely`` are on the safe side of
what the device would answer with its 95 % interval, ``holds_perhaps`` and ``trips_perhaps`` on the other side, so that
only a device between the two need be asked.
"""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import numpy as np

from curvelab.devices.breaking import breaking_capacity_a
from curvelab.devices.meaning import TOTAL, meaning_of
from curvelab.devices.question import Question, path_of, sees
from curvelab.records.arrays import Floats
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.device import DeviceRecord, Nameplate

STEP_TIMES_S = 10.0 ** np.arange(-3.0, 4.01, 0.25)
"""The fixed times: a quarter of a decade apart, so that few devices lie between two of them."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Extent:
    """The currents in A at `STEP_TIMES_S`, and between which currents the edges answer at all."""

    holds_surely: Floats
    holds_perhaps: Floats
    trips_surely: Floats
    trips_perhaps: Floats
    holds_from_a: float
    trips_to_a: float


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Bounds:
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


def extent_of(record: DeviceRecord) -> Extent | None:
    """The extent of a device's band; None where it has no time curve or needs settings."""
    plate = record.nameplate
    way = path_of(Question(), plate, "A")
    curves = [curve for curve in record.curves if curve.quantity == "time" and sees(curve.element, way)]
    if not curves or is_adjustable(record):
        return None
    elements = _by_element(curves)
    fast = {name: [curve for curve in own if curve.edge == "fast"] for name, own in elements.items()}
    slow = {name: [curve for curve in own if curve.edge == "slow"] for name, own in elements.items()}
    holds = [_holds([_bounds(curve, plate) for curve in own]) for own in fast.values()]
    trips = [_trips([(_bounds(curve, plate), _is_total(curve, plate)) for curve in own]) for own in slow.values()]
    capacity_a = breaking_capacity_a(plate, Question(), way)
    limit_a = np.inf if capacity_a is None else capacity_a
    ends = [_end_a(curve, plate, 0) for own in fast.values() for curve in own if not curve.leaves_top]
    last = [_end_a(curve, plate, -1) for own in slow.values() for curve in own]
    return Extent(
        holds_surely=np.minimum(np.min([surely for surely, _ in holds], axis=0), limit_a),
        # An element overtaken by another says nothing any more, and an answer has the interval of the one it is from.
        holds_perhaps=np.max([perhaps for _, perhaps in holds], axis=0),
        trips_surely=np.max([surely for surely, _ in trips], axis=0),
        trips_perhaps=np.min([perhaps for _, perhaps in trips], axis=0),
        holds_from_a=max(ends, default=0.0),
        trips_to_a=min(last, default=0.0) if capacity_a is None else capacity_a,
    )


def _by_element(curves: Iterable[Curve]) -> Mapping[str, list[Curve]]:
    elements: dict[str, list[Curve]] = {}
    for curve in curves:
        elements.setdefault(curve.element, []).append(curve)
    return elements


def _unit_a(base: str, plate: Nameplate) -> float | None:
    return {"A": 1.0, "xIn": plate.rated_current_a, "xIdn": plate.rated_residual_current_a}.get(base)


def _end_a(curve: Curve, plate: Nameplate, index: int) -> float:
    return float(curve.parts[index].current[index]) * (_unit_a(curve.base, plate) or np.nan)


def _is_total(curve: Curve, plate: Nameplate) -> bool:
    return meaning_of(curve, plate.kind) in TOTAL


def _bounds(curve: Curve, plate: Nameplate) -> _Bounds:
    """A displacement along the normal moves neither coordinate further than its length."""
    current = np.concatenate([part.current for part in curve.parts]) * (_unit_a(curve.base, plate) or np.nan)
    value = np.concatenate([part.value for part in curve.parts])
    by_current = np.concatenate([part.sd_current for part in curve.parts])
    by_value = np.concatenate([part.sd_value for part in curve.parts])
    with np.errstate(divide="ignore"):
        weight = np.nan_to_num(by_current**-2.0, nan=0.0) + np.nan_to_num(by_value**-2.0, nan=0.0)
        moved = np.where(weight > 0, np.exp(COVERAGE_FACTOR / np.sqrt(weight)), 1.0)
    return _Bounds(
        low_a=current / moved,
        low_s=value / moved,
        high_a=current * moved,
        high_s=value * moved,
        whole=len(curve.parts) == 1 and curve.conditions.time_kind != "virtual",
    )


def _holds(curves: list[_Bounds]) -> tuple[Floats, Floats]:
    """Up to which current an element holds for each time: surely by all its curves, perhaps by any."""
    nothing = np.zeros(STEP_TIMES_S.size)
    if not curves:
        return nothing, nothing
    time = STEP_TIMES_S[:, None]
    surely = [np.where(each.low_s >= time, each.low_a, 0.0).max(axis=1) if each.whole else nothing for each in curves]
    perhaps = [_where_first(each.high_s < time, each.high_a, float(each.high_a.max())) for each in curves]
    return np.min(surely, axis=0), np.max(perhaps, axis=0)


def _trips(curves: list[tuple[_Bounds, bool]]) -> tuple[Floats, Floats]:
    """From which current an element trips within each time: surely by all its curves, perhaps by any."""
    never = np.full(STEP_TIMES_S.size, np.inf)
    if not any(total for _, total in curves):
        return never, never
    time = STEP_TIMES_S[:, None]
    surely = [
        np.where(each.high_s <= time, each.high_a, np.inf).min(axis=1) if each.whole and total else never
        for each, total in curves
    ]
    perhaps = [_above(each.low_s > time, each.low_a) for each, total in curves if total]
    return np.max(surely, axis=0), np.min(perhaps, axis=0)


def _where_first(chosen: np.ndarray[tuple[int, int], np.dtype[np.bool_]], values: Floats, other: float) -> Floats:
    """The least value of those chosen in each row, or the other where none is."""
    least = np.where(chosen, values, np.inf).min(axis=1)
    return np.where(np.isinf(least), other, least)


def _above(chosen: np.ndarray[tuple[int, int], np.dtype[np.bool_]], values: Floats) -> Floats:
    """The greatest value of those chosen in each row; the least of all where none is, infinite where all are."""
    greatest = np.where(chosen, values, -np.inf).max(axis=1)
    greatest = np.where(np.isneginf(greatest), values.min(), greatest)
    return np.where(chosen.all(axis=1), np.inf, greatest)
