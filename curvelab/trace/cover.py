"""Which stretches of ink are explained already: they lie along lines that were traced."""

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from curvelab.records.arrays import Floats
from curvelab.records.trace import Trace
from curvelab.trace.polyline import filled_in

ALONG = 0.6
"""Share of a stretch that lies along traced lines, from which it is explained."""


class Cover:
    """Places of traced lines, each with how far from it ink still belongs to the line."""

    def __init__(self, spacing: float, slack: float) -> None:
        self._spacing = spacing
        self._slack = slack
        self._lines: list[tuple[cKDTree, float]] = []

    def add(self, trace: Trace) -> None:
        """A traced line explains the ink along it, the breaks of its dashes as well."""
        self.add_line(trace.places, trace.width)

    def add_line(self, places: Floats, width: float) -> None:
        """The same of a line that was not measured."""
        if len(places) > 1:
            self._lines.append((cKDTree(filled_in(places, self._spacing)), 0.5 * width + self._slack))

    def holds(self, places: Floats) -> bool:
        """Whether most of a stretch is explained."""
        return self.share(places) > ALONG

    def share(self, places: Floats) -> float:
        """Which share of a stretch's places is explained."""
        return float(self.near(places).mean())

    def near(self, places: Floats) -> NDArray[np.bool_]:
        """Which places are explained."""
        near = np.zeros(len(places), dtype=bool)
        for tree, reach in self._lines:
            near |= tree.query(places, distance_upper_bound=reach)[0] <= reach
        return near
