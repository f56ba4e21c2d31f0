"""What is plausible of one device beyond its standard: order of edges, mean line, adiabatic end, instantaneous band."""

from collections.abc import Iterator
from math import log

import numpy as np

from curvelab.devices.device import Device
from curvelab.devices.meaning import meaning_of
from curvelab.errors import DeviceError
from curvelab.records.arrays import Floats
from curvelab.records.band import Band
from curvelab.records.curve import COVERAGE_FACTOR, Curve, Edge
from curvelab.records.evaluation import Bounded
from curvelab.records.finding import Finding
from curvelab.standards.doubt import Expectation, Ratio, doubt
from curvelab.units import written_current, written_time

_PHYSICS = "Follows from what the lines mean"
_PRACTICE = "Common practice, no source"

IN_ORDER = Expectation(
    name="edges in order",
    words="The slow edge takes at least as long as the fast edge",
    limit=1.0,
    permitted="at_least",
    source=_PHYSICS,
)
MEAN_INSIDE = Expectation(
    name="mean line inside",
    words="The mean line lies between the edges",
    limit=1.0,
    permitted="at_least",
    source=_PHYSICS,
)
ADIABATIC = Expectation(
    name="adiabatic end",
    words="Towards its end the pre-arcing time falls at least as current^-1.9",
    limit=1.9,
    permitted="at_least",
    source="Melting without loss of heat takes a constant I2t, an exponent of 2; 5 % for reading it: common practice",
)
INSTANTANEOUS = Expectation(
    name="instantaneous ratio",
    words="The instantaneous currents at 0.1 s lie at most 2.1 apart",
    limit=2.1,
    permitted="at_most",
    source=f"{_PRACTICE}; the widest band of IEC 60898-1 is 2",
)

SHORT_S = 0.1
"""A pre-arcing line that ends below it reaches into the adiabatic range."""
STRETCH = 10**0.5
"""The last stretch of a line, as a ratio of times."""


def doubts_about(device: Device) -> tuple[Finding, ...]:
    """Advisory findings on the device's curves, whatever its standard; none where there is nothing to compare."""
    return tuple(_doubts(device))


def _doubts(device: Device) -> Iterator[Finding]:
    for band in device.bands:
        if band.quantity == "time":
            yield from _of_band(device, band)
    yield from _instantaneous(device)


def _of_band(device: Device, band: Band) -> Iterator[Finding]:
    in_order = _least_ratio(band, (("slow", "fast"),))
    if in_order is not None:
        yield doubt(device.key, IN_ORDER, in_order)
    inside = _least_ratio(band, (("mean", "fast"), ("slow", "mean")))
    if inside is not None:
        yield doubt(device.key, MEAN_INSIDE, inside)
    for curve in band.edges.values():
        if meaning_of(curve, device.nameplate.kind) == "pre_arcing":
            end = _exponent_at_end(curve)
            if end is not None:
                yield doubt(device.key, ADIABATIC, end)


def _least_ratio(band: Band, pairs: tuple[tuple[Edge, Edge], ...]) -> Ratio | None:
    """The least ratio of the first edge of a pair to the second, where both are drawn."""
    ratios = [ratio for longer, shorter in pairs for ratio in _ratios(band, longer, shorter)]
    return min(ratios, key=lambda ratio: ratio.value, default=None)


def _ratios(band: Band, longer: Edge, shorter: Edge) -> Iterator[Ratio]:
    edges = band.edges
    if longer not in edges or shorter not in edges:
        return
    currents = np.unique(np.concatenate([part.current for edge in (longer, shorter) for part in edges[edge].parts]))
    above, below = band.values(longer, currents), band.values(shorter, currents)
    if above is None or below is None or not (both := np.isfinite(above.value) & np.isfinite(below.value)).any():
        return
    with np.errstate(invalid="ignore"):
        at = int(np.nanargmin(np.where(both, above.value / below.value, np.nan)))
    place = f"At {written_current(float(currents[at]), band.base)}"
    yield Ratio(value=float(above.value[at] / below.value[at]), interval=_spread(above, below, at), place=place)


def _spread(above: Bounded, below: Bounded, at: int) -> tuple[float, float] | None:
    lower, upper = float(above.lower[at] / below.upper[at]), float(above.upper[at] / below.lower[at])
    return None if np.isnan(lower) or np.isnan(upper) else (lower, upper)


def _exponent_at_end(curve: Curve) -> Ratio | None:
    """How steep the last stretch is: -d log t / d log I, with what its points leave open."""
    part = curve.parts[-1]
    end_s = float(part.value[-1])
    if part.current.size < 2 or end_s > SHORT_S or part.value[0] < end_s * STRETCH:
        return None
    start = float(_at(part.value, part.current, end_s * STRETCH))
    run = log(float(part.current[-1]) / start)
    if run <= 0:
        return None
    exponent = log(STRETCH) / run
    known = part.sd_current[np.isfinite(part.sd_current)]
    place = f"{written_time(end_s * STRETCH)} to {written_time(end_s)}"
    if known.size == 0:
        return Ratio(value=exponent, place=place)
    off = COVERAGE_FACTOR * 2**0.5 * float(known[-1]) / run
    return Ratio(value=exponent, interval=(exponent / (1 + off), exponent * (1 + off)), place=place)


def _at(value: Floats, current: Floats, wanted: float) -> float:
    return float(np.exp(np.interp(np.log(wanted), np.log(value[::-1]), np.log(current[::-1]))))


def _instantaneous(device: Device) -> Iterator[Finding]:
    if device.nameplate.kind not in ("mcb", "rcbo") or not device.is_set:
        return
    try:
        currents = device.trip_current(0.1)
    except DeviceError:
        return
    trips, holds = currents.trips, currents.holds
    if trips is None or holds is None or (trips.status, holds.status) != ("value", "value"):
        return
    interval = float(trips.lower / holds.upper), float(trips.upper / holds.lower)
    known = not any(map(np.isnan, interval))
    ratio = Ratio(value=float(trips.value / holds.value), interval=interval if known else None)
    yield doubt(device.key, INSTANTANEOUS, ratio)
