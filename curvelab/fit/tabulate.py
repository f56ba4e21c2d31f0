"""The model as points joined by straight lines in log-log, each with what is known of its uncertainty."""

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.errors import FitError
from curvelab.fit.rotate import log_slope, normal_variance, unrotated
from curvelab.fit.segments import Segments
from curvelab.fit.strand import Strand
from curvelab.fit.stretch import Stretch
from curvelab.records.arrays import Floats
from curvelab.records.budget import UncertaintyBudget
from curvelab.records.curve import Part

CHORD = 2e-5
"""Decades by which a chord may leave the model, along the normal: 0.008 px at 400 px a decade."""

LONGEST_CHORD = 0.15
"""Decades between points at most, so that uncertainties, too, are followed."""

STEEP = 100.0
"""Slope in log-log beyond which a curve counts as vertical, and its inverse as horizontal."""

UPRIGHT = 1e-6
"""Difference of a stroke's dv/du from -1 or 1 below which it is meant to be vertical or horizontal."""

LN10 = math.log(10.0)
HALVINGS = 14


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Samples:
    """Places along a run: u, v, dv/du, and variances along the normal in decades^2, each of one cause.

    A corner is sampled twice, once for each side, at the same u.
    """

    u: Floats
    v: Floats
    slope: Floats
    scatter: Floats
    smoothing: Floats
    chord: Floats
    edge: Floats
    warp: Floats
    calibration: Floats

    @property
    def total(self) -> Floats:
        """Variance along the normal of all causes."""
        return self.scatter + self.smoothing + self.chord + self.edge + self.warp + self.calibration

    @property
    def places(self) -> NDArray[np.intp]:
        """Index of the first sample at every place."""
        return np.flatnonzero(np.diff(self.u, prepend=-np.inf) > 0.0)


def sampled(segments: Segments) -> Samples:
    """Sample every stretch so that chords stay within ``CHORD`` of it."""
    pieces = [_sampled(stretch, start, end, segments.strand) for stretch, start, end in segments.bounds]
    columns = {name: np.concatenate([getattr(piece, name) for piece in pieces]) for name in Samples.__slots__}
    return Samples(**columns)


def _sampled(stretch: Stretch, start: float, end: float, strand: Strand) -> Samples:
    u = np.linspace(start, end, max(math.ceil((end - start) / LONGEST_CHORD), 1) + 1)
    for _ in range(HALVINGS):
        middle = 0.5 * (u[1:] + u[:-1])
        v = stretch.value(u)
        bend = np.abs(stretch.value(middle) - 0.5 * (v[1:] + v[:-1])) / np.sqrt(1.0 + stretch.slope(middle) ** 2)
        coarse = bend > CHORD
        if not coarse.any():
            break
        u = np.sort(np.concatenate([u, middle[coarse]]))
    slope = stretch.slope(u)
    across = 1.0 + slope**2
    scatter = stretch.scatter_variance(u) / across
    return Samples(
        u=u,
        v=stretch.value(u),
        slope=slope,
        scatter=scatter,
        smoothing=np.maximum(stretch.variance(u) / across - scatter, 0.0),
        chord=np.full_like(u, 0.0 if stretch.form == "line" else CHORD**2 / 12.0),
        edge=np.interp(u, strand.u, strand.edge) ** 2,
        warp=warp_at(slope, strand),
        calibration=calibration_at(u, slope, strand),
    )


def calibration_at(u: Floats, slope: Floats, strand: Strand) -> Floats:
    """Variance along the normal that the calibration puts on places of the strand."""
    entries = [np.interp(u, strand.u, strand.common[:, i, j]) for i in (0, 1) for j in (0, 1)]
    return normal_variance(np.stack(entries, axis=1).reshape(-1, 2, 2), slope, strand.rising)


def warp_at(slope: Floats, strand: Strand) -> Floats:
    """Variance along the normal of what the calibration cannot follow."""
    spread = np.broadcast_to(np.diag(np.square(strand.warp)), (len(slope), 2, 2))
    return normal_variance(spread, slope, strand.rising)


