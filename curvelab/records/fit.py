"""A fitted curve: monotone pieces between explicit kinks, with covariance and what contributed to it."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from curvelab.records.arrays import Floats, freeze
from curvelab.records.budget import UncertaintyBudget
from curvelab.records.curve import Part
from curvelab.records.form import PublishedForm

Form = Literal["spline", "line", "points"]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Piece:
    """One smooth stretch: a B-spline v(u) in log-log coordinates turned by 45 degrees.

    With X = log10 current and Y = log10 value (its negative on a rising curve), u = (X - Y) / sqrt 2 and
    v = (X + Y) / sqrt 2; a curve that never rises has abs(dv/du) <= 1, -1 where vertical and 1 where horizontal.

    Parameters
    ----------
    form : str
        ``spline`` (cubic), ``line`` (straight), or ``points`` (exact strokes kept as they are, joined by lines).
    start, end : float
        Range of u, in decades.
    degree : int
    knots : array, shape (m + degree + 1,)
    coefficients : array, shape (m,)
    covariance : array, shape (m, m) or (m,)
        Of the coefficients in decades^2, without the calibration; variances alone where the form is ``points``.
    """

    form: Form
    start: float
    end: float
    degree: int
    knots: Floats
    coefficients: Floats
    covariance: Floats

    def __post_init__(self) -> None:
        freeze(self, knots=self.knots, coefficients=self.coefficients, covariance=self.covariance)

    @property
    def numbers(self) -> int:
        """How many numbers describe the piece: uniform knots are two, range and coefficients the rest."""
        return len(self.coefficients) + (2 if self.form == "spline" else 0)


@dataclass(frozen=True, kw_only=True, slots=True)
class Kink:
    """A corner between two pieces: log10 of its current and value, and their standard deviations in decades.

    ``turn`` is the angle in radians by which the line turns there, as drawn with equal decades.
    """

    log_current: float
    log_value: float
    sd_log_current: float
    sd_log_value: float
    turn: float


@dataclass(frozen=True, kw_only=True, slots=True)
class FitGap:
    """A stretch without data: log10 (current, value) of its two ends, and whether the model was carried across it."""

    start: tuple[float, float]
    end: tuple[float, float]
    bridged: bool


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class CurveFit:
    """One curve fitted.

    Parameters
    ----------
    rising : bool
        True where the value rises with the current (let-through).
    pieces : tuple of Piece
        In the order of u; two that meet do so at a kink.
    kinks : tuple of Kink
    gaps : tuple of FitGap
    parts : tuple of Part
        The tabulated form, one for each stretch without a gap.
    smoothing : tuple of float
        Penalty chosen for each piece; infinite for lines, 0 for points kept.
    edf : float
        Effective number of parameters of all pieces.
    residual_rms : float
        Of the points along the normal, in decades, strays left out.
    noise_scale : float
        Scatter found, as a multiple of the scatter stated.
    correlation : float
        Variance inflation of an average by correlated neighbours: 1 for independent points.
    strays : tuple of int
        Indices of the points the model does not follow.
    budget : UncertaintyBudget
    moved : float
        Decades along the normal by which keeping the order of two edges moved the tabulated form; 0 for not at all.
    forms : tuple of PublishedForm
        Published forms that stretches follow as well as the model does, at most one a stretch, in the order of u.
    """

    rising: bool
    pieces: tuple[Piece, ...]
    kinks: tuple[Kink, ...]
    gaps: tuple[FitGap, ...]
    parts: tuple[Part, ...]
    smoothing: tuple[float, ...]
    edf: float
    residual_rms: float
    noise_scale: float
    correlation: float
    strays: tuple[int, ...]
    budget: UncertaintyBudget
    moved: float = 0.0
    forms: tuple[PublishedForm, ...] = ()

    @property
    def numbers(self) -> int:
        """How many numbers describe the curve; two for each kink."""
        return sum(piece.numbers for piece in self.pieces) + 2 * len(self.kinks)

    @property
    def exact(self) -> bool:
        """Whether the points were kept as they are."""
        return bool(np.any([piece.form == "points" for piece in self.pieces]))
