"""The map of an image whose grid lines a renderer moved onto whole pixels.

How far each line was moved is bounded, not normally distributed: an axis's ruler must pass every line within those
bounds. All rulers that do form a convex polygon, each as likely as the other: its centroid is the best ruler and
its second moments the uncertainty, much smaller than least squares would say. The polygons' areas are the evidence for
each habit of rounding (see ``snapped``). This is set-membership estimation (Milanese and Vicino 1991, Automatica 27,
997-1009) with a uniform prior.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.marks import fitted_ruler
from curvelab.axes.polygon import box, cut, moments
from curvelab.axes.snapped import SnappedLines, Snapping
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, PlaneMap
from curvelab.records.sheet import Pixels

SLACKS = (0.02, 0.06, 0.12, 0.25, 0.5)
"""Pixels added to the bounds: the least with which any ruler passes all lines."""

FARTHEST = 4.0
"""Pixels about the least-squares ruler within which rulers are looked for."""

ASTRAY = 1.0
"""Pixels from the least-squares ruler beyond which a line is not one of the pattern."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Rulers:
    """Rulers of one axis under one habit: their area, mean and covariance as (place of the middle, half length)."""

    area: float
    mean: Floats
    covariance: Floats


def snapped_map(pixels: Pixels, axes: tuple[Axis, Axis], snapping: Snapping) -> PlaneMap | None:
    """The map from places of the sheet; None where no ruler passes the lines."""
    spans = [_span(lines) for lines in snapping.lines]
    shifts = (0.0, 0.5) if snapping.shift_possible else (0.0,)
    for slack in SLACKS:
        habits = [[_rulers(lines, shift, slack) for lines in snapping.lines] for shift in shifts]
        weights = np.array([first.area * second.area for first, second in habits])
        if weights.sum() > 0:
            mean, covariance = _mixed(habits, weights / weights.sum())
            return _plane(pixels, axes, spans, mean, covariance)
    return None


def _span(lines: SnappedLines) -> tuple[float, float]:
    """Middle and half length of the lines' scaled values."""
    low, high = float(lines.scaled.min()), float(lines.scaled.max())
    return 0.5 * (low + high), 0.5 * (high - low)


def _rulers(lines: SnappedLines, shift: float, slack: float) -> _Rulers:
    """All rulers that pass the lines within half a pixel, those on centres from ``shift`` before."""
    middle, half = _span(lines)
    part = (lines.scaled - middle) / half
    across = lines.across - shift * lines.centred
    best = fitted_ruler(across, part)
    off = across - best.across(part)
    corners = box(FARTHEST)
    for t, o in zip(part[np.abs(off) <= ASTRAY], off[np.abs(off) <= ASTRAY], strict=True):
        normal = np.array([1.0, t])
        corners = cut(cut(corners, normal, o + 0.5 + slack), -normal, 0.5 + slack - o)
    area, mean, covariance = moments(corners)
    return _Rulers(area=area, mean=mean + np.array([best.origin, best.per_scaled]), covariance=covariance)


def _mixed(habits: list[list[_Rulers]], weights: Floats) -> tuple[Floats, Floats]:
    """Mean and covariance, over the habits, of both axes' rulers together: shape (4,) and (4, 4)."""
    means = np.array([np.concatenate([rulers.mean for rulers in pair]) for pair in habits])
    mean = weights @ means
    covariance = (means - mean).T @ (weights[:, None] * (means - mean))
    for weight, pair in zip(weights, habits, strict=True):
        covariance[:2, :2] += weight * pair[0].covariance
        covariance[2:, 2:] += weight * pair[1].covariance
    return mean, covariance


def _plane(
    pixels: Pixels, axes: tuple[Axis, Axis], spans: list[tuple[float, float]], mean: Floats, covariance: Floats
) -> PlaneMap:
    """The affine map of two upright rulers; its parameters' covariance follows to first order."""
    across = [0 if axis.direction == "x" else 1 for axis in axes]
    size = [pixels.to_place[k, k] for k in across]
    middle = [size[i] * mean[2 * i] + pixels.to_place[across[i], 2] for i in (0, 1)]
    half = [size[i] * mean[2 * i + 1] for i in (0, 1)]
    centre = np.zeros(2)
    centre[across] = middle
    reach = float(np.max(np.abs(half)))
    projective, slope = np.zeros(8), np.zeros((8, 4))
    for i in (0, 1):
        constant, rate = 3 * i, 3 * i + 1 + across[i]
        projective[constant] = spans[i][0]
        projective[rate] = spans[i][1] * reach / half[i]
        slope[constant, 2 * i] = -spans[i][1] / half[i] * size[i]
        slope[rate, 2 * i + 1] = -projective[rate] / half[i] * size[i]
    return PlaneMap(
        centre=centre,
        reach=reach,
        projective=projective,
        powers=(),
        warp=np.zeros((2, 0)),
        covariance=slope @ covariance @ slope.T,
    )
