"""Penalised cubic B-splines: basis, choice of the penalty, monotone solution, covariance.

P-splines after Eilers and Marx (Statistical Science 11, 1996). The penalty maximises the marginal likelihood with the
noise held at its estimate; correlated neighbours enter as noise inflated to what an average over many of them sees, so
that correlation is not taken for shape.
"""

from dataclasses import dataclass

import numpy as np
from scipy.interpolate import BSpline
from scipy.linalg import cholesky, eigh, solve_triangular
from scipy.optimize import lsq_linear

from curvelab.records.arrays import Floats

DEGREE = 3
PENALTY_ORDER = 3
LEAST_PENALTY = 1e-9
"""Of the data's own weight: holds coefficients that no point supports."""

PENALTIES = np.logspace(-9.0, 12.0, 85)
"""Searched, as a multiple of (trace of the data's weight) / (trace of the penalty)."""


def uniform_knots(start: float, end: float, intervals: int) -> Floats:
    """Knots of a cubic basis with equal intervals from start to end, continued at both sides."""
    step = (end - start) / intervals
    knots = np.float64(start) + step * np.arange(-DEGREE, intervals + DEGREE + 1, dtype=np.float64)
    knots[DEGREE], knots[intervals + DEGREE] = start, end
    return knots


def design(u: Floats, knots: Floats, degree: int = DEGREE) -> Floats:
    """Basis functions at u, shape (n, m)."""
    inside = np.clip(u, knots[degree], knots[-degree - 1])
    matrix: Floats = BSpline.design_matrix(inside, knots, degree).toarray()
    return matrix


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Smooth:
    """A penalised fit: coefficients, their posterior covariance, the share of it that is scatter, penalty, edf."""

    coefficients: Floats
    covariance: Floats
    scatter: Floats
    penalty: float
    edf: float


def fit_smooth(basis: Floats, v: Floats, weight: Floats, step: float = np.inf) -> Smooth:
    """Fit coefficients with slopes between -1 and 1.

    Parameters
    ----------
    basis : array, shape (n, m)
    v : array, shape (n,)
    weight : array, shape (n,)
        1 / variance of each point, inflated for correlation.
    step : float
        Distance between knots; infinite to leave the slopes free.
    """
    weighted = basis * weight[:, None]
    information = basis.T @ weighted
    penalty = _penalty_matrix(information.shape[0])
    unit = np.trace(information) / np.trace(penalty)
    held = information + LEAST_PENALTY * unit * penalty
    # A coefficient without any point and a penalty too small for the arithmetic would leave `held` singular.
    held[np.diag_indices_from(held)] += 1e-13 * np.trace(information)
    roughness, modes = eigh(unit * penalty, held)
    roughness[:PENALTY_ORDER] = 0.0  # a parabola is not penalised; in ascending order, these are its modes
    amplitude = modes.T @ (weighted.T @ v)
    chosen = _penalty(roughness, amplitude)
    shrink = 1.0 / (1.0 + chosen * roughness)
    coefficients = modes @ (shrink * amplitude)
    if np.any(np.abs(np.diff(coefficients)) > step):
        coefficients = _monotone(held + chosen * unit * penalty, weighted.T @ v, step)
    return Smooth(
        coefficients=coefficients,
        covariance=(modes * shrink) @ modes.T,
        scatter=(modes * shrink**2) @ modes.T,
        penalty=chosen,
        edf=float(shrink.sum()),
    )


def _penalty_matrix(size: int) -> Floats:
    differences = np.diff(np.eye(size), min(PENALTY_ORDER, size - 1), axis=0)
    matrix: Floats = differences.T @ differences
    return matrix


def _penalty(roughness: Floats, amplitude: Floats) -> float:
    """The penalty of greatest marginal likelihood: mode i has variance 1 + 1 / (penalty x roughness_i)."""
    rough = roughness > 1e-12
    products = PENALTIES[:, None] * roughness[None, rough]
    variance = 1.0 + 1.0 / products
    misfit = (np.log(variance) + amplitude[None, rough] ** 2 / variance).sum(axis=1)
    best = int(np.argmin(misfit))
    if 0 < best < len(PENALTIES) - 1:
        low, middle, high = misfit[best - 1 : best + 2]
        shift = 0.5 * (low - high) / (low - 2.0 * middle + high)
        return float(PENALTIES[best] * (PENALTIES[1] / PENALTIES[0]) ** shift)
    return float(PENALTIES[best])


def _monotone(information: Floats, right: Floats, step: float) -> Floats:
    """Coefficients whose consecutive differences stay within the knot step, by bounded least squares.

    Slopes of a B-spline are averages of consecutive differences over the step, so that this is sufficient.
    """
    size = len(right)
    root = cholesky(information)
    target = solve_triangular(root, right, trans="T")
    summed = root @ np.tril(np.ones((size, size)))
    lower = np.full(size, -step)
    upper = np.full(size, step)
    lower[0], upper[0] = -np.inf, np.inf
    solution = lsq_linear(summed, target, bounds=(lower, upper), method="bvls")
    increments = np.clip(solution.x[1:], -step, step)
    return np.concatenate([solution.x[:1], solution.x[0] + np.cumsum(increments)])
