"""From the points of one curve to its model."""

from dataclasses import replace
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.errors import FitError
from curvelab.fit.corners import corner_kinks, kinks_of
from curvelab.fit.exact import corners_of, kept_samples, points_piece
from curvelab.fit.gaps import gap_at, runs_of
from curvelab.fit.hypotheses import forms_of
from curvelab.fit.kinks import kink_candidates
from curvelab.fit.noise import Noise
from curvelab.fit.rotate import unrotated
from curvelab.fit.segments import MOST_NUMBERS, Segments, fit_segments
from curvelab.fit.smooth import design, fit_smooth, uniform_knots
from curvelab.fit.strand import Strand, strand_of
from curvelab.fit.stretch import Stretch
from curvelab.fit.tabulate import budget_of, part_of, sampled
from curvelab.fit.tested import stretches_of, strokes_of
from curvelab.records.arrays import Floats
from curvelab.records.fit import CurveFit, FitGap, Piece
from curvelab.records.points import FitPoints

EXACT_ENOUGH = 1e-5
"""Decades within which a spline must pass every point of exact strokes to stand for them."""

LEAST_NUMBERS = 12
PILOT_INTERVALS = 80
MOST_STRAYS = 0.25
"""Share of the points, and of them in one run half of it, that a model need not follow."""

LARGEST_SCATTER = 3e-3
"""Decades of scatter, or half the stroke, beyond which points are no one line."""


def fit_curve(points: FitPoints, *, rising: bool = False) -> CurveFit:
    """Fit a monotone, piecewise smooth model with explicit kinks.

    Parameters
    ----------
    points : FitPoints
        Ordered along the curve, in log10 coordinates.
    rising : bool
        True for a curve whose value rises with the current (let-through).

    Returns
    -------
    CurveFit
        With the tabulated form in ``parts``: straight lines in log-log between its points leave the model by at most
        2e-5 decade.

    Raises
    ------
    FitError
        Too few points, or no monotone line that the points follow: where.
    """
    strand = strand_of(points, rising=rising)
    if points.correlation_length <= 0.0:
        return _fit_exact(strand)
    return _fit_scattered(strand)


def _fit_exact(strand: Strand) -> CurveFit:
    """Strokes known exactly: few straight lines, else a spline that passes every point, else the points."""
    strand = replace(strand, kept=np.ones(len(strand.u), dtype=bool))
    edges = [0, *strand.gaps, len(strand.u)]
    runs = [strand.cut(first, last) for first, last in pairwise(edges) if last - first > 1]
    corners = [corners_of(run) for run in runs]
    samples = [kept_samples(run, indices) for run, indices in zip(runs, corners, strict=True)]
    if 2 * sum(len(indices) for indices in corners) > MOST_NUMBERS and len(runs) == 1:
        off = EXACT_ENOUGH / 4.0
        smooth = _segments(
            replace(strand, sd=np.maximum(strand.sd, off), edge=np.hypot(strand.edge, off)), MOST_NUMBERS
        )
        if _passes(strand, smooth):
            return _curve_fit(strand, [smooth], ())
    return CurveFit(
        rising=strand.rising,
        pieces=tuple(points_piece(one) for one in samples),
        kinks=tuple(kink for one in samples for kink in corner_kinks(one, strand.rising)),
        gaps=tuple(gap_at(strand, k, bridged=False) for k in strand.gaps),
        parts=tuple(part_of(one, rising=strand.rising) for one in samples),
        smoothing=(0.0,) * len(samples),
        edf=float(sum(len(indices) for indices in corners)),
        residual_rms=0.0,
        noise_scale=1.0,
        correlation=1.0,
        strays=(),
        budget=budget_of(samples, 1.0),
        forms=()
        if strand.rising
        else forms_of([each for run, indices in zip(runs, corners, strict=True) for each in strokes_of(run, indices)]),
    )


def _passes(strand: Strand, segments: Segments) -> bool:
    """Whether the model passes every point: strokes have no strays, and a model that leaves some out ends too early."""
    return not _strays([segments]) and all(
        np.abs(stretch.value(strand.u[inside]) - strand.v[inside]).max(initial=0.0) <= EXACT_ENOUGH
        for stretch, start, end in segments.bounds
        for inside in [(strand.u >= start) & (strand.u <= end)]
    )


def _fit_scattered(strand: Strand) -> CurveFit:
    """Scattered points: one model, cut at the gaps it cannot cross."""
    whole = _segments(strand, MOST_NUMBERS)
    runs, gaps = runs_of(strand, whole)
    if len(runs) == 1:
        return _curve_fit(strand, [whole], tuple(gaps))
    cuts = [strand.cut(run.first, run.last) for run in runs]
    reach = sum(cut.u[-1] - cut.u[0] for cut in cuts)
    segments = [_segments(cut, max(int(MOST_NUMBERS * (cut.u[-1] - cut.u[0]) / reach), LEAST_NUMBERS)) for cut in cuts]
    return _curve_fit(strand, segments, tuple(gaps))


def _segments(strand: Strand, numbers: int) -> Segments:
    noise = _pilot(strand)
    return fit_segments(strand, noise, kink_candidates(strand, noise), numbers)


