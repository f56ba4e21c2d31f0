"""Where lines of an image end, to the pixel: lettering that stands in line with them is apart by a gap."""

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.segments import Segments
from curvelab.records.arrays import Bytes, Floats

INK = (-1, 0, 1)
PAPER = (-7, -6, -5, 5, 6, 7)
SIDE = 3
"""Pixels across a line, and beside it, so many on each side, that tell whether it is there."""

THERE = 0.45
"""Share of a line's usual contrast from which on it is there."""

LONGEST_GAP = 3
"""Pixels that a solid line may lack; a dashed one as many as it lacks elsewhere, and"""

CLEAR = 8.0
"""A line's contrast in standard deviations of the noise that is left in it, to tell whether it is there."""

MOST_ROWS = 16
"""Rows averaged for that at most; the ends of a fainter line stay as they are."""

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
    known = (float(segments.first[k]), float(segments.last[k]))
    there, rows = _there(image, along, column, known)
    places = np.flatnonzero(there)
    if len(places) < 2 or rows > MOST_ROWS:
        return known
    gaps = np.diff(places)
    centre = int(np.argmin(np.abs(places - 0.5 * len(along))))
    half = max(len(gaps) // 4, 1)
    usual = float(np.quantile(gaps[max(centre - half, 0) : centre + half], 0.95)) - 1.0
    wide = np.flatnonzero(gaps - 1 > max(LONGEST_GAP + rows - 1, DASHED * usual))
    before, after = wide[wide < centre], wide[wide >= centre]
    low = places[before[-1] + 1] if len(before) else places[0]
    high = places[after[0]] if len(after) else places[-1]
    return float(along[low]), float(along[high])


def _there(
    image: Bytes, along: NDArray[np.int64], column: NDArray[np.int64], known: tuple[float, float]
) -> tuple[NDArray[np.bool_], int]:
    """Whether the line is darker than the paper beside it, row by row, and over how many rows that was averaged."""
    width = image.shape[1]

    def levels(offsets: tuple[int, ...]) -> Floats:
        found: Floats = image[along[:, None], np.clip(column[:, None] + np.array(offsets), 0, width - 1)].astype(float)
        return found

    paper = levels(PAPER)
    dark = np.median(paper, axis=1) - levels(INK).mean(axis=1)
    inside = (along >= known[0]) & (along <= known[1])
    usual = float(np.median(dark[inside]))
    noise = 1.4826 * float(np.median(np.abs(np.diff(dark)))) / np.sqrt(2.0)
    rows = max(int(np.ceil((CLEAR * noise / max(usual, 1.0)) ** 2)), 1)
    if rows > MOST_ROWS:
        return np.ones(len(along), dtype=bool), rows
    dark = np.convolve(np.pad(dark, rows // 2, mode="edge"), np.ones(rows) / rows, mode="valid")[: len(along)]
    # Where something crosses, the paper beside is dark: the line is taken to go on.
    darker = np.minimum(paper[:, :SIDE].mean(axis=1), paper[:, SIDE:].mean(axis=1))
    crossed = darker < np.median(darker) - max(0.5 * usual, 3.0 * noise)
    there: NDArray[np.bool_] = (dark >= THERE * usual) | crossed
    return there, rows
