"""Chains: the thinned ink as a graph of pixel runs between junctions and free ends."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from itertools import pairwise

import cv2
import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from curvelab.records.arrays import Floats
from curvelab.trace.characters import FREE, lettering
from curvelab.trace.runs import runs_of
from curvelab.trace.thinning import Mask

MERGED = 20.0
"""Stroke widths over which two lines that cross at 10 degrees print as one."""
AT_FRAME = 13
"""px: an end within half of this of the frame leaves the plot."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Chain:
    """One run of thinned pixels, in the order a line passes them with rising current.

    Parameters
    ----------
    points : array, shape (n, 2)
        Column and row of each pixel, in order.
    progress : array, shape (n, 2)
        How far each pixel lies along the axes, see ``Sense``.
    junctions : tuple of int
        Junction at the first and at the last point; ``FREE`` for none.
    ink : array, shape (channels,)
        Median ink along the run.
    width : float
        Median width of the stroke in px.
    length : float
        Length along the run in px.
    onward : bool
        Whether a line can pass it: it turns back along no axis.
    lettering : bool
        Whether it looks like part of a character.
    merged : bool
        Whether two lines arrive at its first junction and two leave its last: it may be both.
    """

    points: Floats
    progress: Floats
    junctions: tuple[int, int]
    ink: Floats
    width: float
    length: float
    onward: bool
    lettering: bool = False
    merged: bool = False

    @property
    def slack(self) -> float:
        """How far, in px, the middle of its stroke may run back against the axes."""
        return slack_of(self.width)


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ChainTable:
    """What a choice among all n chains looks at first, in arrays.

    ``low`` and ``high`` are the corners of the box round each chain, (n, 2); ``first`` and ``last`` the progress of its
    ends, (n, 2); ``length``, ``width`` and ``onward`` those of the chains, (n,).
    """

    low: Floats
    high: Floats
    first: Floats
    last: Floats
    length: Floats
    width: Floats
    onward: Mask


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ChainGraph:
    """All chains of a plot.

    ``ends[j]`` lists, for junction j, the pairs (chain, side) that meet there, side 0 for a chain's first point and 1
    for its last. ``tips`` finds ends near a place; its points belong to ``tip_ends`` in order.
    ``leaving`` are the ends at the plot's frame: nothing goes on from there.
    """

    chains: tuple[Chain, ...]
    ends: tuple[tuple[tuple[int, int], ...], ...]
    tips: cKDTree | None
    tip_ends: tuple[tuple[int, int], ...]
    leaving: frozenset[tuple[int, int]]
    table: ChainTable


def slack_of(width: float) -> float:
    """How far, in px, the middle of a stroke of that width may run back against the axes."""
    return width + 2.0


def build_graph(
    skeleton: Mask,
    density: NDArray[np.float32],
    widths: NDArray[np.float32],
    inside: Mask,
    progress_of: Callable[[Floats], Floats],
) -> ChainGraph:
    """Chains of a thinned mask, short spurs left out, cut where a line would turn back.

    Parameters
    ----------
    skeleton : array, shape (height, width), bool
    density : array, shape (height, width, channels)
        Ink of the curves alone.
    widths : array, shape (height, width)
        Local width of the strokes in px.
    inside : array, shape (height, width), bool
        Pixels inside the plot's frame.
    progress_of : callable
        Progress of places along a line, see ``Sense``.
    """
    runs, junction_count = runs_of(skeleton)
    kept: list[Chain] = []
    for pixels, junctions in runs:
        rows, columns = pixels
        width = float(np.median(widths[rows, columns]))
        spur = len(rows) <= max(3.0, 0.9 * width) and (junctions[0] == FREE) != (junctions[1] == FREE)
        speck = junctions == (FREE, FREE) and len(rows) < 2 and width < 2.0
        if spur or speck:
            continue
        points = np.stack([columns, rows], axis=1).astype(np.float64)
        progress = progress_of(points)
        cuts = _turns(progress, slack_of(width))
        meets = [junctions[0], *range(junction_count, junction_count + len(cuts)), junctions[1]]
        junction_count += len(cuts)
        for k, (low, high) in enumerate(pairwise([0, *cuts, len(points)])):
            ink = np.median(density[rows[low:high], columns[low:high]], axis=0).astype(np.float64)
            kept.append(_chain(points[low:high], progress[low:high], (meets[k], meets[k + 1]), ink, width))
    characters = lettering([(chain.points, chain.junctions) for chain in kept], junction_count)
    kept = [replace(chain, lettering=found) for chain, found in zip(kept, characters, strict=True)]
    return _graph(kept, junction_count, inside)


