"""Points that hop to something else and back: stretches that no monotone line through the others can visit."""

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats

HOP = 2.5
"""Median distances between neighbours beyond which a new island begins; too many do no harm."""

SCATTER = 6.0
"""Standard deviations by which the first point of an island may lie outside what is reachable."""

MOST_ISLANDS = 600


def on_the_line(u: Floats, v: Floats, tolerance: float) -> NDArray[np.bool_]:
    """The greatest set of whole islands that one monotone line can visit in order.

    From a point of such a line, another is reachable if v changes by no more than u grows.

    Parameters
    ----------
    u, v : array, shape (n,)
        In the order along the curve, u growing from the first to the last as a whole.
    tolerance : float
        Decades by which scatter may break that rule.
    """
    distance = np.hypot(np.diff(u), np.diff(v))
    starts = np.concatenate([[0], np.flatnonzero(distance > HOP * np.median(distance)) + 1])
    everything = np.ones(len(u), dtype=bool)
    if not 2 < len(starts) <= MOST_ISLANDS:
        return everything
    ends = np.concatenate([starts[1:], [len(u)]])
    best = (ends - starts).astype(np.float64)
    before = np.full(len(starts), -1)
    for k in range(1, len(starts)):
        last = ends[:k] - 1
        reachable = np.abs(v[starts[k]] - v[last]) <= u[starts[k]] - u[last] + tolerance
        gained = np.where(reachable, best[:k], 0.0)
        if gained.max() > 0.0:
            before[k] = int(np.argmax(gained))
            best[k] += gained[before[k]]
    kept = np.zeros(len(u), dtype=bool)
    k = int(np.argmax(best))
    while k >= 0:
        kept[starts[k] : ends[k]] = True
        k = int(before[k])
    return kept
