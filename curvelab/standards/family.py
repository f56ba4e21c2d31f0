"""What is plausible of a family: larger ratings trip later, and about in proportion to their ratings."""

from collections.abc import Iterator, Sequence
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.devices.device import Device
from curvelab.errors import DeviceError
from curvelab.records.answer import EdgeAnswer
from curvelab.records.arrays import Floats
from curvelab.records.finding import Finding
from curvelab.standards.doubt import Expectation, Ratio, doubt
from curvelab.units import written_time

ORDER = Expectation(
    name="rating order",
    words="At every time a larger rating needs more current than the next smaller one",
    limit=1.0,
    permitted="at_least",
    source="Common practice, no source",
)
SPACING = Expectation(
    name="rating spacing",
    words="Currents of neighbouring ratings are apart as their ratings, within a factor of 1.5",
    limit=1.5,
    permitted="at_most",
    source="Common practice, no source",
)

TIMES_S: Floats = np.geomspace(1e-3, 1e4, 57)


def doubts_about_family(devices: Sequence[Device]) -> tuple[Finding, ...]:
    """Advisory findings on each two neighbouring ratings of one kind, characteristic, standard and series."""
    families: dict[tuple[str | None, ...], dict[float, Device]] = {}
    for device in devices:
        plate = device.nameplate
        if plate.rated_current_a is not None and device.is_set:
            family = (plate.kind, plate.characteristic, plate.standard, plate.maker, plate.series)
            families.setdefault(family, {})[plate.rated_current_a] = device
    return tuple(
        finding
        for members in families.values()
        for smaller, larger in pairwise(sorted(members))
        for finding in _doubts(members[smaller], members[larger], larger / smaller)
    )


def _doubts(smaller: Device, larger: Device, ratings: float) -> Iterator[Finding]:
    try:
        below, above = smaller.trip_current(TIMES_S), larger.trip_current(TIMES_S)
    except DeviceError:
        return
    for edge in ("trips", "mean", "holds"):
        less, more = getattr(below, edge), getattr(above, edge)
        if less is None or more is None:
            continue
        ratio = np.where(_known(less) & _known(more), more.value / less.value, np.nan)
        if np.isnan(ratio).all():
            continue
        yield doubt(larger.key, ORDER, _ratio(ratio, less, more, smaller, int(np.nanargmin(ratio))))
        apart = np.maximum(ratio / ratings, ratings / ratio)
        worst = int(np.nanargmax(apart))
        yield doubt(larger.key, SPACING, Ratio(value=float(apart[worst]), place=_place(smaller, worst)))
        return


def _known(answer: EdgeAnswer) -> NDArray[np.bool_]:
    values: NDArray[np.bool_] = np.asarray(answer.status) == "value"
    return values


def _ratio(ratio: Floats, less: EdgeAnswer, more: EdgeAnswer, smaller: Device, at: int) -> Ratio:
    lower = float(np.asarray(more.lower)[at] / np.asarray(less.upper)[at])
    upper = float(np.asarray(more.upper)[at] / np.asarray(less.lower)[at])
    interval = None if np.isnan(lower) or np.isnan(upper) else (lower, upper)
    return Ratio(value=float(ratio[at]), interval=interval, place=_place(smaller, at))


def _place(smaller: Device, at: int) -> str:
    return f"Against {smaller.key} at {written_time(float(TIMES_S[at]))}"
