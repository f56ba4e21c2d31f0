"""How large the scatter of the points is, and how much of it neighbours share."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats

PRIOR_POINTS = 10.0
"""Weight, in points, of the stated standard deviation against the scatter found."""

PRIOR_NEIGHBOURS = 60.0
"""Weight, in points, of the stated correlation length against the correlation found."""

TUKEY = 6.0
"""Standard deviations at which a point's weight reaches zero; 98 % efficient for normal errors."""

FEWEST_LAGS, MOST_LAGS = 4, 64

MOST_TAKEN = 0.3
"""Share of the variance that the fit's own parameters are credited with at most."""

INSIGNIFICANT = 1.5
"""Correlations are summed up to the first below this many standard errors, 1 / sqrt(n), of one that is none."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Noise:
    """``scale`` multiplies the stated sd; ``inflation`` is the variance of an average against that of white noise."""

    scale: float
    inflation: float

    def misfit(self, residuals: Floats) -> float:
        """Twice the negative log likelihood of residuals over their stated sd, on the effective points.

        Tukey's biweight: quadratic near 0, constant for strays.
        """
        limit = TUKEY * self.scale
        bounded = np.minimum((residuals / limit) ** 2, 1.0)
        loss = limit**2 / 3.0 * (1.0 - (1.0 - bounded) ** 3)
        return float(np.sum(loss) / (self.scale**2 * self.inflation))


def stated_noise(spacing: float, correlation_length: float) -> Noise:
    """What the trace says of itself: correlation that falls exponentially over its length."""
    if correlation_length <= 0.0 or spacing <= 0.0:
        return Noise(scale=1.0, inflation=1.0)
    alike = np.exp(-spacing / correlation_length)
    return Noise(scale=1.0, inflation=float((1.0 + alike) / (1.0 - alike)))


def measured_noise(residuals: list[Floats], parameters: float, stated: Noise) -> Noise:
    """Scale and inflation from residuals, corrected for the parameters the fit has taken up.

    Parameters
    ----------
    residuals : list of array
        Of each piece in order, each divided by its stated standard deviation.
    parameters : float
        Effective number of parameters of all pieces.
    stated : Noise
    """
    clipped = [_clipped(piece) for piece in residuals]
    count = sum(len(piece) for piece in clipped)
    if count < 2:
        return stated
    # Beyond half of what one parameter spans, residuals tell of the fit, not of the noise.
    covariances = _autocovariances(clipped, lags=max(int(count / (2.0 * max(parameters, 1.0))), FEWEST_LAGS))
    if covariances[0] == 0.0:
        return stated
    inflation, variance = stated.inflation, covariances[0]
    for _ in range(4):
        taken = min(inflation * parameters / count, MOST_TAKEN)
        variance = covariances[0] / (1.0 - taken)
        # Fitted parameters lower the covariance at short lags by what they lower the variance.
        inflation = _summed((covariances + variance * taken) / variance, INSIGNIFICANT / np.sqrt(count))
        shared = PRIOR_NEIGHBOURS / (count + PRIOR_NEIGHBOURS)
        inflation = (1.0 - shared) * inflation + shared * stated.inflation
    free = max(count / inflation - parameters, 0.0)
    scale = np.sqrt((free * variance + PRIOR_POINTS) / (free + PRIOR_POINTS))
    return Noise(scale=float(scale), inflation=float(inflation))


def _clipped(residual: Floats) -> Floats:
    if residual.size == 0:
        return residual
    limit = 4.0 * 1.4826 * np.median(np.abs(residual))
    return np.clip(residual, -limit, limit)


def _autocovariances(pieces: list[Floats], lags: int) -> Floats:
    lags = min(lags, MOST_LAGS)
    sums, counts = np.zeros(lags), np.zeros(lags)
    for piece in pieces:
        for lag in range(min(lags, len(piece))):
            sums[lag] += piece[lag:] @ piece[: len(piece) - lag]
            counts[lag] += len(piece) - lag
    return sums / np.maximum(counts, 1.0)


def _summed(correlations: Floats, least: float) -> float:
    """1 + 2 x the sum of the leading correlations that are not noise themselves."""
    none = np.flatnonzero(correlations < least)
    last = int(none[0]) if none.size else len(correlations)
    return 1.0 + 2.0 * float(np.sum(correlations[1:last]))
