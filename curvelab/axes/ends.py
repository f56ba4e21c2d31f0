"""Where lines of an image end, to the pixel: lettering that stands in line with them is apart by a gap."""

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Bytes, Floats

INK = (-1, 0, 1)
PAPER = (-7, -6, -5, 5, 6, 7)
SIDE = 3
"""Pixels across a line, and beside it, so many on each side, that tell whether it is there."""

THERE = 0.45
"""Share of a line's usual contrast from which on it is there."""

LONGEST_GAP = 3
"""Pixels that a solid line may lack; a dashed one as many as it lacks elsewhere, and"""

DASHED = 1.5
"""this times as many."""

CLEAR = 8.0
"""A line's contrast in standard deviations of the noise that is left in it, to tell whether it is there."""

MOST_ROWS = 16
"""Rows averaged for that at most; the ends of a fainter line stay as they are."""

INWARDS, OUTWARDS = 160, 24
"""Rows looked at before an end as it was followed, and beyond."""


def line_end(image: Bytes, end: tuple[float, float], slope: float, direction: int) -> float:
    """The row in which a line ends.

    Parameters
    ----------
    image : array, shape (rows, columns), uint8
        The line runs down the rows.
    end : (float, float)
        Column and row up to which it was followed.
    slope : float
        Columns by row near there.
    direction : 1 or -1
        Whether it ends downwards or upwards.
    """
    rows, columns = image.shape
    along = round(end[1]) + direction * np.arange(-INWARDS, OUTWARDS + 1)
    along = along[(along >= 0) & (along < rows)]
    column = np.rint(end[0] + slope * (along - end[1])).astype(np.int64)
    inside = (column >= -PAPER[0]) & (column < columns - PAPER[-1])
    along, column = along[inside], column[inside]
    followed = direction * (along - end[1]) <= 0
    if not followed.any():
        return end[1]
    there, averaged = _there(image, along, column, followed)
    places = np.flatnonzero(there)
    if len(places) < 2 or averaged > MOST_ROWS:
        return end[1]
    gaps = np.diff(places) - 1
    usual = float(np.quantile(gaps[: max(len(gaps) // 2, 1)], 0.95))
    wide = np.flatnonzero(gaps > max(LONGEST_GAP + averaged - 1, DASHED * usual))
    wide = wide[places[wide] >= min(len(along) // 4, INWARDS // 4)]
    return float(along[places[wide[0]] if len(wide) else places[-1]])


def _there(
    image: Bytes, along: NDArray[np.int64], column: NDArray[np.int64], followed: NDArray[np.bool_]
) -> tuple[NDArray[np.bool_], int]:
    """Whether the line is darker than the paper beside it, row by row, and over how many rows that was averaged."""

    def levels(offsets: tuple[int, ...]) -> Floats:
        found: Floats = image[along[:, None], column[:, None] + np.array(offsets)].astype(np.float64)
        return found

    paper = levels(PAPER)
    sides = np.stack([paper[:, :SIDE].mean(axis=1), paper[:, SIDE:].mean(axis=1)])
    dark = sides.mean(axis=0) - levels(INK).mean(axis=1)
    usual = float(np.median(dark[followed]))
    noise = 1.4826 * float(np.median(np.abs(np.diff(dark[followed])))) / np.sqrt(2.0) if followed.sum() > 1 else 0.0
    rows = max(int(np.ceil((CLEAR * noise / max(usual, 1.0)) ** 2)), 1)
    if rows > MOST_ROWS:
        return np.ones(len(along), dtype=bool), rows
    dark = np.convolve(np.pad(dark, rows // 2, mode="edge"), np.ones(rows) / rows, mode="valid")[: len(along)]
    # Where something crosses, the paper beside is dark: the line is taken to go on.
    darker = sides.min(axis=0)
    crossed = darker < np.median(darker) - max(0.5 * usual, 3.0 * noise)
    there: NDArray[np.bool_] = (dark >= THERE * usual) | crossed
    return there, rows
