"""Axes: the smooth map between a place on the sheet and (current, value), with its covariance."""

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from curvelab.errors import AxesError
from curvelab.records.arrays import Floats, freeze
from curvelab.records.propagation import propagated
from curvelab.units import CURRENT_UNITS, unit_factor

Scale = Literal["log", "linear"]
Direction = Literal["x", "y"]
MarkOrigin = Literal["given", "grid", "label", "vector"]

SOLVER_STEPS = 30

LEAST_MODE = 1e-10
"""Of the largest variance of the parameters: below it a combination of them is known exactly."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Mark:
    """A place on an axis whose value is known, in the axis's printed unit and factor."""

    at: tuple[float, float]
    value: float
    origin: MarkOrigin = "given"
    unit: str | None = None
    residual: float | None = None
    """Distance along the axis between the mark and the fitted map, in the sheet's unit."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Axis:
    """What one axis counts.

    ``quantity`` is ``current``, ``time``, ``let_through`` or ``peak``; a value in the base unit (A, a multiple, s, A2s)
    is the printed value x ``factor`` x the unit's own factor.
    """

    quantity: Literal["current", "time", "let_through", "peak"]
    scale: Scale
    unit: str
    factor: float
    direction: Direction
    marks: tuple[Mark, ...]

    @property
    def base(self) -> str:
        """What a current is counted in; the base unit for other quantities."""
        if self.quantity == "current":
            return CURRENT_UNITS[self.unit][0]
        return {"time": "s", "let_through": "A2s", "peak": "A"}[self.quantity]

    def value_of(self, mark: Mark) -> float:
        """The mark's value in the base unit."""
        return mark.value * self.factor * unit_factor(self.quantity, mark.unit or self.unit)

    def scaled(self, values: ArrayLike) -> Floats:
        """log10 of values in the base unit on a log axis, the values themselves on a linear one."""
        array = np.asarray(values, dtype=np.float64)
        return np.log10(array) if self.scale == "log" else array

    def unscaled(self, scaled: ArrayLike) -> Floats:
        """Values in the base unit from scaled ones."""
        array = np.asarray(scaled, dtype=np.float64)
        return np.power(10.0, array) if self.scale == "log" else array


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PlaneMap:
    """Map from a place to (scaled current, scaled value): projective, then a smooth polynomial warp.

    With X = (x - centre_x) / reach and Y = (y - centre_y) / reach, and h the eight projective parameters
    (h0 + h1 X + h2 Y) / (1 + h6 X + h7 Y) is the scaled current and (h3 + h4 X + h5 Y) / (1 + h6 X + h7 Y) the scaled
    value; to each is added the sum over ``powers`` of w X^i Y^j. An affine map has h6 = h7 = 0.

    Parameters
    ----------
    centre : array, shape (2,)
    reach : float
        Half the larger side of the plot, so that |X|, |Y| are about 1 inside it.
    projective : array, shape (8,)
    powers : tuple of (i, j)
        Monomials of the warp, i + j >= 2; empty for none.
    warp : array, shape (2, len(powers))
        Coefficients for the scaled current and the scaled value.
    covariance : array, shape (m, m)
        Covariance of the parameters in the order projective, warp[0], warp[1] (m = 8 + 2 len(powers)); rows of
        parameters that were held fixed are zero.
    """

    centre: Floats
    reach: float
    projective: Floats
    powers: tuple[tuple[int, int], ...]
    warp: Floats
    covariance: Floats

    def __post_init__(self) -> None:
        freeze(
            self,
            centre=self.centre,
            projective=self.projective,
            warp=np.reshape(self.warp, (2, len(self.powers))),
            covariance=self.covariance,
        )

    def _normal(self, places: ArrayLike) -> tuple[Floats, Floats]:
        offset = (np.atleast_2d(np.asarray(places, dtype=np.float64)) - self.centre) / self.reach
        return offset[:, 0], offset[:, 1]

    def _monomials(self, X: Floats, Y: Floats) -> Floats:
        return np.stack([X**i * Y**j for i, j in self.powers], axis=1) if self.powers else np.zeros((X.size, 0))

    def scaled(self, places: ArrayLike) -> Floats:
        """Scaled (current, value) of places; shapes (n, 2) -> (n, 2)."""
        X, Y = self._normal(places)
        h = self.projective
        below = 1.0 + h[6] * X + h[7] * Y
        plane = np.stack([(h[0] + h[1] * X + h[2] * Y) / below, (h[3] + h[4] * X + h[5] * Y) / below], axis=1)
        return plane + self._monomials(X, Y) @ self.warp.T

    def jacobian(self, places: ArrayLike) -> Floats:
        """Derivative of the scaled pair by the place, shape (n, 2, 2): [k, i, j] = d scaled_i / d place_j."""
        X, Y = self._normal(places)
        h = self.projective
        below = 1.0 + h[6] * X + h[7] * Y
        result = np.empty((X.size, 2, 2))
        for i in (0, 1):
            above = h[3 * i] + h[3 * i + 1] * X + h[3 * i + 2] * Y
            result[:, i, 0] = (h[3 * i + 1] * below - above * h[6]) / below**2
            result[:, i, 1] = (h[3 * i + 2] * below - above * h[7]) / below**2
        for k, (i, j) in enumerate(self.powers):
            by_x = i * X ** max(i - 1, 0) * Y**j
            by_y = j * X**i * Y ** max(j - 1, 0)
            result[:, :, 0] += by_x[:, None] * self.warp[:, k]
            result[:, :, 1] += by_y[:, None] * self.warp[:, k]
        return result / self.reach

    def sensitivity(self, places: ArrayLike) -> Floats:
        """Derivative of the scaled pair by the parameters, shape (n, 2, m), in the covariance's order."""
        X, Y = self._normal(places)
        h = self.projective
        below = 1.0 + h[6] * X + h[7] * Y
        terms = len(self.powers)
        result = np.zeros((X.size, 2, 8 + 2 * terms))
        monomials = self._monomials(X, Y)
        for i in (0, 1):
            above = h[3 * i] + h[3 * i + 1] * X + h[3 * i + 2] * Y
            result[:, i, 3 * i] = 1.0 / below
            result[:, i, 3 * i + 1] = X / below
            result[:, i, 3 * i + 2] = Y / below
            result[:, i, 6] = -above * X / below**2
            result[:, i, 7] = -above * Y / below**2
            result[:, i, 8 + i * terms : 8 + (i + 1) * terms] = monomials
        return result

    def covariance_at(self, places: ArrayLike) -> Floats:
        """Covariance of the scaled pair that the calibration causes, shape (n, 2, 2)."""
        return propagated(self.sensitivity(places), self.covariance)

    def errors_at(self, places: ArrayLike) -> Floats:
        """What independent errors of unit variance, whose sum the calibration's is, do to the scaled pair.

        Shape (n, 2, r): the covariance between two places is errors[i] @ errors[j].T.
        """
        variances, modes = np.linalg.eigh(self.covariance)
        known = variances > LEAST_MODE * variances[-1]
        errors: Floats = self.sensitivity(places) @ (modes[:, known] * np.sqrt(variances[known]))
        return errors

    def places(self, scaled: ArrayLike) -> Floats:
        """Places of scaled (current, value) pairs by Newton's method; shapes (n, 2) -> (n, 2).

        Raises
        ------
        AxesError
            The map cannot be inverted there.
        """
        target = np.atleast_2d(np.asarray(scaled, dtype=np.float64))
        place = np.repeat(self.centre[None, :], len(target), axis=0)
        tolerance = 1e-10 * self.reach
        for _ in range(SOLVER_STEPS):
            try:
                step = np.linalg.solve(self.jacobian(place), (target - self.scaled(place))[:, :, None])[:, :, 0]
            except np.linalg.LinAlgError:
                break
            place = place + step
            if not np.all(np.isfinite(step)):
                break
            if step.size == 0 or np.abs(step).max() <= tolerance:
                return place
        raise AxesError("The axes cannot be followed back to a place on the sheet", "", "Check the marks")


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Axes:
    """Both axes of one plot and the map between them and the sheet.

    Parameters
    ----------
    current, value : Axis
        The current axis and the second axis (time, let-through or peak).
    map : PlaneMap
    frame : tuple of float
        (x0, y0, x1, y1): the plot's corner places, the bounding box of what the axes cover.
    mark_residual_rms : float
        Root mean square of the residuals of the marks given, in the sheet's unit.
    grid_residual_rms : float or None
        The same of the measured grid lines; None where no grid line was used.
    grid : tuple of GridLine
        Every grid line measured.
    automatic : bool
        True where no mark was given.
    plot : int
        Which of the page's plots this is, from 1.
    snapped : bool
        True where the covariance of the map is that of grid lines drawn on whole pixels.
    """

    current: Axis
    value: Axis
    map: PlaneMap
    frame: tuple[float, float, float, float]
    mark_residual_rms: float
    grid_residual_rms: float | None = None
    grid: tuple["GridLine", ...] = ()
    automatic: bool = False
    plot: int = 1
    snapped: bool = False

    def values(self, places: ArrayLike) -> tuple[Floats, Floats]:
        """Currents and values in base units of places, shape (n, 2)."""
        scaled = self.map.scaled(places)
        return self.current.unscaled(scaled[:, 0]), self.value.unscaled(scaled[:, 1])

    def places(self, currents: ArrayLike, values: ArrayLike) -> Floats:
        """Places, shape (n, 2), of currents and values in base units."""
        return self.map.places(np.stack([self.current.scaled(currents), self.value.scaled(values)], axis=1))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class GridLine:
    """One measured grid line.

    Parameters
    ----------
    axis : "current" or "value"
        The axis whose value is constant along the line.
    value : float
        That value in the base unit.
    points : array, shape (n, 2)
        Places measured along its centre.
    sd : float
        Standard deviation of each place across the line, in the sheet's unit.
    width : float
        Width of the stroke in the sheet's unit.
    darkness : float
        Contrast against the paper, 0 to 1.
    """

    axis: Literal["current", "value"]
    value: float
    points: Floats
    sd: float
    width: float
    darkness: float

    def __post_init__(self) -> None:
        freeze(self, points=self.points)
