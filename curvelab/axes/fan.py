"""How the lines of one direction lean: alike, or fanning out evenly; what leans otherwise is a curve or a box."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats

NEAR = 0.006
"""Slope by which a long line may differ from the others: paper that is curled a little."""

ENDS = 4.0
"""Standard deviations of places by which a line's ends may be off, so that short ones lean more freely."""

BETTER = 1.1
"""Ratio of the lengths that follow a fan and that are parallel, from which on lines fan out."""

CLOSER = 0.4
"""Share of that within which a line counts in the last fit."""

FEWEST = 4
"""Lines without which a fan is not told from parallel lines."""

MOST_LINES = 80
"""Lines whose pairs are tried as fans; the longest."""

APART = 0.1
"""Share of the page by which a pair lies apart at least."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Fan:
    """Slope of the lines at place 0 across, by how much it grows per place, and which lines follow."""

    slope: float
    growth: float
    members: NDArray[np.bool_]

    def at(self, places: Floats) -> Floats:
        """Slope of lines at places across."""
        slopes: Floats = self.slope + self.growth * places
        return slopes


def parallel(lean: Floats, length: Floats, sd: float) -> Fan:
    """The slope that most length of lines shares.

    Parameters
    ----------
    lean, length : array, shape (n,)
    sd : float
        Standard deviation of places, in the unit of lengths.
    """
    if not len(lean):
        return Fan(slope=0.0, growth=0.0, members=np.zeros(0, dtype=bool))
    allowed = _allowed(length, sd)
    votes = (np.abs(lean[:, None] - lean[None, :]) <= np.maximum(allowed[:, None], allowed[None, :])) @ length
    members = np.abs(lean - lean[int(np.argmax(votes))]) <= allowed
    slope = float(np.average(lean[members], weights=length[members] ** 3)) if members.any() else float(np.median(lean))
    return Fan(slope=slope, growth=0.0, members=np.abs(lean - slope) <= allowed)


def fanned(at: Floats, lean: Floats, length: Floats, sd: float) -> Fan:
    """The even fan that most length of lines follows, from pairs of lines and then by least squares.

    Parameters
    ----------
    at : array, shape (n,)
        Places of the lines across.
    lean, length, sd
        As for ``parallel``.
    """
    allowed = _allowed(length, sd)
    members = parallel(lean, length, sd).members
    rival = _paired(at, lean, length, allowed)
    if rival is not None and rival @ length > BETTER * float(members @ length):
        members = rival
    fan = _fitted(at, lean, length, members)
    for share in (1.0, CLOSER):
        members = np.abs(lean - fan.at(at)) <= share * allowed
        fan = _fitted(at, lean, length, members)
    return Fan(slope=fan.slope, growth=fan.growth, members=np.abs(lean - fan.at(at)) <= allowed)


def _paired(at: Floats, lean: Floats, length: Floats, allowed: Floats) -> NDArray[np.bool_] | None:
    """The lines of the fan through a pair that most length follows."""
    longest = np.argsort(-length, kind="stable")[:MOST_LINES]
    low, high = (longest[part] for part in np.triu_indices(len(longest), 1))
    far = np.abs(at[high] - at[low]) > APART * np.ptp(at) if len(low) else np.zeros(0, dtype=bool)
    if not far.any():
        return None
    low, high = low[far], high[far]
    growth = (lean[high] - lean[low]) / (at[high] - at[low])
    slope = lean[low] - growth * at[low]
    near = np.abs(lean - slope[:, None] - growth[:, None] * at) <= allowed
    followed: NDArray[np.bool_] = near[int(np.argmax(near @ length))]
    return followed


def _fitted(at: Floats, lean: Floats, length: Floats, members: NDArray[np.bool_]) -> Fan:
    """Least squares through some lines; without growth where they are too few."""
    if members.sum() < FEWEST or np.ptp(at[members]) == 0:
        slope = float(np.average(lean[members], weights=length[members] ** 3)) if members.any() else 0.0
        return Fan(slope=slope, growth=0.0, members=members)
    growth, constant = np.polyfit(at[members], lean[members], 1, w=length[members] ** 1.5)
    return Fan(slope=float(constant), growth=float(growth), members=members)


def _allowed(length: Floats, sd: float) -> Floats:
    """How far a line's slope may be off the others'."""
    allowed: Floats = NEAR + ENDS * sd / np.maximum(length, sd)
    return allowed
