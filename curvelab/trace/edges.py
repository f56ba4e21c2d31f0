"""Boundaries of filled areas that have no outline, as lines: where the ink steps, its gradient is a ridge."""

from dataclasses import replace

import cv2
import numpy as np

from curvelab.trace.gridmodel import GridInk
from curvelab.trace.ink import Image, Ink
from curvelab.trace.prepared import Raster
from curvelab.trace.strokes import curve_ink, stroke_graph

SMOOTHING = 1.2
"""px: sd of the Gaussian whose derivative is taken; a step of ink becomes a ridge of about that width."""

GRID_INK = 0.02
"""Predicted ink from which on a pixel is a grid line's."""

BRIDGE = 2.5
"""px: sd of the mean of the pixels beside a grid line."""

LEAST_STEP = 0.03
"""Smallest step of ink that bounds a filled area."""


def edge_raster(raster: Raster) -> Raster:
    """The same plot with the steps of its ink in place of the ink, so that a boundary is traced like a stroke.

    Beyond the grid's ink, the gradient is divided by that of the step of a usual filled area here: a boundary then has
    an ink of about 1 (edge as a ridge of the gradient magnitude: Canny, IEEE TPAMI 8(6), 1986).
    """
    steps = _steps(_bridged(curve_ink(raster.ink, raster.grid), raster.grid.dark))
    density = np.clip(steps / max(_usual(steps, raster), LEAST_STEP), 0.0, 1.5)[:, :, None].astype(np.float32)
    noise = float(np.median(density[raster.inside])) if raster.inside.any() else 0.0
    ink = Ink(origin=raster.ink.origin, density=density, dark=density[:, :, 0], noise=noise, two_level=False)
    grid = GridInk(dark=np.zeros_like(ink.dark), tint=np.zeros(1))
    # An area ends at the frame too, and that is no curve.
    inside = cv2.erode(raster.inside.astype(np.uint8), np.ones((5, 5), dtype=np.uint8)).astype(bool)
    skeleton, fill, widths, graph = stroke_graph(density, inside, noise, raster.sense.progress)
    return replace(raster, ink=ink, grid=grid, inside=inside, skeleton=skeleton, fill=fill, widths=widths, graph=graph)


def _bridged(excess: Image, grid: Image) -> Image:
    """The ink with what lies on grid lines taken from beside them: on a tint a line adds less than on paper."""
    on_grid = cv2.dilate((grid > GRID_INK).astype(np.uint8), np.ones((3, 3), dtype=np.uint8)).astype(bool)
    weight = (~on_grid).astype(np.float32)
    near = cv2.GaussianBlur(weight, (0, 0), BRIDGE)
    result = excess.copy()
    for k in range(excess.shape[2]):
        beside = cv2.GaussianBlur(excess[:, :, k] * weight, (0, 0), BRIDGE) / np.maximum(near, 1e-3)
        result[:, :, k][on_grid] = beside[on_grid]
    return result


def _steps(excess: Image) -> Image:
    """Height of the steps of ink: gradient magnitude x the width over which a step is spread."""
    strongest = np.zeros(excess.shape[:2], dtype=np.float32)
    for k in range(excess.shape[2]):
        smooth = cv2.GaussianBlur(excess[:, :, k], (0, 0), SMOOTHING)
        along, down = (cv2.Sobel(smooth, cv2.CV_32F, dx, dy, ksize=3, scale=1 / 8) for dx, dy in ((1, 0), (0, 1)))
        np.maximum(strongest, cv2.magnitude(along, down), out=strongest)
    result: Image = strongest * np.float32(SMOOTHING * np.sqrt(2.0 * np.pi))
    return result


def _usual(steps: Image, raster: Raster) -> float:
    """The step at the rim of the filled areas seen; where none was seen, the strongest steps of the plot."""
    kernel = np.ones((5, 5), dtype=np.uint8)
    rim = cv2.morphologyEx(raster.fill.astype(np.uint8), cv2.MORPH_GRADIENT, kernel).astype(bool) & raster.inside
    values = steps[rim] if rim.any() else steps[raster.inside]
    return float(np.quantile(values, 0.9 if rim.any() else 0.995)) if values.size else 1.0
