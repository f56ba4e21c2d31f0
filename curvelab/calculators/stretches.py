"""Who surely clears first, stretch by stretch of current, from the first to the last current two devices tabulate."""

from collections.abc import Callable, Iterator, Sequence
from itertools import combinations, groupby, pairwise
from typing import Any

import numpy as np
from numpy.typing import NDArray

from curvelab.calculators.compare import sooner_of
from curvelab.calculators.reach import knots_of, margin_of
from curvelab.devices.device import Device
from curvelab.devices.names import names_of
from curvelab.records.arrays import Floats
from curvelab.records.stretch import Sides, Stretch

PIECES, APART = 16, 1.05
"""Where something changes, the current is looked at in so many pieces again; knots further apart than the ratio too."""
SLIVER = 1e-8
"""Relative width to which a change is found; a stretch no wider is the two sides of one tabulated step."""

Sooner = Callable[[Floats], NDArray[Any]]


EVERY_PAIR = 4
"""Up to so many devices each is set beside each; of more, each beside the next."""


def sides_of(devices: Sequence[Device]) -> tuple[Sides, ...]:
    """The stretches of each pair of devices, in the order given; of more than four, of each and the next only.

    Raises
    ------
    DeviceError
        As for `stretches`.
    """
    named = list(zip(names_of([device.record for device in devices]), devices, strict=True))
    pairs = combinations(named, 2) if len(named) <= EVERY_PAIR else pairwise(named)
    return tuple(_sides(a, b) for a, b in pairs)


def stretches(a: Device, b: Device) -> tuple[Stretch, ...]:
    """Every stretch in rising order, each beginning where the one before ends.

    A device is named where its slow edge lies surely, by the interval of 95 %, below the fast edge of the other; by the
    lines alone where their uncertainty is not known.

    Raises
    ------
    DeviceError
        An adjustable device without its settings, or currents that cannot be turned into amperes.
    """
    first, second = names_of([a.record, b.record])
    return _sides((first, a), (second, b)).stretches


def _sides(one: tuple[str, Device], other: tuple[str, Device]) -> Sides:
    (first, a), (second, b) = one, other
    a_margin, b_margin = margin_of(b, a), margin_of(a, b)

    def sooner(current_a: Floats) -> NDArray[Any]:
        return sooner_of((first, second), a_margin(current_a), b_margin(current_a))

    knots = knots_of(a, b)
    pieces = [
        np.geomspace(*two, PIECES, endpoint=False) if two[1] > APART * two[0] else two[:1] for two in pairwise(knots)
    ]
    cuts = [float(knots[0]), *_changes(sooner, np.append(np.concatenate(pieces), knots[-1])), float(knots[-1])]
    wide = [(start, end) for start, end in pairwise(cuts) if _is_wide(start, end)]
    named = zip(wide, sooner(np.sqrt([start * end for start, end in wide])), strict=True)
    alike = (list(group) for _, group in groupby(named, key=lambda each: each[1]))
    found = (Stretch(from_a=group[0][0][0], to_a=group[-1][0][1], sooner=str(group[0][1])) for group in alike)
    return Sides(a=first, b=second, stretches=tuple(found))


def _is_wide(start: float, end: float) -> bool:
    return end > start * (1 + SLIVER)


def _changes(sooner: Sooner, currents: Floats) -> Iterator[float]:
    """The currents at which the answer changes, from rising currents close enough that none hides between two."""
    answers = sooner(currents)
    for place in np.flatnonzero(answers[:-1] != answers[1:]):
        start, end = float(currents[place]), float(currents[place + 1])
        if _is_wide(start, end):
            yield from _changes(sooner, np.geomspace(start, end, PIECES + 1))
        else:
            yield float(np.sqrt(start * end))
