"""Way: which chains a line may enter, walked with or against rising current, without turning back."""

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph, slack_of
from curvelab.trace.thinning import Mask
from curvelab.trace.track import End, Track

STUB_BACK = 0.5
"""Share of a stroke's slack by which a chain may run back and still be passed."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Way:
    """Which way lines are walked: with rising current (``sign`` 1) or against it (-1), and how far.

    ``until`` is the progress of the guide place that is walked to; None where the line is walked to its end.
    """

    sign: int
    until: Floats | None = None

    @property
    def guided(self) -> bool:
        """Whether it leads to a guide place."""
        return self.until is not None

    def at_junction(self, graph: ChainGraph, track: Track, ends: Iterable[End]) -> list[End]:
        """Of ends that meet a track's end those a line can go on to."""
        return self._passable(graph, track, np.array(list(ends), dtype=np.intp).reshape(-1, 2), beyond_gap=False)

    def beyond_gap(self, graph: ChainGraph, track: Track, place: Floats, reach: float) -> list[End]:
        """Ends of chains within ``reach`` px of a place that a line can go on to, unseen in between."""
        if graph.tips is None:
            return []
        found = np.array(sorted(graph.tips.query_ball_point(place, reach)), dtype=np.intp)
        return self._passable(graph, track, np.stack([found // 2, found % 2], axis=1), beyond_gap=True)

    def _passable(self, graph: ChainGraph, track: Track, ends: NDArray[np.intp], *, beyond_gap: bool) -> list[End]:
        """Ends that a line enters without turning back along an axis, passing the guide place or its own chains."""
        table, (number, side) = graph.table, ends.T
        last_number, last_side = track.end
        here = self.sign * (table.last if last_side else table.first)[last_number]
        first, last = self.sign * table.first[number], self.sign * table.last[number]
        turned = (side == 1)[:, None]
        first, last = np.where(turned, last, first), np.where(turned, first, last)
        slack = np.maximum(slack_of(table.width[number]), slack_of(track.line.width))[:, None]
        with_the_way = table.onward[number] & (side == (0 if self.sign > 0 else 1))
        # a stub between junctions may run a little against its line
        fits: Mask = with_the_way | np.all(last >= first - STUB_BACK * slack, axis=1)
        fits &= ~np.any(last < here - slack, axis=1)
        if beyond_gap:
            fits &= ~np.any(first < here - slack, axis=1)
        if self.until is not None:
            fits &= np.all(first <= self.sign * self.until + slack, axis=1)
        passed = track.numbers()
        return [(n, s) for n, s in ends[fits].tolist() if n not in passed]
