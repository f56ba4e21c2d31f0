"""One smooth stretch between two kinks: straight where the points say so, else a penalised spline."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import splev

from curvelab.fit.noise import TUKEY, Noise
from curvelab.fit.smooth import DEGREE, design, fit_smooth, uniform_knots
from curvelab.fit.strand import Strand
from curvelab.records.arrays import Floats
from curvelab.records.fit import Form

PASSES = 3
LEAST_FOR_SPLINE = 8
NEARLY_UPRIGHT = 0.98
"""|dv/du| from which a line may be meant to be vertical or horizontal: 0.6 degrees from it."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Stretch:
    """The model over points first to last - 1 of the strand, and its misfit.

    ``covariance`` is the coefficients' posterior, ``scatter`` the share of it that comes from the points.
    ``residual`` is along the normal over the stated sd; ``followed`` is False for strays.
    """

    first: int
    last: int
    form: Form
    degree: int
    knots: Floats
    coefficients: Floats
    covariance: Floats
    scatter: Floats
    penalty: float
    edf: float
    misfit: float
    residual: Floats
    followed: NDArray[np.bool_]

    def value(self, u: Floats) -> Floats:
        """V at u; beyond the knots the end's tangent goes on (only ever used on the way to a kink)."""
        inside = self._inside(u)
        return self._evaluated(inside, 0) + self.slope(u) * (u - inside)

    def slope(self, u: Floats) -> Floats:
        """dv/du at u."""
        return np.clip(self._evaluated(self._inside(u), 1), -1.0, 1.0)

    def variance(self, u: Floats) -> Floats:
        """Variance of v at u, in decades^2."""
        basis = design(u, self.knots, self.degree)
        return _quadratic(basis, self.covariance)

    def scatter_variance(self, u: Floats) -> Floats:
        """The share of the variance that is scatter of the points, the rest being smoothing."""
        basis = design(u, self.knots, self.degree)
        return _quadratic(basis, self.scatter)

    def _inside(self, u: Floats) -> Floats:
        return np.clip(u, self.knots[self.degree], self.knots[-self.degree - 1])

    def _evaluated(self, u: Floats, derivative: int) -> Floats:
        return np.asarray(splev(u, (self.knots, self.coefficients, self.degree), der=derivative), dtype=np.float64)


def _quadratic(basis: Floats, matrix: Floats) -> Floats:
    """Row by row b' M b, never below 0."""
    result: Floats = np.maximum(np.sum((basis @ matrix) * basis, axis=1), 0.0)
    return result


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Extent:
    """Which points a stretch has, the range of u its model must cover, the knots' spacing, and its form where known.

    Until the kinks are ``settled``, models are compared only, for which fewer passes do and slopes may be free.
    """

    first: int
    last: int
    start: float
    end: float
    step: float
    form: Form | None = None
    settled: bool = False


def fit_stretch(strand: Strand, noise: Noise, extent: Extent) -> Stretch:
    """The simplest form that the points allow, by the Bayes information criterion on the effective points."""
    picked = slice(extent.first, extent.last)
    data = _Data(
        u=strand.u[picked],
        v=strand.v[picked],
        sd=strand.sd[picked],
        kept=strand.kept[picked],
        noise=noise,
    )
    if extent.form == "spline":
        return _spline(data, extent)
    best = _line(data, extent)
    if extent.form == "line" or np.count_nonzero(data.kept) < LEAST_FOR_SPLINE:
        return best
    spline = _spline(data, extent)
    price = data.price
    return best if best.misfit + price * best.edf <= spline.misfit + price * spline.edf else spline


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Data:
    u: Floats
    v: Floats
    sd: Floats
    kept: NDArray[np.bool_]
    noise: Noise

    @property
    def price(self) -> float:
        """What a parameter costs in the Bayes information criterion: the logarithm of the effective points."""
        return float(np.log(max(np.count_nonzero(self.kept) / self.noise.inflation, 2.0)))

    def weight(self, slope: Floats, robust: Floats) -> Floats:
        """1 / variance of v, inflated for correlation."""
        sd = self.noise.scale * self.sd
        return robust / (self.noise.inflation * sd**2 * (1.0 + slope**2))

    def residual(self, v: Floats, slope: Floats) -> Floats:
        """Along the normal, over the stated sd."""
        return (self.v - v) / (np.sqrt(1.0 + slope**2) * self.sd)

    def robust(self, residual: Floats) -> Floats:
        """Tukey's biweight."""
        typical = np.median(np.abs(residual[self.kept])) * 1.4826
        ratio = residual / (TUKEY * max(self.noise.scale, typical))
        return np.where(self.kept & (np.abs(ratio) < 1.0), (1.0 - np.minimum(ratio**2, 1.0)) ** 2, 0.0)


