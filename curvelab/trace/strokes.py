"""Strokes of the plot as a mask: ink beyond the grid's, thinned to middle lines; filled areas apart."""

from collections.abc import Callable

import cv2
import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph, build_graph
from curvelab.trace.gridmodel import GridInk
from curvelab.trace.ink import Image, Ink
from curvelab.trace.thinning import Mask, thin

FAINTEST = 0.12
"""Least ink of a line."""
NOISE_FACTOR = 5.0
RELATIVE = 0.45
"""A pixel belongs to a stroke above this share of the darkest ink near it, so that close strokes stay apart."""
FRAME_STROKE = 7
"""px: the frame's stroke lies within half of this of the frame."""
NEAR = 7
WIDEST_STROKE = 15
"""px; what is wider is a filled area."""
SMOOTHING = 0.7
SMOOTHED_NOISE = 0.4
"""Noise left by that smoothing."""
GRID_SHARE = 0.5
"""Where the grid leaves less than this share of the darkest ink to be seen, the pixels beside it decide."""


def curve_ink(ink: Ink, grid: GridInk) -> Image:
    """Ink of what is not grid, by channel, lightly smoothed.

    A curve covers the grid: the grid's ink is (1 - a) g and the curve's a c, so the excess over g is a (c - g). Divided
    by the share 1 - g that is left to be seen and weighted by it, pixels the grid hides take the value of those beside.
    """
    share = 1.0 - grid.dark
    weight = np.clip(share, 0.02, None) ** 2
    below = cv2.GaussianBlur(weight, (0, 0), SMOOTHING)
    result = np.empty_like(ink.density)
    for k in range(ink.density.shape[2]):
        excess = (ink.density[:, :, k] - np.float32(grid.tint[k]) * grid.dark) * share
        result[:, :, k] = cv2.GaussianBlur(excess, (0, 0), SMOOTHING) / below
    return result


def stroke_mask(excess: Image, noise: float) -> Mask:
    """Pixels that belong to a line or a filled area, from the ink beyond the grid's (strongest channel)."""
    strongest = excess.max(axis=2)
    least = max(FAINTEST, NOISE_FACTOR * SMOOTHED_NOISE * noise)
    darkest = cv2.dilate(strongest, np.ones((NEAR, NEAR), dtype=np.uint8))
    mask: Mask = strongest > np.maximum(least, RELATIVE * darkest)
    return mask


def filled_areas(mask: Mask) -> Mask:
    """What stays of the mask after an opening wider than any stroke."""
    kernel = cv2.getStructuringElement(cv2.MORPH_ELLIPSE, (WIDEST_STROKE, WIDEST_STROKE))
    return cv2.morphologyEx(mask.astype(np.uint8), cv2.MORPH_OPEN, kernel).astype(bool)


def plot_area(shape: tuple[int, ...], corners: Floats) -> Mask:
    """Pixels inside the plot's four corners (column, row), clear of the frame's own stroke."""
    area = np.zeros(shape, dtype=np.uint8)
    cv2.fillConvexPoly(area, np.round(corners).astype(np.int32), 1)
    return cv2.erode(area, np.ones((FRAME_STROKE, FRAME_STROKE), dtype=np.uint8)).astype(bool)


def stroke_graph(
    excess: Image, inside: Mask, noise: float, progress_of: Callable[[Floats], Floats]
) -> tuple[Mask, Mask, Image, ChainGraph]:
    """Middle lines, filled areas, widths and chains of the ink beyond the grid's."""
    mask = stroke_mask(excess, noise) & inside
    fill = filled_areas(mask)
    grown = cv2.dilate(fill.astype(np.uint8), np.ones((3, 3), dtype=np.uint8)).astype(bool)
    strokes = mask & ~grown
    distance = cv2.distanceTransform(strokes.astype(np.uint8), cv2.DIST_L2, 5)
    widths = (2.0 * distance - 1.0).astype(np.float32)
    skeleton = thin(strokes)
    return skeleton, fill, widths, build_graph(skeleton, excess, widths, inside, progress_of)
