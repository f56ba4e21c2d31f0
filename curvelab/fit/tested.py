"""Stretches of a fitted curve made ready for hypotheses: few points, with what the curve's own model misses them by."""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.fit.noise import Noise
from curvelab.fit.register import Target
from curvelab.fit.rotate import ROOT_2
from curvelab.fit.segments import Segments
from curvelab.fit.strand import Strand
from curvelab.fit.stretch import Stretch
from curvelab.records.arrays import Floats

DRAWN = 4e-5
"""Decades by which a sheet may draw a form wrongly throughout: 0.016 px at 400 px a decade."""

MOST_GROUPS = 120
"""Groups of neighbouring points that a form is laid on."""

SHARP, SHARPER = 0.05, 4.0
"""Radians by which exact strokes turn at a corner of their own at least, and how much more than at those beside it."""

FEWEST_STROKES = 12
"""Exact strokes that a curved form is laid on at least."""

LONG_STROKE = 0.2
"""Decades along u from which on one exact stroke is a stretch by itself."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Tested:
    """Points of a stretch to test, what its own model misses them by, and how many parameters that has."""

    target: Target
    misfit: float
    parameters: float
    is_straight: bool


def stretches_of(segments: Segments) -> list[Tested]:
    """The stretches of a model to test, in groups of neighbouring points."""
    return [_tested(segments.strand, stretch, segments.noise) for stretch in segments.stretches]


def strokes_of(strand: Strand, corners: NDArray[np.intp]) -> list[Tested]:
    """Exact strokes to test: runs of corners that turn alike, as of a curve, and long strokes."""
    u, v = strand.u[corners], strand.v[corners]
    turn = np.abs(np.diff(np.arctan(np.diff(v) / np.diff(u))))
    around = np.array([np.median(turn[max(k - 3, 0) : k + 4]) for k in range(len(turn))])
    sharp = np.flatnonzero((turn > SHARP) & (turn > SHARPER * around)) + 1
    found = []
    for first, last in pairwise([0, *sharp.tolist(), len(corners) - 1]):
        if last - first >= FEWEST_STROKES:
            found.append(_strokes(strand, corners[first : last + 1], is_straight=False))
            continue
        long = [k for k in range(first, last) if u[k + 1] - u[k] >= LONG_STROKE]
        found.extend(_strokes(strand, corners[k : k + 2], is_straight=True) for k in long)
    return found


def _strokes(strand: Strand, rows: NDArray[np.intp], *, is_straight: bool) -> Tested:
    shared_u, shared_v = _turned(strand.shared[rows])
    sd = np.maximum(strand.sd[rows], DRAWN)
    return Tested(
        target=Target(u=strand.u[rows], v=strand.v[rows], sd=sd, shared_u=shared_u, shared_v=shared_v),
        misfit=0.0,
        parameters=float(len(rows)),
        is_straight=is_straight,
    )


def _tested(strand: Strand, stretch: Stretch, noise: Noise) -> Tested:
    """Groups of neighbours, each as far from the stretch's own model as its points are on average."""
    rows = np.flatnonzero(stretch.followed) + stretch.first
    groups = np.array_split(rows, max(min(MOST_GROUPS, len(rows) // 2), 1))
    u = np.array([strand.u[rows].mean() for rows in groups])
    slope = stretch.slope(strand.u[rows])
    variance = noise.inflation * (noise.scale * strand.sd[rows]) ** 2
    off = (strand.v[rows] - stretch.value(strand.u[rows])) / np.sqrt(1.0 + slope**2)
    starts = np.cumsum([0, *(len(group) for group in groups[:-1])])
    weight = np.add.reduceat(1.0 / variance, starts)
    normal = np.add.reduceat(off / variance, starts) / weight
    lift = np.sqrt(1.0 + stretch.slope(u) ** 2)
    sd = 1.0 / np.sqrt(weight)
    shared_u, shared_v = _turned(np.array([strand.shared[rows].mean(axis=0) for rows in groups]))
    return Tested(
        target=Target(u=u, v=stretch.value(u) + normal * lift, sd=sd, shared_u=shared_u, shared_v=shared_v),
        misfit=float(np.sum((normal / sd) ** 2)),
        parameters=stretch.edf,
        is_straight=stretch.form == "line",
    )


def _turned(shared: Floats) -> tuple[Floats, Floats]:
    """Shifts along u and v of shifts in log10 current and value, shape (n, 2, r)."""
    return (shared[:, 0] - shared[:, 1]) / ROOT_2, (shared[:, 0] + shared[:, 1]) / ROOT_2
