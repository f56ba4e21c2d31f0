"""Two or more devices side by side: their times, margins, crossings, and up to which current each clears first."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from curvelab.calculators.margin import Asked, Margin, margin_between
from curvelab.calculators.reach import Reach, clears_first, contacts, knots_of, margin_of
from curvelab.devices.device import Device
from curvelab.devices.names import names_of
from curvelab.errors import DeviceError
from curvelab.records.answer import TripTimes
from curvelab.records.arrays import Floats

MOST_DEVICES = 8
_DEFAULT_CURRENTS = 200


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Ratio:
    """Slow time of the one over fast time of the other, with its 95 % interval; below 1 the one surely clears first."""

    value: Floats
    lower: Floats
    upper: Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Pair:
    """Two devices a and b at the currents asked.

    Parameters
    ----------
    a, b : str
        Their names, see `curvelab.devices.names`.
    b_over_a, a_over_b : Ratio
        Slow time of b over fast time of a, and the reverse.
    sooner : array of str
        The name of the device that surely clears first, ``undecided`` where the bands or their intervals overlap,
        ``not_covered`` where a curve does not reach.
    b_clears_first, a_clears_first : Reach
        The stretch of current in which b (a) clears before the other may act.
    contacts_a : tuple of float
        Currents in A at which the slow edge of one crosses the fast edge of the other.
    """

    a: str
    b: str
    b_over_a: Ratio
    a_over_b: Ratio
    sooner: NDArray[Any]
    b_clears_first: Reach
    a_clears_first: Reach
    contacts_a: tuple[float, ...]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Comparison:
    """Devices by name side by side at currents in A; pairs in the order in which the devices were given."""

    devices: tuple[str, ...]
    current_a: Floats
    times: tuple[TripTimes, ...]
    pairs: tuple[Pair, ...]

    @property
    def clears_first_up_to(self) -> Reach:
        """Of two devices: up to which current the second clears first."""
        return self.pairs[0].b_clears_first


def compare(devices: Sequence[Device], currents: ArrayLike | None = None) -> Comparison:
    """Compare two to eight devices.

    Parameters
    ----------
    devices : sequence of Device
        At their settings; in a pair the first is upstream.
    currents : array, optional
        Prospective currents in A, shape (n,); without them, evenly spread over what the curves cover.

    Raises
    ------
    DeviceError
        Too few or too many devices, a device without curves, an adjustable one without settings, a wrong current.
    """
    if not 2 <= len(devices) <= MOST_DEVICES:
        raise DeviceError(f"{len(devices)} devices cannot be compared", f"2 to {MOST_DEVICES} devices")
    for device in devices:
        if not any(curve.quantity == "time" for curve in device.record.curves):
            raise DeviceError(f"'{device.key}' has no time-current curve to compare", "", "Compare devices with curves")
    current_a = _spread(devices) if currents is None else np.ravel(np.asarray(currents, dtype=np.float64))
    asked = [Asked(device, current_a) for device in devices]
    names = names_of([device.record for device in devices])
    return Comparison(
        devices=names,
        current_a=current_a,
        times=tuple(each.times for each in asked),
        pairs=tuple(_pair(two, own) for two, own in zip(combinations(asked, 2), combinations(names, 2), strict=True)),
    )


def _spread(devices: Sequence[Device]) -> Floats:
    knots = knots_of(*devices)
    return np.geomspace(knots[0], knots[-1], _DEFAULT_CURRENTS)


def _pair(asked: tuple[Asked, Asked], names: tuple[str, str]) -> Pair:
    a, b = asked
    knots = knots_of(a.device, b.device)
    b_first, a_first = margin_between(a, b), margin_between(b, a)
    b_at, a_at = margin_of(a.device, b.device), margin_of(b.device, a.device)
    b_knots, a_knots = b_at(knots), a_at(knots)
    return Pair(
        a=names[0],
        b=names[1],
        b_over_a=_ratio(b_first),
        a_over_b=_ratio(a_first),
        sooner=sooner_of(names, a_first, b_first),
        b_clears_first=clears_first(b_at, knots, b_knots),
        a_clears_first=clears_first(a_at, knots, a_knots),
        contacts_a=tuple(sorted({*contacts(b_at, knots, b_knots), *contacts(a_at, knots, a_knots)})),
    )


def _ratio(margin: Margin) -> Ratio:
    return Ratio(value=np.exp(-margin.best), lower=np.exp(-margin.upper), upper=np.exp(-margin.lower))


def sooner_of(names: tuple[str, str], a_first: Margin, b_first: Margin) -> NDArray[Any]:
    """Who surely clears first, see `Pair`; an interval that is not known leaves the best value to say."""
    known = ~(np.isnan(a_first.best) & np.isnan(b_first.best))
    longest = max(map(len, (*names, "not_covered")))
    result = np.where(known, "undecided", "not_covered").astype(np.dtype(("U", longest)))
    for name, margin in zip(names, (a_first, b_first), strict=True):
        result[margin.sure > 0] = name
    return result