def _spline(data: _Data, extent: Extent) -> Stretch:
    intervals = max(int(np.ceil((extent.end - extent.start) / extent.step)), 1)
    knots = uniform_knots(extent.start, extent.end, intervals)
    step = (extent.end - extent.start) / intervals
    basis = design(data.u, knots)
    slope, robust = np.zeros_like(data.u), data.kept.astype(float)
    for remaining in reversed(range(PASSES if extent.settled else PASSES - 1)):
        monotone = extent.settled and remaining == 0
        smooth = fit_smooth(basis, data.v, data.weight(slope, robust), step if monotone else np.inf)
        slope = np.clip(splev(data.u, (knots, smooth.coefficients, DEGREE), der=1), -1.0, 1.0)
        residual = data.residual(basis @ smooth.coefficients, slope)
        robust = data.robust(residual)
    return Stretch(
        first=extent.first,
        last=extent.last,
        form="spline",
        degree=DEGREE,
        knots=knots,
        coefficients=smooth.coefficients,
        covariance=smooth.covariance,
        scatter=smooth.scatter,
        penalty=smooth.penalty,
        edf=smooth.edf,
        misfit=data.noise.misfit(residual[data.kept]),
        residual=residual,
        followed=robust > 0.0,
    )


def _line(data: _Data, extent: Extent) -> Stretch:
    """The best of a sloping and, where it nearly is that, a vertical or horizontal line."""
    sloping = _straight(data, extent, None)
    slope = float(sloping.slope(sloping.knots[:1])[0])
    if abs(slope) < NEARLY_UPRIGHT:
        return sloping
    upright = _straight(data, extent, float(np.sign(slope)))
    price = data.price
    return upright if upright.misfit + price * upright.edf <= sloping.misfit + price * sloping.edf else sloping


def _straight(data: _Data, extent: Extent, fixed: float | None) -> Stretch:
    """A line of fixed or free dv/du: its values at both ends of the extent are the coefficients."""
    ends = np.array([extent.start, extent.end])
    reach = extent.end - extent.start
    share = (data.u - extent.start) / reach
    known = 0.0 if fixed is None else fixed
    rise = known * (ends - ends[0])
    free = np.eye(2) if fixed is None else np.ones((2, 1))
    basis = np.stack([1.0 - share, share], axis=1) @ free
    level = data.v - known * (data.u - extent.start)
    slope, robust = np.full_like(data.u, known), data.kept.astype(np.float64)
    for _ in range(PASSES):
        weight = data.weight(slope, robust)
        covariance = np.linalg.inv(basis.T @ (basis * weight[:, None]))
        coefficients = rise + free @ (covariance @ (basis.T @ (weight * level)))
        turn = np.clip((coefficients[1] - coefficients[0]) / reach, -1.0, 1.0)
        coefficients = coefficients.mean() + turn * (ends - ends.mean())
        slope = np.full_like(data.u, turn)
        residual = data.residual(coefficients[0] + turn * (data.u - extent.start), slope)
        robust = data.robust(residual)
    spread = free @ covariance @ free.T
    return Stretch(
        first=extent.first,
        last=extent.last,
        form="line",
        degree=1,
        knots=np.array([ends[0], ends[0], ends[1], ends[1]]),
        coefficients=coefficients,
        covariance=spread,
        scatter=spread,
        penalty=np.inf,
        edf=float(free.shape[1]),
        misfit=data.noise.misfit(residual[data.kept]),
        residual=residual,
        followed=robust > 0.0,
    )
