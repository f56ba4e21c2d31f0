"""Whether a line is printed in dashes, and where the print of one followed line changes: there it may be two lines."""

from itertools import pairwise

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.trace import Place, Trace

FEWEST_BREAKS, BREAK = 5, 3.0
"""Breaks from which a line is dashed, and how many usual steps between places make a break."""
BROKEN = 0.12
"""Share of a dashed line's length that is breaks, at least."""
LONG = 150.0
"""px of line between gaps whose print can be told."""


def is_broken(places: Floats) -> bool:
    """Whether a line is printed in dashes: it comes in pieces with breaks between them."""
    steps = np.hypot(*np.diff(places, axis=0).T)
    breaks = steps[steps > BREAK * np.median(steps)]
    return bool(len(breaks) >= FEWEST_BREAKS and breaks.sum() > BROKEN * steps.sum())


def changes_of_print(trace: Trace, pixel: float) -> list[Place]:
    """The starts of gaps across which a dashed line goes on unbroken, or an unbroken one dashed.

    Parameters
    ----------
    trace : Trace
    pixel : float
        Size of a pixel in the sheet's unit.
    """
    cuts = [0, *(int(np.hypot(*(trace.places - gap.end).T).argmin()) for gap in trace.gaps), len(trace.places)]
    pieces = [trace.places[a:b] for a, b in pairwise(cuts) if b - a > 2]
    told = [(piece, is_broken(piece)) for piece in pieces if _length(piece) > LONG * pixel]
    ends = [(before[-1], one != other) for (before, one), (_, other) in pairwise(told)]
    return [(float(x), float(y)) for (x, y), changes in ends if changes]


def _length(places: Floats) -> float:
    return float(np.hypot(*np.diff(places, axis=0).T).sum())
