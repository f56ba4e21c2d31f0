"""Profile of a printed stroke as square pixels see it: box(width) * Gaussian(blur) * pixel, in any direction.

A pixel averages over its square. Across a straight line whose normal makes the angle phi with the rows, that is a
trapezoid, box(|cos phi|) * box(|sin phi|); with it the model of a noise-free anti-aliased line is exact at every angle.
"""

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike
from scipy.special import ndtr

from curvelab.records.arrays import Floats

STEP = 0.04
"""px between tabulated distances."""
ANGLES = 10
"""Tabulated angles from 0 to 45 degrees."""
LEAST_BLUR = 0.05
LEAST_SIDE = 1e-5
"""Shorter side of the trapezoid of a pixel that lies square to the line, px."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class StrokeProfile:
    """Tabulated share of a pixel's ink by the distance of its centre from the line's centre.

    Parameters
    ----------
    width, blur : float
        px.
    reach : float
        Largest tabulated distance in px.
    table, slope : array, shape (ANGLES, n)
        Profile and its derivative by the distance.
    """

    width: float
    blur: float
    reach: float
    table: Floats
    slope: Floats

    def value(self, distance: Floats, angle: Floats) -> Floats:
        """Profile at distances in px along normals of an angle in rad (broadcast together)."""
        return self._look_up(self.table, distance, angle)

    def derivative(self, distance: Floats, angle: Floats) -> Floats:
        """Derivative of the profile by the distance, 1/px."""
        return self._look_up(self.slope, distance, angle)

    def _look_up(self, table: Floats, distance: Floats, angle: Floats) -> Floats:
        folded = np.abs((angle + np.pi / 4) % (np.pi / 2) - np.pi / 4)
        row = np.round(folded * ((ANGLES - 1) / (np.pi / 4))).astype(np.intp)
        column = np.clip((distance + self.reach) / STEP, 0.0, table.shape[1] - 1.001)
        low = column.astype(np.intp)
        part = column - low
        result: Floats = table[row, low] * (1.0 - part) + table[row, low + 1] * part
        return result


def _blurred_sum(distance: Floats, angle: Floats, blur: float) -> Floats:
    """Integral of the pixel's trapezoid, smoothed by a Gaussian, from minus infinity to the distance; (angles, n)."""
    wide, narrow = np.cos(angle)[:, None], np.maximum(np.sin(angle), LEAST_SIDE)[:, None]

    def area(x: Floats) -> Floats:
        # the mean of max(x + blur z, 0)^2 / 2 over a normal z
        part = x / blur
        density = np.exp(-0.5 * part**2) / np.sqrt(2.0 * np.pi)
        result: Floats = 0.5 * ((x**2 + blur**2) * ndtr(part) + blur * x * density)
        return result

    outer, inner = 0.5 * (wide + narrow), 0.5 * (wide - narrow)
    total = area(distance + outer) - area(distance + inner) - area(distance - inner) + area(distance - outer)
    result: Floats = total / (wide * narrow)
    return result


@lru_cache(maxsize=16)
def stroke_profile(width: float, blur: float, reach: float) -> StrokeProfile:
    """Tabulate the profile of a stroke, to ``reach`` px or a little beyond; the last few asked for are kept."""
    beside = np.arange(0.0, reach + STEP, STEP)
    angle = np.linspace(0.0, np.pi / 4, ANGLES)
    soft = max(blur, LEAST_BLUR)
    half = _blurred_sum(beside + width / 2, angle, soft) - _blurred_sum(beside - width / 2, angle, soft)
    table = np.concatenate([half[:, :0:-1], half], axis=1)
    return StrokeProfile(
        width=width, blur=blur, reach=float(beside[-1]), table=table, slope=np.gradient(table, STEP, axis=1)
    )


def bound(contrast_to_noise: ArrayLike, width: float, blur: float) -> Floats:
    """Cramer-Rao bound of a stroke's centre in px from one px of its length, at a contrast of so many noise sd."""
    total = np.hypot(blur, np.sqrt(1.0 / 12.0))
    information = (1.0 - np.exp(-(width**2) / (4.0 * total**2))) / (total * np.sqrt(np.pi))
    return np.asarray(1.0 / (np.asarray(contrast_to_noise, dtype=np.float64) * np.sqrt(information)))
