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
    """Places within ``tolerance`` of each row's straight line of least absolute deviation through its good ones.

    Iteratively reweighted least squares, for all rows at once; false where fewer than two places of a row are good.

    Parameters
    ----------
    along : array, shape (m,)
    offset, good : array, shape (n, m)
    tolerance : float
    """
    weight = good.astype(np.float64)
    residual = np.zeros(offset.shape)
    for _ in range(STEPS):
        residual = np.abs(offset - _row_lines(along, offset, weight))
        weight = good / np.maximum(residual, 0.05)
    near: NDArray[np.bool_] = (residual <= tolerance) & (good.sum(axis=1, keepdims=True) >= 2)
    return near


def _row_lines(along: Floats, offset: Floats, weight: Floats) -> Floats:
    """Weighted least-squares straight line of each row, at every place."""
    total = np.maximum(weight.sum(axis=1), 1e-12)
    middle, mean = (weight @ along) / total, np.einsum("ij,ij->i", weight, offset) / total
    run = along[None, :] - middle[:, None]
    weighted = weight * run
    spread = np.einsum("ij,ij->i", weighted, run)
    rise = np.einsum("ij,ij->i", weighted, offset - mean[:, None])
    slope = np.divide(rise, spread, out=np.zeros_like(rise), where=spread > 0)
    lines: Floats = mean[:, None] + slope[:, None] * run
    return lines


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
