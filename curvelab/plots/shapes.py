"""Outlines on log-log paper: the area between two edges, and the 95 % interval along a line."""

from collections.abc import Iterator
from itertools import pairwise

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.chains import falls
from curvelab.records.curve import COVERAGE_FACTOR, Curve, Part

SAME_SIDE = 0.03
"""Decades within which two ends count as being at one side of the plot."""
SLIT = 0.08
"""Decades: a gap no wider than this along the diagonal, a missing corner, opens the line but not the area."""


def halo_outlines(curve: Curve) -> Iterator[Floats]:
    """Outline of the 95 % interval along each part, shape (n, 2) as (current, value); none where nothing is known.

    Each point moves along the curve's normal in log-log both ways, so that the width is true at any slope.
    """
    rising = -1.0 if falls(curve) else 1.0
    for part in curve.parts:
        with np.errstate(divide="ignore"):
            precision = np.nan_to_num(1.0 / np.column_stack([part.sd_current, part.sd_value]))
        weight = np.hypot(*precision.T)
        known = weight > 0
        if known.sum() > 1:
            normal = precision[known] / weight[known, None] ** 2
            move = np.exp(COVERAGE_FACTOR * normal * [-rising, 1.0])
            line = np.column_stack([part.current, part.value])[known]
            yield np.concatenate([line * move, (line / move)[::-1]])


def between_outlines(fast: Curve, slow: Curve, floor: float) -> Iterator[Floats]:
    """Outlines of the area between two edges, cut at each gap of either; shape (n, 2) as (current, value).

    Along the diagonal of log-log paper a monotone curve passes every place once, even where it is vertical or
    horizontal. So the area is cut there at each end of a gap. Where the fast edge leaves the paper at its floor, the
    area goes on along the floor.
    """
    forwards = -1.0 if falls(fast) else 1.0
    paths = [[_along(part, forwards) for part in curve.parts] for curve in (fast, slow)]
    if falls(fast):
        paths[0][-1] = _along_floor(paths[0][-1], paths[1][-1], float(np.log10(floor)))
    for start, end in _uncut(paths):
        sides = [_clipped(path, start, end) for path in paths]
        if all(len(side) for side in sides):
            yield 10 ** np.concatenate([sides[0], sides[1][::-1]])[:, 1:]


def _along(part: Part, forwards: float) -> Floats:
    """Columns: distance along the diagonal, log current, log value."""
    current, value = np.log10(part.current), np.log10(part.value)
    return np.column_stack([current + forwards * value, current, value])


def _along_floor(fast: Floats, slow: Floats, floor: float) -> Floats:
    """The fast edge, carried on along the floor to where the slow edge ends, where it has left the paper there."""
    across = slow[-1, 1]
    if fast[-1, 2] > floor + SAME_SIDE or across <= fast[-1, 1]:
        return fast
    return np.concatenate([fast, [[across - floor, across, floor]]])


def _uncut(paths: list[list[Floats]]) -> Iterator[tuple[float, float]]:
    """Stretches along the diagonal without a gap in either path."""
    first = [path[0][0] for path in paths]
    last = [path[-1][-1] for path in paths]
    start = -np.inf if _face(*first) else max(float(end[0]) for end in first)
    final = np.inf if _face(*last) else min(float(end[0]) for end in last)
    for gap_start, gap_end in sorted(gap for path in paths for gap in _gaps(path)):
        if start < min(gap_start, final):
            yield start, min(gap_start, final)
        start = max(start, gap_end)
    if start < final:
        yield start, final


def _face(one: Floats, other: Floats) -> bool:
    """Whether two ends lie at one value or one current, as where both lines leave the plot through one side."""
    return bool(np.abs(one[1:] - other[1:]).min() <= SAME_SIDE)


def _gaps(path: list[Floats]) -> Iterator[tuple[float, float]]:
    for before, after in pairwise(path):
        if before[-1, 0] + SLIT < after[0, 0]:
            yield float(before[-1, 0]), float(after[0, 0])


def _clipped(path: list[Floats], start: float, end: float) -> Floats:
    """What of the path lies between two places along the diagonal, its ends interpolated."""
    points = np.concatenate(path)
    inside = points[(points[:, 0] >= start) & (points[:, 0] <= end)]
    ends = [_at(points, place) for place in (start, end)]
    return np.concatenate([ends[0], inside, ends[1]])


def _at(points: Floats, place: float) -> Floats:
    if not points[0, 0] <= place <= points[-1, 0]:
        return np.empty((0, 3))
    return np.array([[np.interp(place, points[:, 0], points[:, column]) for column in range(3)]])
