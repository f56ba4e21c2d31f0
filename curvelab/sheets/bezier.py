"""Cubic curves become polylines that keep to them within a stated distance."""

import math
from collections.abc import Sequence

import numpy as np

from curvelab.records.arrays import Floats

SPANS_AT_MOST = 2_000


def flattened(corners: Sequence[Floats], tolerance: float) -> Floats:
    """Points along a cubic Bezier curve after its start, the last being its end exactly; shape (n, 2).

    The number of equal steps follows from the bound on the second derivative (Wang's formula, see Goldman,
    "Pyramid Algorithms", 2003, section 5.6): the chord leaves the curve by at most ``tolerance``.

    Parameters
    ----------
    corners : four arrays, shape (2,)
        Start, both control points and end.
    tolerance : float
        In the same unit.
    """
    start, first, second, end = corners
    bend = max(
        math.hypot(*(start - 2 * first + second)),
        math.hypot(*(first - 2 * second + end)),
    )
    spans = min(max(1, math.ceil(math.sqrt(0.75 * bend / tolerance))), SPANS_AT_MOST)
    t = np.arange(1, spans + 1)[:, None] / spans
    s = 1.0 - t
    points: Floats = s**3 * start + 3 * s**2 * t * first + 3 * s * t**2 * second + t**3 * end
    points[-1] = end
    return points
