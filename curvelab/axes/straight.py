"""Robust straight lines through places along a printed line."""

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats

STEPS = 8


def fitted_offsets(along: Floats, offset: Floats, weight: Floats) -> Floats:
    """Offsets of the weighted least-squares straight line at every place; of the mean where places coincide."""
    total = weight.sum()
    middle = float(weight @ along) / total
    mean = float(weight @ offset) / total
    run = along - middle
    spread = float(weight @ run**2)
    slope = float(weight @ (run * (offset - mean))) / spread if spread > 0 else 0.0
    fitted: Floats = mean + slope * run
    return fitted


def near_straight(along: Floats, offset: Floats, good: NDArray[np.bool_], tolerance: float) -> NDArray[np.bool_]:
    """Places within ``tolerance`` of the straight line of least absolute deviation through the good ones.

    Iteratively reweighted least squares; false where fewer than two places are good.
    """
    if np.sum(good) < 2:
        return np.zeros(len(along), dtype=bool)
    weight = good.astype(np.float64)
    residual = np.zeros(len(along))
    for _ in range(STEPS):
        residual = np.abs(offset - fitted_offsets(along, offset, weight))
        weight = good / np.maximum(residual, 0.05)
    near: NDArray[np.bool_] = residual <= tolerance
    return near


def agreeing(
    along: Floats, offset: Floats, good: NDArray[np.bool_], least_spread: float
) -> tuple[NDArray[np.bool_], float]:
    """Good places within four standard deviations of their own straight line, and that standard deviation.

    Tukey's biweight with 95 % efficiency (4.685), scale from the median absolute deviation.
    """
    weight = good.astype(np.float64)
    spread, residual = least_spread, offset
    for _ in range(STEPS):
        residual = offset - fitted_offsets(along, offset, weight)
        spread = max(1.4826 * float(np.median(np.abs(residual[good]))), least_spread)
        weight = good * np.square(np.maximum(1 - np.square(residual / (4.685 * spread)), 0.0))
        if weight.sum() == 0:
            return np.zeros(len(along), dtype=bool), spread
    kept = good & (np.abs(residual) <= 4.0 * spread)
    return kept, max(float(np.std(residual[kept])), least_spread) if kept.any() else spread
