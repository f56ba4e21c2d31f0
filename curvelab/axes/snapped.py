"""Whether a renderer moved the grid lines onto whole pixels, and what is then known of where they were meant.

A line that is moved to the nearest pixel is off by up to half a pixel, evenly distributed. Renderers draw strokes of an
even number of pixels about the edge between two pixels and strokes of an odd number about a pixel's centre. For
the latter two habits are found: the nearest centre, or the nearest edge and from there half a pixel on to the right and
downwards, which shifts all such lines alike. Which one was used shows only where both kinds of stroke stand on a sheet.
"""

from dataclasses import dataclass

import numpy as np
from scipy.stats import binom

from curvelab.axes.grid import AXIS_NAMES
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, GridLine
from curvelab.records.sheet import Pixels

SNAPPED_SD = 1 / np.sqrt(12)
"""Standard deviation, in pixels, of a line moved to the nearest pixel."""

ON_PIXEL = 0.04
"""Pixels within which a measured line lies on a pixel's centre or edge."""

BY_CHANCE = 4 * ON_PIXEL
"""Share of lines at logarithms that do so by chance."""

UNLIKELY = 1e-6
MOSTLY = 0.6
TWO_LEVELS = 2


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Snapping:
    """Which lines stand on a pixel's centre, shape (n,), and whether half a pixel's shift of those is possible.

    ``shift`` is that half pixel in places of the sheet.
    """

    centred: "np.ndarray[tuple[int], np.dtype[np.bool_]]"
    ambiguous: bool
    shift: Floats


def find_snapping(pixels: Pixels, axes: tuple[Axis, Axis], lines: tuple[GridLine, ...]) -> Snapping | None:
    """How lines were moved onto pixels, or None where they stand where they were meant."""
    if not lines:
        return None
    to_pixels = np.linalg.inv(pixels.to_place[:, :2])
    across = {
        name: int(np.argmax(np.abs(to_pixels[:, 0 if axis.direction == "x" else 1])))
        for name, axis in zip(AXIS_NAMES, axes, strict=True)
    }
    places = [pixels.columns_rows(line.points)[:, across[line.axis]] for line in lines]
    centred = np.array([_within(place, 0.0) for place in places])
    between = np.array([_within(place, 0.5) for place in places])
    met = int(np.sum(centred | between))
    if met < MOSTLY * len(lines) or binom.sf(met - 1, len(lines), BY_CHANCE) > UNLIKELY:
        return None
    # A drawing reduced to black and white loses its lines' edges evenly on both sides: no shift of its own.
    two_levels = len(np.unique(pixels.grey[::7, ::3])) <= TWO_LEVELS
    return Snapping(centred=centred, ambiguous=not two_levels, shift=pixels.to_place[:, :2] @ np.array([0.5, 0.5]))


def _within(across: Floats, part: float) -> bool:
    """Whether nearly all of a line lies on ``part`` of a pixel."""
    off = across - part - np.rint(np.median(across - part))
    return bool(np.quantile(np.abs(off), 0.8) <= ON_PIXEL)
