"""Exact strokes: their own points, joined by straight lines, are the curve; nothing is there to be averaged."""

from typing import NoReturn

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import isotonic_regression

from curvelab.errors import FitError
from curvelab.fit.rotate import rotated, unrotated
from curvelab.fit.strand import Strand
from curvelab.fit.tabulate import Samples, calibration_at, polyline
from curvelab.records.arrays import Floats
from curvelab.records.fit import Piece

THINNED = 1e-9
"""Decades by which a point may leave the line between its neighbours and be left out."""

ROUNDING = 6.0
"""Standard deviations by which points may run backwards before the curve counts as not monotone."""


def corners_of(strand: Strand) -> NDArray[np.intp]:
    """Indices of the points between which the strokes are straight within their sd (Ramer, Douglas and Peucker)."""
    tolerance = max(THINNED, 2.0 * float(np.median(strand.sd)))
    keep = np.zeros(len(strand.u), dtype=bool)
    keep[[0, -1]] = True
    open_ranges = [(0, len(strand.u) - 1)]
    while open_ranges:
        first, last = open_ranges.pop()
        if last - first < 2:
            continue
        off = _distance(strand, first, last)
        worst = int(np.argmax(off))
        if off[worst] > tolerance:
            middle = first + 1 + worst
            keep[middle] = True
            open_ranges += [(first, middle), (middle, last)]
    return np.flatnonzero(keep)


def _distance(strand: Strand, first: int, last: int) -> Floats:
    du, dv = strand.u[last] - strand.u[first], strand.v[last] - strand.v[first]
    inner = slice(first + 1, last)
    length = np.hypot(du, dv)
    if length == 0.0:
        away: Floats = np.hypot(strand.u[inner] - strand.u[first], strand.v[inner] - strand.v[first])
        return away
    across: Floats = np.abs((strand.u[inner] - strand.u[first]) * dv - (strand.v[inner] - strand.v[first]) * du)
    relative: Floats = across / length
    return relative


def kept_samples(strand: Strand, corners: NDArray[np.intp]) -> Samples:
    """The corners, each sampled from both sides, made monotone within their rounding.

    Raises
    ------
    FitError
        The strokes run backwards by more than their rounding.
    """
    _check_forward(strand)
    u, v = _monotone(strand, corners)
    own = np.interp(u, strand.u, np.hypot(strand.sd, strand.edge)) ** 2
    return polyline(u, v, own, calibration_at(u, np.gradient(v, u), strand))


def _check_forward(strand: Strand) -> None:
    """Refuse strokes that turn back on themselves, which their order along u would hide."""
    forward = strand.u[np.argsort(strand.order)]
    if forward[0] > forward[-1]:
        forward = forward[::-1]
    back = np.maximum.accumulate(forward) - forward
    k = int(np.argmax(back))
    if back[k] > max(ROUNDING * float(np.median(strand.sd)), THINNED):
        place = int(np.searchsorted(strand.u, forward[k]))
        _refuse(strand, strand.u[place], strand.v[place], float(back[k]))


def _refuse(strand: Strand, u: float, v: float, by: float) -> NoReturn:
    log_current, log_value = unrotated(np.array([u]), np.array([v]), strand.rising)
    raise FitError(
        f"The strokes at {10 ** log_current[0]:.6g}, {10 ** log_value[0]:.6g} run backwards by {by:.2g} decade",
        f"A curve that never {'falls' if strand.rising else 'rises'}",
        "Guide the curve there, or avoid what does not belong to it",
    )


def _monotone(strand: Strand, corners: NDArray[np.intp]) -> tuple[Floats, Floats]:
    log_current, log_value = unrotated(strand.u[corners], strand.v[corners], strand.rising)
    straight_current = isotonic_regression(log_current).x
    straight_value = isotonic_regression(log_value, increasing=strand.rising).x
    off = np.hypot(straight_current - log_current, straight_value - log_value)
    limit = np.maximum(ROUNDING * strand.sd[corners], THINNED)
    if np.any(off > limit):
        k = int(np.argmax(off - limit))
        _refuse(strand, strand.u[corners[k]], strand.v[corners[k]], float(off[k]))
    u, v = rotated(straight_current, straight_value, strand.rising)
    apart = np.diff(u, prepend=-np.inf) > 0.0
    return u[apart], v[apart]


def points_piece(samples: Samples) -> Piece:
    """The strokes as a piece of degree 1."""
    first = samples.places
    u = samples.u[first]
    return Piece(
        form="points",
        start=float(u[0]),
        end=float(u[-1]),
        degree=1,
        knots=np.concatenate([u[:1], u, u[-1:]]),
        coefficients=samples.v[first],
        covariance=(samples.scatter * (1.0 + samples.slope**2))[first],
    )
