"""The plane map fitted to measured lines, with a covariance that counts lines, not places.

Each place of a line is off across the line by an error of the line, shared by all its places (a renderer that snaps
lines to whole pixels, ink spread, a wrong line width), and by an error of its own. Both variances are estimated for
each axis from the residuals; the fit is generalised least squares under that covariance, iterated because the
projective model is not linear. A model with more terms is taken only where the Bayesian information criterion
(Schwarz 1978, Annals of Statistics 6, 461-464) asks for it clearly.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.models import AFFINE, RICHER, SIMPLE, Model
from curvelab.errors import AxesError
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

CLEARLY = 10.0
"""BIC difference called very strong evidence (Kass and Raftery 1995, J. Am. Stat. Assoc. 90, 773-795)."""

OUTLYING = 5.0
"""A line is left out beyond this many robust standard deviations."""

STEPS = 4
"""Gauss-Newton steps between two estimates of the variances."""

ROUNDS = 4
SETTLED = 1e-9
"""Parameter step, in scaled units, below which the fit stands still."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Line:
    """Places (shape (n, 2)) where the scaled value of axis 0 (current) or 1 (value) is known.

    ``sd`` is the standard deviation of each place across the line; where None it is estimated from the residuals.
    """

    axis: int
    scaled: float
    points: Floats
    sd: float | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Tilt:
    """How the lines of an axis without measured lines lean: at right angles to the other axis's, or not at all.

    ``sd`` is the standard deviation of that angle in radians.
    """

    axis: int
    square: bool
    sd: float


@dataclass(frozen=True, kw_only=True, slots=True)
class Scatter:
    """Least standard deviations assumed: of the lines of each axis as wholes and of single places, in places' unit."""

    lines: tuple[float, float]
    place: float


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Fitted:
    """A fitted map, the mean residual of each line across itself, and which lines were kept.

    ``line_sd`` is what the lines of each axis scatter as wholes.
    """

    map: PlaneMap
    residuals: Floats
    kept: NDArray[np.bool_]
    line_sd: tuple[float, float]
    criterion: float
    model: Model

    @property
    def residual_rms(self) -> float:
        """Root mean square of the kept lines' mean residuals."""
        return float(np.sqrt(np.mean(self.residuals[self.kept] ** 2)))


def affine_map(centre: Floats, reach: float, rows: Floats) -> PlaneMap:
    """An affine map from its rows (constant, by X, by Y) for both axes, in normalised places; no covariance yet."""
    return PlaneMap(
        centre=centre,
        reach=reach,
        projective=np.concatenate([np.ravel(rows), [0.0, 0.0]]),
        powers=(),
        warp=np.zeros((2, 0)),
        covariance=np.zeros((8, 8)),
    )


