"""An uncertainty along a curve's normal in log-log, and the same along the two axes."""

import numpy as np
from numpy.typing import ArrayLike

from curvelab.records.arrays import Floats

STEEPEST = 100.0
"""Beyond this slope a curve counts as vertical, below its inverse as horizontal: the long way round is not stated."""


def along_axes(sd_normal: ArrayLike, directions: ArrayLike) -> tuple[Floats, Floats]:
    """Standard uncertainties of the current at a value and of the value at a current.

    Parameters
    ----------
    sd_normal : array, shape (n,)
        Relative standard uncertainty along the normal in log-log.
    directions : array, shape (n, 2)
        Direction of the curve in log-log (current, value), of any length.

    Returns
    -------
    sd_current, sd_value : array, shape (n,)
        Relative; NaN where the curve is horizontal (sd_current) or vertical (sd_value).
    """
    sd = np.asarray(sd_normal, dtype=np.float64)
    run, rise = np.abs(np.asarray(directions, dtype=np.float64)).T
    length = np.hypot(run, rise)
    with np.errstate(divide="ignore", invalid="ignore"):
        sd_current = np.where(rise * STEEPEST < run, np.nan, sd * length / rise)
        sd_value = np.where(run * STEEPEST < rise, np.nan, sd * length / run)
    return sd_current, sd_value


def along_normal(sd_current: ArrayLike, sd_value: ArrayLike) -> Floats:
    """The uncertainty along the normal from those along the axes, NaN counting as infinite; NaN where both are."""
    with np.errstate(divide="ignore"):
        weight = np.nan_to_num(np.asarray(sd_current, dtype=np.float64) ** -2.0, nan=0.0)
        weight = weight + np.nan_to_num(np.asarray(sd_value, dtype=np.float64) ** -2.0, nan=0.0)
        return np.where(weight > 0, 1.0 / np.sqrt(weight), np.nan)
