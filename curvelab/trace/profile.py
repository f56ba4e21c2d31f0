"""Profile of a printed stroke as square pixels see it: box(width) * Gaussian(blur) * pixel, in any direction.

A pixel averages over its square. Across a straight line whose normal makes the angle phi with the rows, that is a
trapezoid, box(|cos phi|) * box(|sin phi|); with it the model of a noise-free anti-aliased line is exact at every angle.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike
from scipy.ndimage import gaussian_filter1d

from curvelab.records.arrays import Floats

STEP = 0.04
"""px between tabulated distances."""
ANGLES = 10
"""Tabulated angles from 0 to 45 degrees."""
LEAST_BLUR = 0.05


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


def _trapezoid_sum(distance: Floats, angle: float) -> Floats:
    """Integral of the pixel's trapezoid from minus infinity to the distance."""
    wide, narrow = np.cos(angle), max(np.sin(angle), 1e-6)

    def ramp(x: Floats) -> Floats:
        area: Floats = 0.5 * np.square(np.maximum(x, 0.0)) / (wide * narrow)
        return area

    outer, inner = 0.5 * (wide + narrow), 0.5 * (wide - narrow)
    total: Floats = ramp(distance + outer) - ramp(distance + inner) - ramp(distance - inner) + ramp(distance - outer)
    return total


def stroke_profile(width: float, blur: float, reach: float) -> StrokeProfile:
    """Tabulate the profile of a stroke."""
    distance = np.arange(-reach, reach + STEP / 2, STEP)
    rows = []
    for angle in np.linspace(0.0, np.pi / 4, ANGLES):
        sharp = _trapezoid_sum(distance + width / 2, float(angle)) - _trapezoid_sum(distance - width / 2, float(angle))
        rows.append(gaussian_filter1d(sharp, max(blur, LEAST_BLUR) / STEP, mode="nearest", truncate=5.0))
    table = np.array(rows)
    return StrokeProfile(width=width, blur=blur, reach=reach, table=table, slope=np.gradient(table, STEP, axis=1))


def bound(contrast_to_noise: ArrayLike, width: float, blur: float) -> Floats:
    """Cramer-Rao bound of a stroke's centre in px from one px of its length, at a contrast of so many noise sd."""
    total = np.hypot(blur, np.sqrt(1.0 / 12.0))
    information = (1.0 - np.exp(-(width**2) / (4.0 * total**2))) / (total * np.sqrt(np.pi))
    return np.asarray(1.0 / (np.asarray(contrast_to_noise, dtype=np.float64) * np.sqrt(information)))