def _pilot(strand: Strand) -> Noise:
    """The scatter about a spline that knows no kinks; they spoil it only near them, which the median ignores."""
    kept = strand.kept
    intervals = min(PILOT_INTERVALS, int(np.count_nonzero(kept)) // 10)
    if intervals < 3:
        return strand.stated
    knots = uniform_knots(strand.u[0], strand.u[-1], intervals)
    weight = 1.0 / (2.0 * strand.sd[kept] ** 2)
    basis = design(strand.u[kept], knots)
    smooth = fit_smooth(basis, strand.v[kept], weight)
    residual = (strand.v[kept] - basis @ smooth.coefficients) * np.sqrt(weight)
    free = 1.0 - min(intervals / len(residual), 0.5)
    scale = 1.4826 * float(np.median(np.abs(residual))) / np.sqrt(free)
    return replace(strand.stated, scale=max(scale, 1e-6))


def _curve_fit(strand: Strand, segments: list[Segments], gaps: tuple[FitGap, ...]) -> CurveFit:
    stretches = [stretch for one in segments for stretch in one.stretches]
    samples = [sampled(one) for one in segments]
    noise = max((one.noise for one in segments), key=lambda one: one.inflation)
    residuals = _checked(strand, segments)
    return CurveFit(
        rising=strand.rising,
        pieces=tuple(_piece(*bound) for one in segments for bound in one.bounds),
        kinks=tuple(kink for one in segments for kink in kinks_of(one, strand.rising)),
        gaps=gaps,
        parts=tuple(part_of(one, rising=strand.rising) for one in samples),
        smoothing=tuple(stretch.penalty for stretch in stretches),
        edf=sum(stretch.edf for stretch in stretches),
        residual_rms=float(np.sqrt(np.mean(residuals**2))),
        noise_scale=noise.scale,
        correlation=noise.inflation,
        strays=_strays(segments),
        budget=budget_of(samples, noise.inflation),
        forms=() if strand.rising else forms_of([each for one in segments for each in stretches_of(one)]),
    )


def _piece(stretch: Stretch, start: float, end: float) -> Piece:
    return Piece(
        form=stretch.form,
        start=start,
        end=end,
        degree=stretch.degree,
        knots=stretch.knots,
        coefficients=stretch.coefficients,
        covariance=0.5 * (stretch.covariance + stretch.covariance.T),
    )


def _strays(segments: list[Segments]) -> tuple[int, ...]:
    """Indices, in what was given, of points the model does not follow."""
    found: set[int] = set()
    for one in segments:
        found.update(map(int, one.strand.order[~one.strand.kept]))
        for stretch in one.stretches:
            found.update(map(int, one.strand.order[stretch.first : stretch.last][~stretch.followed]))
    return tuple(sorted(found))


def _checked(strand: Strand, segments: list[Segments]) -> Floats:
    """Residuals along the normal in decades of the points followed.

    Raises
    ------
    FitError
        The points are not one monotone line.
    """
    residuals, strays, longest, where = [], 0, 0, 0
    for one in segments:
        for stretch in one.stretches:
            residuals.append((stretch.residual * one.strand.sd[stretch.first : stretch.last])[stretch.followed])
            strays += int(np.count_nonzero(~stretch.followed))
            length, middle = _longest_run(~stretch.followed)
            if length > longest:
                longest, where = length, int(one.strand.order[stretch.first + middle])
    followed = np.concatenate(residuals)
    limit = max(LARGEST_SCATTER, 0.5 * strand.blur, 3.0 * float(np.median(strand.sd)))
    count = len(strand.u)
    if strays > MOST_STRAYS * count or longest > 0.5 * MOST_STRAYS * count:
        place = int(np.flatnonzero(strand.order == where)[0])
        raise _not_monotone(strand, place, f"{strays} of {count} points lie off any monotone curve")
    if followed.size and np.sqrt(np.mean(followed**2)) > limit:
        place = int(np.argmax(np.abs(np.gradient(strand.v))))
        raise _not_monotone(strand, place, f"The points scatter by {np.sqrt(np.mean(followed**2)):.2g} decade")
    return followed


def _longest_run(flags: NDArray[np.bool_]) -> tuple[int, int]:
    """Length and middle of the longest run of True."""
    edges = np.flatnonzero(np.diff(np.concatenate([[False], flags, [False]]).astype(int)))
    if edges.size == 0:
        return 0, 0
    lengths = edges[1::2] - edges[::2]
    k = int(np.argmax(lengths))
    return int(lengths[k]), int(edges[2 * k] + lengths[k] // 2)


def _not_monotone(strand: Strand, place: int, problem: str) -> FitError:
    log_current, log_value = unrotated(strand.u[place : place + 1], strand.v[place : place + 1], strand.rising)
    return FitError(
        f"{problem}, most of all near {10 ** log_current[0]:.4g}, {10 ** log_value[0]:.4g}",
        f"One line whose value never {'falls' if strand.rising else 'rises'} with the current",
        "Guide the curve through another place, or avoid what does not belong to it",
    )
