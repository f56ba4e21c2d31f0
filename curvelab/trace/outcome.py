"""From measured centres to a trace: what is seen is kept, what is not becomes a gap."""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from curvelab.records.arrays import Floats
from curvelab.records.trace import Gap
from curvelab.trace.centre import Centres
from curvelab.trace.course import recentred

LEAST_AMPLITUDE = 0.5
"""A node with less ink than half the line's does not show the line."""
WORST_SD = 0.8
"""px: a centre less sure than this is no place of the line."""
SHORTEST_GAP = 8.0
"""px without a place that count as a gap, where kinks and crossings are not the reason."""
SHORTEST_PIECE = 15.0
"""px of line between gaps, where no stroke was walked over."""
ON_STROKE = 2.5
"""px from a walked pixel: what lies further off was bridged."""
DASH_COUNT = 4
LONGEST_LAG = 40


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Measured:
    """Places kept, in the image's pixels."""

    places: Floats
    sd: Floats
    correlation_length: float
    gaps: tuple[tuple[int, int], ...]
    """Pairs of neighbouring indices between which the line is not seen."""


def keep_seen(centres: Centres, inside: NDArray[np.bool_], walked: Floats) -> Measured | None:
    """Places where the line is seen; None where it hardly is.

    Parameters
    ----------
    centres : Centres
    inside : array of bool
        Nodes inside the plot.
    walked : array, shape (n, 2)
        The thinned pixels that were walked over.
    """
    course = centres.course
    strokes = np.asarray(cKDTree(walked).query(course.places(course.across))[0]) < ON_STROKE
    seen = inside & (centres.amplitude > LEAST_AMPLITUDE)
    kept = seen & ~course.near_kink & (centres.sd < WORST_SD)
    kept &= ~_at_free_end(centres, seen, inside)
    if kept.sum() < 3:
        return None
    spread, correlation = _spread(centres, kept)
    unseen = np.cumsum(~seen * np.gradient(course.arc))
    index, gaps = _index_and_gaps(kept, unseen, course.arc)
    scraps = _scraps(index, gaps, course.arc, strokes)
    if scraps.any():
        kept[index[scraps]] = False
        index, gaps = _index_and_gaps(kept, unseen, course.arc)
    if index.size < 3:
        return None
    return Measured(
        places=course.places(centres.across)[index],
        sd=(centres.sd * spread)[index],
        correlation_length=correlation,
        gaps=tuple(gaps),
    )


def _index_and_gaps(
    kept: NDArray[np.bool_], unseen: Floats, arc: Floats
) -> tuple[NDArray[np.intp], list[tuple[int, int]]]:
    """Kept nodes, and pairs of neighbours among them between which the line is not seen."""
    index = np.flatnonzero(kept)
    pairs = pairwise(index.tolist())
    gaps = [(k, k + 1) for k, (a, b) in enumerate(pairs) if unseen[b] - unseen[a] > SHORTEST_GAP]
    return index, _without_dashes(gaps, arc[index])


def _scraps(
    index: NDArray[np.intp], gaps: list[tuple[int, int]], arc: Floats, strokes: NDArray[np.bool_]
) -> NDArray[np.bool_]:
    """Places between gaps, or a gap and an end, on too little ink to be the line: pieces of a label in its way."""
    scraps = np.zeros(index.size, dtype=bool)
    starts = [0, *(b for _, b in gaps)]
    ends = [*(a for a, _ in gaps), index.size - 1]
    for start, end in zip(starts, ends, strict=True) if gaps else ():
        short = arc[index[end]] - arc[index[start]] < SHORTEST_PIECE
        scraps[start : end + 1] = short and not strokes[index[start : end + 1]].any()
    return scraps


def _at_free_end(centres: Centres, seen: NDArray[np.bool_], inside: NDArray[np.bool_]) -> NDArray[np.bool_]:
    """Nodes at an end inside the plot, where the end of the stroke cuts through the profile."""
    arc, index = centres.course.arc, np.flatnonzero(seen)
    cut = np.zeros(len(arc), dtype=bool)
    reach = 0.5 * centres.width
    for end, beyond in ((index[0], index[0] - 1), (index[-1], index[-1] + 1)) if index.size else ():
        if 0 <= beyond < len(arc) and inside[beyond]:
            cut |= np.abs(arc - arc[end]) < reach
    return cut


def _spread(centres: Centres, kept: NDArray[np.bool_]) -> tuple[float, float]:
    """How much larger the scatter about a local line is than stated (at least 1), and how far it is alike, in px."""
    course = centres.course
    smooth = recentred(course, centres.across, np.where(kept, 1.0 / centres.sd**2, 1e-9))
    residual = (centres.across - smooth.across) * course.cosine / centres.sd
    residual = np.where(kept, np.clip(residual, -6.0, 6.0), 0.0)
    variance = float((residual**2).sum() / max(kept.sum(), 1))
    if variance <= 0.0:
        return 1.0, 1.0
    length = 1.0
    for lag in range(1, min(LONGEST_LAG, len(residual) - 1)):
        alike = float((residual[lag:] * residual[:-lag]).sum() / max(kept.sum(), 1)) / variance
        if alike < 0.1:
            break
        length += 2.0 * alike
    # the local line follows about a tenth of white scatter
    return max(1.0, float(np.sqrt(1.1 * variance))), length


def _without_dashes(gaps: list[tuple[int, int]], arc: Floats) -> list[tuple[int, int]]:
    """Breaks of a dashed line repeat: those no longer than twice the common one are print, not gaps."""
    if len(gaps) < DASH_COUNT:
        return gaps
    lengths = np.array([arc[b] - arc[a] for a, b in gaps])
    common = float(np.median(lengths))
    if np.mean(np.abs(lengths - common) < 0.4 * common) < 0.6:
        return gaps
    return [gap for gap, length in zip(gaps, lengths, strict=True) if length > 2.0 * common]


def gap_records(gaps: tuple[tuple[int, int], ...], places: Floats) -> tuple[Gap, ...]:
    """Gaps between places of a trace."""
    return tuple(
        Gap(
            start=(float(places[a, 0]), float(places[a, 1])),
            end=(float(places[b, 0]), float(places[b, 1])),
        )
        for a, b in gaps
    )
