"""Straight pieces among the strokes of a page: grid lines, ticks, frames; drawn, or filled as thin rectangles."""

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke

MOST_POINTS = 6
"""A stroke with more points is a curve or lettering; a closed rectangle has five."""

THINNEST = 8.0
"""Length by width from which on a filled rectangle is a line."""

LEANEST = 0.105
"""Slope up to which a segment belongs to a direction, 6 degrees."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Segments:
    """Segments of one direction: place across at their middle, along at both ends (rising), and the stroke.

    ``lean`` is their slope, across by along; ``darkness`` the contrast against white, 0 to 1. All of shape (n,).
    """

    across: Floats
    first: Floats
    last: Floats
    lean: Floats
    width: Floats
    darkness: Floats

    @property
    def length(self) -> Floats:
        """Length along."""
        return self.last - self.first

    def where(self, which: NDArray[np.bool_]) -> "Segments":
        """Some of them."""
        return Segments(
            across=self.across[which],
            first=self.first[which],
            last=self.last[which],
            lean=self.lean[which],
            width=self.width[which],
            darkness=self.darkness[which],
        )


def straight_segments(strokes: Iterable[Stroke]) -> tuple[Segments, Segments]:
    """Segments that run down (told apart by x) and across (told apart by y)."""
    ends: list[Floats] = []
    inks: list[tuple[float, float]] = []
    for stroke in strokes:
        if len(stroke.points) > MOST_POINTS:
            continue
        pairs, width = _centre_line(stroke) if stroke.filled else (_pairs(stroke), stroke.width)
        if len(pairs):
            ends.append(pairs)
            inks += [(width, _darkness(stroke))] * len(pairs)
    if not ends:
        nothing = np.zeros(0)
        none = Segments(across=nothing, first=nothing, last=nothing, lean=nothing, width=nothing, darkness=nothing)
        return none, none
    both, ink = np.concatenate(ends), np.array(inks)
    return _of_direction(both, ink, 0), _of_direction(both, ink, 1)


def _pairs(stroke: Stroke) -> Floats:
    """(start, end) of each piece, shape (n, 2, 2)."""
    points = stroke.points
    if stroke.closed and np.any(points[0] != points[-1]):
        points = np.vstack([points, points[:1]])
    return np.stack([points[:-1], points[1:]], axis=1)


def _centre_line(stroke: Stroke) -> tuple[Floats, float]:
    """The centre line of a thin filled rectangle and its width; nothing for other outlines."""
    pairs = _pairs(stroke)
    if len(pairs) not in (4, 5):
        return np.zeros((0, 2, 2)), 0.0
    lengths = np.linalg.norm(pairs[:4, 1] - pairs[:4, 0], axis=1)
    short = 0 if lengths[0] < lengths[1] else 1
    opposite, longer = short + 2, lengths[1 - short]
    square = np.allclose(lengths[[short, 1 - short]], lengths[[opposite, 3 - short]], rtol=1e-3, atol=1e-3)
    if not square or longer < THINNEST * max(lengths[short], 1e-9):
        return np.zeros((0, 2, 2)), 0.0
    return pairs[[short, opposite]].mean(axis=1)[None], float(lengths[short])


def _darkness(stroke: Stroke) -> float:
    red, green, blue = stroke.colour
    return 1.0 - (0.299 * red + 0.587 * green + 0.114 * blue) / 255.0


def _of_direction(ends: Floats, ink: Floats, across: int) -> Segments:
    run = ends[:, 1] - ends[:, 0]
    mine = (np.abs(run[:, across]) <= LEANEST * np.abs(run[:, 1 - across])) & (run[:, 1 - across] != 0)
    ends, run, ink = ends[mine], run[mine], ink[mine]
    along = np.sort(ends[:, :, 1 - across], axis=1)
    return Segments(
        across=ends[:, :, across].mean(axis=1),
        first=along[:, 0],
        last=along[:, 1],
        lean=run[:, across] / run[:, 1 - across],
        width=ink[:, 0],
        darkness=ink[:, 1],
    )
