"""Parts of one line that words or a box hide a stretch of: which two go on from one another."""

from itertools import permutations

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.trace import Trace
from curvelab.trace.heading import heading

LONGEST = 0.25
"""Longest hidden stretch, relative to the plot's smaller side."""
ASIDE = 0.12
"""Largest distance from the continuation, relative to the hidden stretch, beyond two stroke widths."""
INK, WIDTH = 45.0, 0.35
"""Largest difference of the levels of ink, and of the widths relative to the wider, of one line."""


def successions(traces: list[Trace], side: float) -> list[tuple[int, int]]:
    """Pairs of traces of which the second goes on from the end of the first, the nearest first.

    Traces run left to right, ``side`` is the plot's smaller side in the sheet's unit.
    """
    found = []
    for one, other in permutations(range(len(traces)), 2):
        gap = _gap(traces[one], traces[other], LONGEST * side)
        if gap is not None:
            found.append((gap, one, other))
    return [(one, other) for _, one, other in sorted(found)]


def _gap(one: Trace, other: Trace, longest: float) -> float | None:
    """Length of the hidden stretch between two parts of one line; None where they are not."""
    step = other.places[0] - one.places[-1]
    length = float(np.hypot(*step))
    if length > longest or one.ends_at_frame[1] or other.ends_at_frame[0] or not _alike(one, other):
        return None
    aside = max(_aside(one.places, other.places[0]), _aside(other.places[::-1], one.places[-1]))
    return length if aside <= 2.0 * one.width + ASIDE * length else None


def _alike(one: Trace, other: Trace) -> bool:
    if (one.colour is None) != (other.colour is None):
        return False
    if one.colour and other.colour and np.abs(np.subtract(one.colour, other.colour)).max() > INK:
        return False
    return abs(one.width - other.width) <= WIDTH * max(one.width, other.width)


def _aside(places: Floats, beyond: Floats) -> float:
    """How far a place lies beside a line's continuation; infinite where it lies behind its end."""
    onward = heading(places)
    if onward is None:
        return np.inf
    ahead, aside = onward.frame(beyond[None])
    return float(abs(aside[0])) if ahead[0] > 0.0 else np.inf
