"""Stretches without points: crossed by the model only where the points on both sides say how."""

import math
from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from curvelab.fit.rotate import unrotated
from curvelab.fit.segments import Segments
from curvelab.fit.strand import Strand
from curvelab.records.fit import FitGap

SHORT_BLURS = 4.0
SHORT_STEPS = 8.0
"""Stroke widths, or steps between points, up to which a stretch without points is no gap."""

BRIDGE_SD = 5e-4
"""Decades of standard deviation, of a curve anywhere between chord and end tangents, up to which a gap is crossed."""

SUPPORT = 0.3
"""Share of the points that a stretch of twice the gap's length must have on either side."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Run:
    """Points first to last - 1, which one model follows."""

    first: int
    last: int


def gaps_of(strand: Strand) -> list[int]:
    """Each k such that a gap lies between points k - 1 and k: those stated, and every hole too wide for a corner."""
    short = max(SHORT_BLURS * strand.blur, SHORT_STEPS * strand.spacing)
    places = np.flatnonzero(strand.kept)
    wide = places[1:][np.diff(strand.u[places]) > short]
    stated = [k for k in strand.gaps if strand.u[k] - strand.u[k - 1] > short]
    return sorted({int(k) for k in wide} | set(stated))


def runs_of(strand: Strand, segments: Segments) -> tuple[list[Run], list[FitGap]]:
    """Where the model must be cut, and every gap with whether it was crossed."""
    cuts, gaps = [0], []
    for k in gaps_of(strand):
        bridged = _bridged(strand, segments, k)
        if not bridged:
            cuts.append(k)
        gaps.append(gap_at(strand, k, bridged=bridged))
    edges = [*cuts, len(strand.u)]
    runs = [Run(first=a, last=b) for a, b in pairwise(edges)]
    return [run for run in runs if np.count_nonzero(strand.kept[run.first : run.last]) >= 2], gaps


def gap_at(strand: Strand, k: int, *, bridged: bool) -> FitGap:
    """The gap between points k - 1 and k."""
    log_current, log_value = unrotated(strand.u[k - 1 : k + 1], strand.v[k - 1 : k + 1], strand.rising)
    start, end = zip(log_current.tolist(), log_value.tolist(), strict=True)
    return FitGap(start=start, end=end, bridged=bridged)


def _bridged(strand: Strand, segments: Segments, k: int) -> bool:
    start, end = strand.u[k - 1], strand.u[k]
    if any(start <= vertex <= end for vertex in segments.vertices):
        return False
    width = end - start
    enough = SUPPORT * 2.0 * width / strand.spacing
    before = np.count_nonzero(strand.kept[:k] & (strand.u[:k] >= start - 2.0 * width))
    after = np.count_nonzero(strand.kept[k:] & (strand.u[k:] <= end + 2.0 * width))
    if min(before, after) < enough:
        return False
    stretch = next(one for one, low, high in segments.bounds if low <= start <= high)
    turn = abs(np.diff(stretch.slope(np.array([start, end])))[0])
    # Chord and tangents enclose a triangle width x turn / 4 high, and a monotone bend lies anywhere in it.
    return bool(width * turn / 4.0 / math.sqrt(12.0) <= BRIDGE_SD)
