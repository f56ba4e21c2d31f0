"""Spans of current over which something stays the same: the places of change found between the bends of curves."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import groupby, pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats, distinct

STEP = 1e-9
"""Relative distance at which both sides of a vertical stretch are looked at."""

SLIVER = 1e-8
"""Relative width to which a change is found; a span no wider is the two sides of one tabulated step."""

_PIECES, _ROUNDS, _APART = 16, 5, 1.05
"""Where something changes, and between places further apart than the ratio, so many pieces are looked at."""

Codes = NDArray[np.int8]
CodeAt = Callable[[Floats], Codes]
"""What holds at currents in A, as a small number each."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Span:
    """Currents in A between which a code holds."""

    from_a: float
    to_a: float
    code: int


def places_of(bends_a: Floats, first_a: float, last_a: float) -> Floats:
    """The currents to look at from first to last: both of them, every bend between, and either side of it."""
    inside = bends_a[(bends_a >= first_a) & (bends_a <= last_a)]
    around = np.concatenate((inside * (1 - STEP), inside, inside * (1 + STEP), [first_a, last_a]))
    return distinct(np.clip(around, first_a, last_a))


def spans_of(code_at: CodeAt, places: Floats) -> tuple[Span, ...]:
    """Every span in rising order, each beginning where the one before ends.

    Parameters
    ----------
    code_at : callable
    places : array, shape (n,)
        Rising currents in A between which no curve bends; the first and the last bound the spans.
    """
    pieces = [
        np.geomspace(*pair, _PIECES, endpoint=False) if _is_wide(*pair) else pair[:1] for pair in pairwise(places)
    ]
    brackets = _changes(code_at, np.append(np.concatenate(pieces), places[-1]))
    cuts = [float(places[0]), *(_cut(code_at, bracket, places) for bracket in brackets), float(places[-1])]
    wide = [(start, end) for start, end in pairwise(cuts) if _is_wide(start, end)]
    coded = zip(wide, code_at(np.sqrt([start * end for start, end in wide])).tolist(), strict=True)
    alike = (list(group) for _, group in groupby(coded, key=lambda each: each[1]))
    return tuple(Span(from_a=group[0][0][0], to_a=group[-1][0][1], code=group[0][1]) for group in alike)


def _is_wide(start: float, end: float) -> bool:
    return end > start * (1 + SLIVER)


def _changes(code_at: CodeAt, currents: Floats) -> Iterator[tuple[float, float]]:
    """Narrow brackets of each change, from rising currents close enough that none hides between two."""
    codes = code_at(currents)
    for place in np.flatnonzero(codes[:-1] != codes[1:]):
        start, end = float(currents[place]), float(currents[place + 1])
        if _is_wide(start, end):
            yield from _changes(code_at, np.geomspace(start, end, _PIECES + 1))
        else:
            yield start, end


def _cut(code_at: CodeAt, bracket: tuple[float, float], places: Floats) -> float:
    """Where the code changes: the tabulated current of a step, else found to the last digits."""
    near = places[(places > bracket[0] * (1 - SLIVER)) & (places < bracket[1] * (1 + SLIVER))]
    if near.size:
        return float(near[near.size // 2])
    for _ in range(_ROUNDS):
        fine = np.linspace(*bracket, _PIECES + 1)
        changed = np.flatnonzero(np.diff(code_at(fine)))
        bracket = float(fine[changed[0]]), float(fine[changed[0] + 1])
    return bracket[0]
