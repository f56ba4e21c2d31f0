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
from curvelab.trace.thinning import RING, Mask, ring_codes

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
    lettering : bool
        Whether it looks like part of a character.
    """

    points: Floats
    progress: Floats
    junctions: tuple[int, int]
    ink: Floats
    width: float
    lettering: bool = False

    @property
    def length(self) -> float:
        """Length along the run in px."""
        if len(self.points) < 2:
            return 1.0
        return float(np.hypot(*np.diff(self.points, axis=0).T).sum())

    @property
    def onward(self) -> bool:
        """Whether a line can pass it: it turns back along no axis."""
        back = np.maximum.accumulate(self.progress, axis=0) - self.progress
        return bool(back.max() <= self.slack)

    @property
    def slack(self) -> float:
        """How far, in px, the middle of its stroke may run back against the axes."""
        return self.width + 2.0


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


def is_bridge(chain: Chain) -> bool:
    """Whether it may be the merged stretch of two crossing lines, which says little of either."""
    return FREE not in chain.junctions and chain.length <= MERGED * max(chain.width, 1.0)


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
    runs, junction_count = _runs(skeleton)
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
        cuts = _turns(progress, width + 2.0)
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
    return Chain(points=points, progress=progress, junctions=junctions, ink=ink, width=width)


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
    places = np.array([chains[number].points[-side] for number, side in tips])
    leaving = frozenset(end for end, (x, y) in zip(tips, places.astype(int).tolist(), strict=True) if not deep[y, x])
    return ChainGraph(
        leaving=leaving,
        chains=tuple(chains),
        ends=tuple(tuple(meeting) for meeting in ends),
        tips=cKDTree(places) if tips else None,
        tip_ends=tuple(tips),
    )


Run = tuple[tuple[NDArray[np.intp], NDArray[np.intp]], tuple[int, int]]


def _runs(skeleton: Mask) -> tuple[list[Run], int]:
    framed = np.pad(skeleton, 1).astype(np.uint8)
    width = framed.shape[1]
    flat = framed.ravel()
    at = np.flatnonzero(flat)
    codes = ring_codes(flat, at, width)
    degree = np.bitwise_count(codes)
    junction_map = np.zeros_like(framed)
    junction_map.ravel()[at[degree >= 3]] = 1
    count, labels = cv2.connectedComponents(junction_map, connectivity=8)
    junction_of = labels.ravel().astype(np.intp) - 1
    steps = [row * width + column for row, column in RING]
    neighbours = {
        int(pixel): [int(pixel) + steps[k] for k in range(8) if code >> k & 1]
        for pixel, code in zip(at.tolist(), codes.tolist(), strict=True)
    }
    junction_pixels = set(at[degree >= 3].tolist())
    runs: list[Run] = []
    seen: set[int] = set()
    starts = at[degree <= 1].tolist()
    starts += [q for p in sorted(junction_pixels) for q in neighbours[p]]
    starts += at[degree == 2].tolist()
    for start in starts:
        if start in seen or start in junction_pixels:
            continue
        run = _follow(start, neighbours, junction_pixels, seen)
        ends = _run_junctions(run, neighbours, junction_pixels, junction_of)
        pixels = np.array(run, dtype=np.intp)
        runs.append(((pixels // width - 1, pixels % width - 1), ends))
    return runs, count - 1


def _follow(start: int, neighbours: dict[int, list[int]], junctions: set[int], seen: set[int]) -> list[int]:
    run = [start]
    seen.add(start)
    while True:
        onward = [q for q in neighbours[run[-1]] if q not in seen and q not in junctions]
        if not onward:
            return run
        run.append(onward[0])
        seen.add(onward[0])


def _run_junctions(
    run: list[int], neighbours: dict[int, list[int]], junctions: set[int], junction_of: NDArray[np.intp]
) -> tuple[int, int]:
    first, last = (
        list(dict.fromkeys(int(junction_of[q]) for q in neighbours[pixel] if q in junctions))
        for pixel in (run[0], run[-1])
    )
    if len(run) == 1:
        last = first[1:]
    return (first[0] if first else FREE), (last[0] if last else FREE)
