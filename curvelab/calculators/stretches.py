"""Who surely clears first, stretch by stretch of current, from the first to the last current two devices tabulate."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import groupby, pairwise
from typing import Any

import numpy as np
from numpy.typing import NDArray

from curvelab.calculators.compare import sooner_of
from curvelab.calculators.reach import knots_of, margin_of
from curvelab.devices.device import Device
from curvelab.devices.names import names_of
from curvelab.records.arrays import Floats

PIECES = 16
"""Between two knots, and again wherever something changes, the current is looked at in so many pieces."""
SLIVER = 1e-8
"""Relative width to which a change is found; a stretch no wider is the two sides of one tabulated step."""

Sooner = Callable[[Floats], NDArray[Any]]


@dataclass(frozen=True, kw_only=True, slots=True)
class Stretch:
    """Currents in A between which ``sooner`` holds: a device's name, ``undecided`` or ``not_covered``."""

    from_a: float
    to_a: float
    sooner: str


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
    a_margin, b_margin = margin_of(b, a), margin_of(a, b)

    def sooner(current_a: Floats) -> NDArray[Any]:
        return sooner_of((first, second), a_margin(current_a), b_margin(current_a))

    knots = knots_of(a, b)
    pieces = [np.geomspace(*pair, PIECES, endpoint=False) if _is_wide(*pair) else pair[:1] for pair in pairwise(knots)]
    cuts = [float(knots[0]), *_changes(sooner, np.append(np.concatenate(pieces), knots[-1])), float(knots[-1])]
    wide = [(start, end) for start, end in pairwise(cuts) if _is_wide(start, end)]
    named = zip(wide, sooner(np.sqrt([start * end for start, end in wide])), strict=True)
    alike = (list(group) for _, group in groupby(named, key=lambda each: each[1]))
    return tuple(Stretch(from_a=group[0][0][0], to_a=group[-1][0][1], sooner=str(group[0][1])) for group in alike)


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
