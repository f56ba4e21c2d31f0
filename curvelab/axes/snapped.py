"""Whether a renderer moved the grid lines onto whole pixels.

A line that is moved to the nearest pixel is off by up to half a pixel, evenly distributed. Renderers draw strokes of an
even number of pixels about the edge between two pixels and strokes of an odd number about a pixel's centre. For the
latter two habits are found: the nearest centre, or the nearest edge and from there half a pixel on to the right and
downwards, which shifts all such lines alike.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.stats import binom

from curvelab.axes.grid import AXIS_NAMES
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, GridLine
from curvelab.records.sheet import Pixels

ON_PIXEL = 0.06
"""Pixels within which a measured line lies on a pixel's centre or edge."""

BY_CHANCE = 4 * ON_PIXEL
"""Share of lines at logarithms that do so by chance."""

UNLIKELY = 1e-6
MOSTLY = 0.7
TWO_LEVELS = 2


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class SnappedLines:
    """Lines of one axis on whole pixels: scaled values, places across in pixels, and whether on a pixel's centre."""

    scaled: Floats
    across: Floats
    centred: NDArray[np.bool_]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Snapping:
    """The lines of both axes, and whether those on centres may be shifted with half a pixel."""

    lines: tuple[SnappedLines, SnappedLines]
    shift_possible: bool


def find_snapping(pixels: Pixels, axes: tuple[Axis, Axis], grid: tuple[GridLine, ...]) -> Snapping | None:
    """How lines were moved onto pixels, or None where they stand where they were meant."""
    places = [pixels.columns_rows(line.points)[:, _across(axes, line)] for line in grid]
    halves = [2 * np.median(place) for place in places]
    met = np.array([_steady(place) for place in places], dtype=bool)
    count = int(np.sum(met))
    if not grid or count < MOSTLY * len(grid) or binom.sf(count - 1, len(grid), BY_CHANCE) > UNLIKELY:
        return None
    found = []
    for name, axis in zip(AXIS_NAMES, axes, strict=True):
        mine = [k for k, line in enumerate(grid) if line.axis == name and met[k]]
        twice = np.rint([halves[k] for k in mine])
        scaled = axis.scaled([grid[k].value for k in mine])
        found.append(SnappedLines(scaled=scaled, across=twice / 2, centred=twice % 2 == 0))
    if min(len(lines.scaled) for lines in found) < 2:
        return None
    # A drawing reduced to black and white loses its lines' edges evenly on both sides: no shift of its own.
    two_levels = len(np.unique(pixels.grey[::7, ::3])) <= TWO_LEVELS
    return Snapping(lines=(found[0], found[1]), shift_possible=not two_levels)


def _across(axes: tuple[Axis, Axis], line: GridLine) -> int:
    return 0 if axes[AXIS_NAMES.index(line.axis)].direction == "x" else 1


def _steady(across: Floats) -> bool:
    """Whether nearly all of a line lies on one centre or edge of a pixel."""
    half = 0.5 * np.rint(2 * np.median(across))
    return bool(np.quantile(np.abs(across - half), 0.8) <= ON_PIXEL)