def polyline(u: Floats, v: Floats, own: Floats, calibration: Floats) -> Samples:
    """Straight lines between places, each end sampled; ``own`` and ``calibration`` are variances along the normal."""
    sides = np.repeat(np.arange(len(u)), 2)[1:-1]
    slope = np.clip(np.diff(v) / np.diff(u), -1.0, 1.0)
    slope = np.where(1.0 - np.abs(slope) < UPRIGHT, np.sign(slope), slope)
    none = np.zeros(len(sides))
    return Samples(
        u=u[sides],
        v=v[sides],
        slope=np.repeat(slope, 2),
        scatter=own[sides],
        smoothing=none,
        chord=none,
        edge=none,
        warp=none,
        calibration=calibration[sides],
    )


def part_of(samples: Samples, *, rising: bool) -> Part:
    """The part through the samples of one run.

    Raises
    ------
    FitError
        Fewer than two distinct points are left.
    """
    log_current, log_value = unrotated(samples.u, samples.v, rising)
    along_current, along_value = log_slope(samples.slope)
    sd = LN10 * np.sqrt(samples.total)
    starts = samples.places
    upright, flat = samples.slope == -1.0, samples.slope == 1.0
    _settle(log_current, upright, starts)
    _settle(log_value, flat, starts)
    current = np.maximum.accumulate(10.0 ** log_current[starts])
    value = 10.0 ** log_value[starts]
    value = np.maximum.accumulate(value) if rising else np.minimum.accumulate(value)
    distinct = np.ones(len(current), dtype=bool)
    distinct[1:] = (np.diff(current) != 0.0) | (np.diff(value) != 0.0)
    if np.count_nonzero(distinct) < 2:
        raise FitError(f"The curve at {current[0]:.6g} has no length", "", "Trace more of the line there")
    return Part(
        current=current[distinct],
        value=value[distinct],
        sd_current=np.fmax.reduceat(_known(sd, along_value), starts)[distinct],
        sd_value=np.fmax.reduceat(_known(sd, along_current), starts)[distinct],
        sd_common=LN10 * np.sqrt(np.maximum.reduceat(samples.calibration, starts))[distinct],
    )


def _known(sd: Floats, along: Floats) -> Floats:
    """Relative sd along one coordinate at a fixed other; NaN where the line runs along that coordinate.

    ``along`` is the tangent's component on the coordinate that is held.
    """
    least = 1.0 / math.hypot(1.0, STEEP)
    return np.where(along >= least, sd / np.maximum(along, least), np.nan)


def _settle(level: Floats, straight: NDArray[np.bool_], starts: NDArray[np.intp]) -> None:
    """Give vertical (horizontal) stretches one single current (value), corners included, in place."""
    run = 0
    for k in map(int, np.flatnonzero(straight)):
        if k == 0 or not straight[k - 1]:
            run = k
        level[k] = level[run]
    after_corner = np.setdiff1d(np.flatnonzero(straight), starts, assume_unique=True)
    level[after_corner - 1] = level[after_corner]


def budget_of(samples: list[Samples], inflation: float) -> UncertaintyBudget:
    """What contributes to the uncertainty along the normal, over the length of all runs."""
    length = np.concatenate([np.gradient(one.u) * np.sqrt(1.0 + one.slope**2) for one in samples])

    def relative(cause: str, factor: float = 1.0) -> float:
        variance = np.concatenate([getattr(one, cause) for one in samples])
        return float(LN10 * math.sqrt(factor * np.average(variance, weights=length)))

    return UncertaintyBudget(
        calibration=relative("calibration"),
        warp=relative("warp"),
        snapping=0.0,
        trace=relative("scatter", 1.0 / inflation),
        correlation=relative("scatter", 1.0 - 1.0 / inflation),
        smoothing=relative("smoothing"),
        edge=relative("edge"),
        tabulation=relative("chord"),
    )