def fit_plane(
    start: PlaneMap,
    lines: Sequence[Line],
    scatter: Scatter,
    tilts: Sequence[Tilt] = (),
    models: Sequence[Model] = RICHER,
) -> Fitted:
    """The simplest map that the lines support.

    Parameters
    ----------
    start : PlaneMap
        An affine map near the solution; its centre and reach are kept.
    lines : sequence of Line
        At least two an axis.
    scatter : Scatter
    tilts : sequence of Tilt
        One for each axis whose lines are single places.
    models : sequence of Model
        What is tried beside the affine map.

    Raises
    ------
    AxesError
        The lines do not determine an affine map.
    """
    problem = _Problem.of(lines, scatter, tilts)
    best = problem.solved(start, AFFINE)
    fewest = min(int(np.sum(problem.line_axis[problem.estimated] == axis)) for axis in (0, 1))
    for model in models:
        if fewest < model.lines:
            continue
        if model not in SIMPLE and best.model is AFFINE:
            break
        try:
            trial = problem.solved(start, model)
        except AxesError:
            continue
        if trial.criterion < best.criterion - CLEARLY:
            best = trial
    return best


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Problem:
    """All places in one array, with the line each belongs to."""

    points: Floats
    owner: NDArray[np.int64]
    line_axis: NDArray[np.int64]
    line_scaled: Floats
    line_sd: Floats
    scatter: Scatter
    tilts: tuple[Tilt, ...]

    @classmethod
    def of(cls, lines: Sequence[Line], scatter: Scatter, tilts: Sequence[Tilt]) -> "_Problem":
        return cls(
            points=np.concatenate([line.points for line in lines]),
            owner=np.repeat(np.arange(len(lines)), [len(line.points) for line in lines]),
            line_axis=np.array([line.axis for line in lines]),
            line_scaled=np.array([line.scaled for line in lines]),
            line_sd=np.array([np.nan if line.sd is None else line.sd for line in lines]),
            scatter=scatter,
            tilts=tuple(tilts),
        )

    @property
    def estimated(self) -> NDArray[np.bool_]:
        """Lines whose scatter is found from the residuals."""
        return np.isnan(self.line_sd)

    @property
    def counts(self) -> NDArray[np.int64]:
        return np.bincount(self.owner, minlength=len(self.line_axis))

    def solved(self, start: PlaneMap, model: Model) -> Fitted:
        """Fit one model: variances, steps and outlying lines in turn until they settle."""
        size, free = 8 + 2 * len(model.powers), model.free(start)
        affine = np.where(np.arange(8) < 6, start.projective, 0.0)
        plane = replace(start, projective=affine, powers=model.powers, warp=np.zeros((2, len(model.powers))))
        kept = np.ones(len(self.line_axis), dtype=bool)
        residual, rows = self._linear(plane, free)
        line_sd, place_sd = self._variances(residual, kept, 0)
        for _ in range(ROUNDS):
            for _ in range(STEPS):
                weighted, design = self._whitened(residual, rows, kept, line_sd, place_sd, plane, free)
                step, _ = _solution(weighted, design)
                plane = _moved(plane, free, -step)
                residual, rows = self._linear(plane, free)
                if np.abs(step).max() < SETTLED:
                    break
            kept = self._kept(residual)
            line_sd, place_sd = self._variances(residual, kept, len(free))
        weighted, design = self._whitened(residual, rows, kept, line_sd, place_sd, plane, free)
        _, inverse = _solution(weighted, design)
        covariance = np.zeros((size, size))
        covariance[np.ix_(free, free)] = inverse
        return Fitted(
            map=replace(plane, covariance=covariance),
            residuals=self._line_means(residual),
            kept=kept,
            line_sd=(float(line_sd[0]), float(line_sd[1])),
            criterion=self._criterion(weighted, kept, line_sd, place_sd, len(free)),
            model=model,
        )

    def _linear(self, plane: PlaneMap, free: NDArray[np.int64]) -> tuple[Floats, Floats]:
        """Distance of each place across its line from where the map has it, and its derivative by the parameters."""
        axis = self.line_axis[self.owner]
        each = np.arange(len(axis))
        steepness = np.linalg.norm(plane.jacobian(self.points)[each, axis], axis=1)
        residual = (plane.scaled(self.points)[each, axis] - self.line_scaled[self.owner]) / steepness
        return residual, plane.sensitivity(self.points)[each, axis][:, free] / steepness[:, None]

    def _line_means(self, residual: Floats) -> Floats:
        means: Floats = np.bincount(self.owner, residual, len(self.line_axis)) / self.counts
        return means

    def _variances(self, residual: Floats, kept: NDArray[np.bool_], fitted: int) -> tuple[Floats, Floats]:
        """Standard deviations of lines and of places, for each axis, from the residuals of its kept lines."""
        means = self._line_means(residual)
        line_sd, place_sd = np.array(self.scatter.lines), np.full(2, self.scatter.place)
        for axis in (0, 1):
            mine = kept & self.estimated & (self.line_axis == axis)
            counts = self.counts[mine]
            if len(counts) == 0:
                continue
            inner = (residual - means[self.owner])[mine[self.owner]]
            within = float(np.sum(inner**2)) / max(int(np.sum(counts - 1)), 1)
            freedom = max(len(counts) - fitted / 2, 1.0)
            between = float(np.sum(means[mine] ** 2)) / freedom - within * float(np.mean(1 / counts))
            place_sd[axis] = max(place_sd[axis], np.sqrt(within))
            line_sd[axis] = max(line_sd[axis], np.sqrt(max(between, 0.0)))
        return line_sd, place_sd

    def _sds(self, line_sd: Floats, place_sd: Floats) -> tuple[Floats, Floats]:
        """(sd of the line as a whole, sd of each place) for every line; stated ones are errors of the place alone."""
        whole = np.where(self.estimated, line_sd[self.line_axis], 0.0)
        return whole, np.where(self.estimated, place_sd[self.line_axis], np.nan_to_num(self.line_sd, nan=1.0))

    def _whitened(
        self,
        residual: Floats,
        rows: Floats,
        kept: NDArray[np.bool_],
        line_sd: Floats,
        place_sd: Floats,
        plane: PlaneMap,
        free: NDArray[np.int64],
    ) -> tuple[Floats, Floats]:
        """Residuals and derivatives with unit covariance: (I + r 11')^(-1/2) = I + (1/sqrt(1 + n r) - 1) 11'/n."""
        whole, single = self._sds(line_sd, place_sd)
        both = np.column_stack([residual, rows]) / single[self.owner, None]
        means = (
            np.stack([np.bincount(self.owner, column, len(single)) for column in both.T], axis=1) / self.counts[:, None]
        )
        shrink = 1 / np.sqrt(1 + self.counts * (whole / single) ** 2) - 1
        both = (both + (shrink[:, None] * means)[self.owner])[kept[self.owner]]
        tilted = [_tilt_row(plane, free, tilt) for tilt in self.tilts]
        both = np.vstack([both, *tilted]) if tilted else both
        return both[:, 0], both[:, 1:]

    def _kept(self, residual: Floats) -> NDArray[np.bool_]:
        means = self._line_means(residual)
        kept = np.ones(len(means), dtype=bool)
        for axis in (0, 1):
            mine = self.estimated & (self.line_axis == axis)
            if np.sum(mine) < 4:
                continue
            centre = np.median(means[mine])
            spread = max(1.4826 * np.median(np.abs(means[mine] - centre)), self.scatter.lines[axis], self.scatter.place)
            kept[mine] = np.abs(means[mine] - centre) <= OUTLYING * spread
        return kept

    def _criterion(
        self, weighted: Floats, kept: NDArray[np.bool_], line_sd: Floats, place_sd: Floats, fitted: int
    ) -> float:
        """BIC: twice the negative log likelihood plus the parameters' price; a line left out costs the limit."""
        whole, single = self._sds(line_sd, place_sd)
        counts = self.counts
        log_det = (counts - 1) * np.log(single**2) + np.log(single**2 + counts * whole**2)
        misfit = np.sum(weighted**2) + OUTLYING**2 * np.sum(~kept)
        return float(misfit + np.sum(log_det) + fitted * np.log(max(len(self.points), 2)))


