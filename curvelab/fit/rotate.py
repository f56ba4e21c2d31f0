"""Log-log coordinates turned by 45 degrees, in which a monotone curve is a function of slope between -1 and 1."""

import math

import numpy as np

from curvelab.records.arrays import Floats

ROOT_2 = math.sqrt(2.0)


def rotated(log_current: Floats, log_value: Floats, rising: bool) -> tuple[Floats, Floats]:
    """(u, v) of log10 points; a rising curve is mirrored so that it falls."""
    level = -log_value if rising else log_value
    return (log_current - level) / ROOT_2, (log_current + level) / ROOT_2


def unrotated(u: Floats, v: Floats, rising: bool) -> tuple[Floats, Floats]:
    """log10 (current, value) of rotated points."""
    level = (v - u) / ROOT_2
    return (u + v) / ROOT_2, -level if rising else level


def normal_variance(common: Floats, slope: Floats, rising: bool) -> Floats:
    """Variance along the curve's normal of log10 (current, value) covariances.

    Parameters
    ----------
    common : array, shape (n, 2, 2)
    slope : array, shape (n,)
        dv/du.
    rising : bool

    Returns
    -------
    array, shape (n,)
        In decades^2.
    """
    across, down = unrotated(-slope, np.ones_like(slope), rising)
    normal = np.stack([across, down], axis=1) / np.sqrt(1.0 + slope**2)[:, None]
    variance: Floats = np.einsum("ki,kij,kj->k", normal, common, normal)
    return np.maximum(variance, 0.0)


def log_slope(slope: Floats) -> tuple[Floats, Floats]:
    """|dX/ds| and |dY/ds| of the unit tangent for dv/du, in log10 current and value."""
    length = np.sqrt(2.0 * (1.0 + slope**2))
    return np.maximum(1.0 + slope, 0.0) / length, np.maximum(1.0 - slope, 0.0) / length
