"""One smooth stretch between two kinks: straight where the points say so, else a penalised spline."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import BSpline

from curvelab.fit.noise import TUKEY, Noise
from curvelab.fit.smooth import DEGREE, design, fit_smooth, uniform_knots
from curvelab.fit.strand import Strand
from curvelab.records.arrays import Floats
from curvelab.records.fit import Form

PASSES = 3
LEAST_FOR_SPLINE = 8


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
        inside = np.clip(u, self.knots[self.degree], self.knots[-self.degree - 1])
        on_knots: Floats = self._spline(inside)
        return on_knots + self.slope(u) * (u - inside)

    def slope(self, u: Floats) -> Floats:
        """dv/du at u."""
        inside = np.clip(u, self.knots[self.degree], self.knots[-self.degree - 1])
        derived: Floats = np.clip(self._spline.derivative()(inside), -1.0, 1.0)
        return derived

    def variance(self, u: Floats) -> Floats:
        """Variance of v at u, in decades^2."""
        basis = design(u, self.knots, self.degree)
        return _quadratic(basis, self.covariance)

    def scatter_variance(self, u: Floats) -> Floats:
        """The share of the variance that is scatter of the points, the rest being smoothing."""
        basis = design(u, self.knots, self.degree)
        return _quadratic(basis, self.scatter)

    @property
    def _spline(self) -> BSpline:
        return BSpline(self.knots, self.coefficients, self.degree, extrapolate=True)


def _quadratic(basis: Floats, matrix: Floats) -> Floats:
    """Row by row b' M b, never below 0."""
    result: Floats = np.maximum(np.sum((basis @ matrix) * basis, axis=1), 0.0)
    return result


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Extent:
    """Which points a stretch has, the range of u its model must cover, the knots' spacing, and its form if settled."""

    first: int
    last: int
    start: float
    end: float
    step: float
    form: Form | None = None


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
    price = np.log(max(np.count_nonzero(data.kept) / noise.inflation, 2.0))
    return best if best.misfit + price * best.edf <= spline.misfit + price * spline.edf else spline


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Data:
    u: Floats
    v: Floats
    sd: Floats
    kept: NDArray[np.bool_]
    noise: Noise

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
    slopes = BSpline.design_matrix(data.u, knots[1:-1], DEGREE - 1).toarray()
    slope, robust = np.zeros_like(data.u), data.kept.astype(float)
    for remaining in reversed(range(PASSES)):
        smooth = fit_smooth(basis, data.v, data.weight(slope, robust), step if remaining == 0 else np.inf)
        slope = np.clip(slopes @ (np.diff(smooth.coefficients) / step), -1.0, 1.0)
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
    """The best of a vertical, a horizontal and a sloping line."""
    lines = [_straight(data, extent, slope) for slope in (-1.0, 1.0, None)]
    price = np.log(max(np.count_nonzero(data.kept) / data.noise.inflation, 2.0))
    return min(lines, key=lambda line: line.misfit + price * line.edf)


def _straight(data: _Data, extent: Extent, fixed: float | None) -> Stretch:
    ends = np.array([extent.start, extent.end])
    shape = np.stack([(ends[1] - data.u), (data.u - ends[0])], axis=1) / (ends[1] - ends[0])
    known = 0.0 if fixed is None else fixed
    rise = known * (ends - ends[0])
    free = np.eye(2) if fixed is None else np.ones((2, 1))
    robust = data.kept.astype(float)
    if fixed is not None:
        robust = data.robust(
            data.residual(shape @ rise + np.median((data.v - shape @ rise)[data.kept]), known + 0 * data.u)
        )
    slope = np.full_like(data.u, known)
    for _ in range(PASSES):
        weight = data.weight(slope, robust)
        basis = shape @ free
        covariance = np.linalg.pinv(basis.T @ (basis * weight[:, None]))
        coefficients = rise + free @ (covariance @ (basis.T @ (weight * (data.v - shape @ rise))))
        reach = ends[1] - ends[0]
        if abs(coefficients[1] - coefficients[0]) > reach:
            middle = coefficients.mean()
            coefficients = middle + 0.5 * np.sign(coefficients[1] - coefficients[0]) * np.array([-reach, reach])
        slope = np.full_like(data.u, (coefficients[1] - coefficients[0]) / reach)
        residual = data.residual(shape @ coefficients, slope)
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