def _solution(weighted: Floats, design: Floats) -> tuple[Floats, Floats]:
    """Least-squares step and its covariance; columns are scaled so that lengths and pure numbers mix well."""
    scale = np.linalg.norm(design, axis=0)
    if len(weighted) < design.shape[1] or np.any(scale == 0):
        raise AxesError("The marks and grid lines do not determine the axes", "", "Give more marks on each axis")
    q, r = np.linalg.qr(design / scale)
    if np.abs(np.diag(r)).min() < 1e-9:
        raise AxesError("The marks and grid lines do not determine the axes", "", "Give more marks on each axis")
    root = np.linalg.inv(r) / scale[:, None]
    return root @ (q.T @ weighted), root @ root.T


def _moved(plane: PlaneMap, free: NDArray[np.int64], step: Floats) -> PlaneMap:
    vector = np.concatenate([plane.projective, plane.warp.ravel()])
    vector[free] += step
    return replace(plane, projective=vector[:8], warp=vector[8:].reshape(2, len(plane.powers)))


def _tilt_row(plane: PlaneMap, free: NDArray[np.int64], tilt: Tilt) -> Floats:
    """Whitened (residual, derivatives) of the slope of an axis's lines at the centre."""
    row = _lean(plane, tilt.axis)
    if tilt.square:
        # Turned lines of the two axes lean by opposite slopes.
        row = row + _lean(plane, 1 - tilt.axis)
    whitened: Floats = row[np.concatenate([[0], 1 + free])] / tilt.sd
    return whitened


def _lean(plane: PlaneMap, axis: int) -> Floats:
    """Slope (across by along) of an axis's lines at the centre, and its derivatives by all parameters."""
    first, second = plane.projective[3 * axis + 1], plane.projective[3 * axis + 2]
    across, along = (1, 2) if abs(first) >= abs(second) else (2, 1)
    steep, lean = plane.projective[3 * axis + across], plane.projective[3 * axis + along]
    row = np.zeros(1 + 8 + plane.warp.size)
    row[0] = -lean / steep
    row[1 + 3 * axis + across] = lean / steep**2
    row[1 + 3 * axis + along] = -1 / steep
    return row