def _chain(points: Floats, progress: Floats, junctions: tuple[int, int], ink: Floats, width: float) -> Chain:
    if progress[-1].sum() < progress[0].sum():
        points, progress, junctions = points[::-1], progress[::-1], junctions[::-1]
    back = np.maximum.accumulate(progress, axis=0) - progress
    return Chain(
        points=points,
        progress=progress,
        junctions=junctions,
        ink=ink,
        width=width,
        length=float(np.hypot(*np.diff(points, axis=0).T).sum()) if len(points) > 1 else 1.0,
        onward=bool(back.max() <= slack_of(width)),
    )


def _turns(progress: Floats, slack: float) -> list[int]:
    """Places where a run turns back along an axis by more than the slack."""
    cuts = []
    for values in progress.T:
        start = 0
        while start < len(values):
            part = values[start:]
            fallen = np.maximum.accumulate(part) - part > slack
            risen = part - np.minimum.accumulate(part) > slack
            if not (fallen.any() and risen.any()):
                break
            first_fall, first_rise = int(fallen.argmax()), int(risen.argmax())
            # the extreme before the later of the two begins the part that runs the other way
            late = max(first_fall, first_rise)
            extreme = part[: late + 1].argmax() if first_fall > first_rise else part[: late + 1].argmin()
            start += max(int(extreme), 1)
            cuts.append(start)
    return sorted(set(cuts))


def _graph(chains: list[Chain], junction_count: int, inside: Mask) -> ChainGraph:
    deep = cv2.erode(np.pad(inside, 1).astype(np.uint8), np.ones((AT_FRAME, AT_FRAME), dtype=np.uint8))[1:-1, 1:-1]
    ends: list[list[tuple[int, int]]] = [[] for _ in range(junction_count)]
    tips = [(number, side) for number in range(len(chains)) for side in (0, 1)]
    for number, side in tips:
        if chains[number].junctions[side] != FREE:
            ends[chains[number].junctions[side]].append((number, side))
    chains = [replace(chain, merged=_is_merged(number, chain, ends)) for number, chain in enumerate(chains)]
    places = np.array([chains[number].points[-side] for number, side in tips])
    leaving = frozenset(end for end, (x, y) in zip(tips, places.astype(int).tolist(), strict=True) if not deep[y, x])
    return ChainGraph(
        leaving=leaving,
        table=_table(chains),
        chains=tuple(chains),
        ends=tuple(tuple(meeting) for meeting in ends),
        tips=cKDTree(places) if tips else None,
        tip_ends=tuple(tips),
    )


def _is_merged(number: int, chain: Chain, ends: list[list[tuple[int, int]]]) -> bool:
    """Whether it may be the merged stretch of two crossing lines."""
    if FREE in chain.junctions or chain.length > MERGED * max(chain.width, 1.0):
        return False
    first, last = (ends[junction] for junction in chain.junctions)
    arriving = sum(side == 1 for other, side in first if other != number)
    leaving = sum(side == 0 for other, side in last if other != number)
    return arriving > 1 and leaving > 1


def _table(chains: list[Chain]) -> ChainTable:
    def column(values: list[Floats]) -> Floats:
        return np.array(values, dtype=np.float64).reshape(-1, 2)

    return ChainTable(
        low=column([chain.points.min(axis=0) for chain in chains]),
        high=column([chain.points.max(axis=0) for chain in chains]),
        first=column([chain.progress[0] for chain in chains]),
        last=column([chain.progress[-1] for chain in chains]),
        length=np.array([chain.length for chain in chains]),
        width=np.array([chain.width for chain in chains]),
        onward=np.array([chain.onward for chain in chains], dtype=bool),
    )
