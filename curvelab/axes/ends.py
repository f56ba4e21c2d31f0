"""Where lines of an image end, to the pixel: lettering that stands in line with them is apart by a gap."""

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.segments import Segments
from curvelab.records.arrays import Bytes, Floats

INK = (-1, 0, 1)
PAPER = (-7, -6, -5, 5, 6, 7)
"""Pixels across a line, and beside it, that tell whether it is there."""

THERE = 0.45
"""Share of a line's usual contrast from which on it is there."""

LONGEST_GAP = 3
"""Pixels that a solid line may lack; a dashed one as many as it lacks elsewhere, and"""

DASHED = 1.5
"""this times as many."""

STEEPEST_EDGE = 24
"""Pixels next to an end over which the line may reach further than it was followed."""


def trimmed(image: Bytes, segments: Segments) -> Segments:
    """Segments whose ends are moved to where the line truly ends.

    Parameters
    ----------
    image : array, shape (rows, columns), uint8
        Its lines run down the rows.
    segments : Segments
    """
    if not len(segments.across):
        return segments
    rows = image.shape[0]
    first = np.maximum(np.floor(segments.first).astype(np.int64) - STEEPEST_EDGE, 0)
    last = np.minimum(np.ceil(segments.last).astype(np.int64) + STEEPEST_EDGE, rows - 1)
    ends = np.array([_ends(image, segments, k, (int(first[k]), int(last[k]))) for k in range(len(first))])
    middle, old = 0.5 * ends.sum(axis=1), 0.5 * (segments.first + segments.last)
    return replace(segments, across=segments.across + segments.lean * (middle - old), first=ends[:, 0], last=ends[:, 1])


def _ends(image: Bytes, segments: Segments, k: int, span: tuple[int, int]) -> tuple[float, float]:
    """First and last row of one line."""
    along = np.arange(span[0], span[1] + 1)
    middle = 0.5 * (segments.first[k] + segments.last[k])
    column = np.rint(segments.across[k] + segments.lean[k] * (along - middle)).astype(np.int64)
    there = _there(image, along, column, (float(segments.first[k]), float(segments.last[k])))
    places = np.flatnonzero(there)
    if len(places) < 2:
        return float(segments.first[k]), float(segments.last[k])
    gaps = np.diff(places)
    centre = int(np.argmin(np.abs(places - 0.5 * len(along))))
    half = max(len(gaps) // 4, 1)
    usual = float(np.quantile(gaps[max(centre - half, 0) : centre + half], 0.95)) - 1.0
    wide = np.flatnonzero(gaps - 1 > max(LONGEST_GAP, DASHED * usual))
    before, after = wide[wide < centre], wide[wide >= centre]
    low = places[before[-1] + 1] if len(before) else places[0]
    high = places[after[0]] if len(after) else places[-1]
    return float(along[low]), float(along[high])


def _there(
    image: Bytes, along: NDArray[np.int64], column: NDArray[np.int64], known: tuple[float, float]
) -> NDArray[np.bool_]:
    """Whether the line is darker than the paper beside it, row by row."""
    width = image.shape[1]

    def levels(offsets: tuple[int, ...]) -> Floats:
        found: Floats = image[along[:, None], np.clip(column[:, None] + np.array(offsets), 0, width - 1)].astype(float)
        return found

    dark = np.median(levels(PAPER), axis=1) - levels(INK).min(axis=1)
    inside = (along >= known[0]) & (along <= known[1])
    usual = float(np.median(dark[inside]))
    # Where a line crosses, paper beside it is dark as well: the line is taken to go on.
    crossed = levels(PAPER).max(axis=1) < np.median(levels(PAPER)) - 0.5 * usual
    there: NDArray[np.bool_] = (dark >= THERE * usual) | crossed
    return there
