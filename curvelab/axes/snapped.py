"""Whether a renderer moved the grid lines onto whole pixels, which shifts each by up to half a pixel."""

import numpy as np

from curvelab.axes.grid import AXIS_NAMES
from curvelab.records.axes import Axis, GridLine
from curvelab.records.sheet import Pixels

SNAPPED_SD = 1 / np.sqrt(12)
"""Standard deviation, in pixels, of a line moved to the nearest pixel (uniform over one pixel)."""

ON_PIXEL = 0.04
"""Pixels within which a measured line lies on a pixel's centre or edge."""

FEWEST = 5
NEARLY_ALL = 0.9


def snapped_axes(pixels: Pixels, axes: tuple[Axis, Axis], lines: tuple[GridLine, ...]) -> tuple[bool, bool]:
    """For each axis, whether nearly all its lines lie on whole or half pixels all along.

    Lines at logarithms do so by chance for one in six each.
    """
    first, second = (_snapped(pixels, axis, [line for line in lines if line.axis == name]) for axis, name in zip(axes, AXIS_NAMES, strict=True))
    return first, second


def _snapped(pixels: Pixels, axis: Axis, lines: list[GridLine]) -> bool:
    if len(lines) < FEWEST:
        return False
    to_pixels = np.linalg.inv(pixels.to_place[:, :2])
    across = int(np.argmax(np.abs(to_pixels[:, 0 if axis.direction == "x" else 1])))
    on_pixel = [_on_pixel(pixels.columns_rows(line.points)[:, across]) for line in lines]
    return float(np.mean(on_pixel)) >= NEARLY_ALL


def _on_pixel(across: "np.ndarray[tuple[int], np.dtype[np.float64]]") -> bool:
    halves = 2 * across
    return bool(np.quantile(np.abs(halves - np.rint(np.median(halves))), 0.8) <= 2 * ON_PIXEL)
