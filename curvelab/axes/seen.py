"""The lines of one direction of a plot as places across, told at one place along them."""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.plots import Plot
from curvelab.records.arrays import Floats

LONG = 0.3
"""Share of the plot that a line covers; shorter ones are ticks, curves or parts of boxes."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Seen:
    """Lines told apart across.

    Parameters
    ----------
    at : array, rising
        Places across, at ``middle`` along.
    lean : array
        Slope of each line, across by along.
    middle : float
    span : (float, float)
        What the plot covers across.
    sd : float
        How well places are known.
    rises : bool
        Whether values rise with places, as a rule: to the right, but not downwards.
    """

    at: Floats
    lean: Floats
    middle: float
    span: tuple[float, float]
    sd: float
    rises: bool

    @property
    def length(self) -> float:
        """What the plot covers across."""
        return self.span[1] - self.span[0]

    @property
    def slope(self) -> float:
        """Median slope."""
        return float(np.median(self.lean)) if len(self.lean) else 0.0


def seen_lines(plot: Plot, across: int, sd: float) -> Seen:
    """Pieces joined to lines.

    Parameters
    ----------
    plot : Plot
    across : 0 or 1
        Lines told apart by x or by y.
    sd : float
        How well a place across is known, in the unit of places.
    """
    segments = plot.upright if across == 0 else plot.level
    along = plot.span(1 - across)
    middle, extent = 0.5 * (along[0] + along[1]), along[1] - along[0]
    at = segments.across + segments.lean * (middle - 0.5 * (segments.first + segments.last))
    # A short piece's own slope is poor: the usual one carries it to the middle.
    usual = float(np.median(segments.lean[segments.length >= 0.5 * extent])) if len(at) else 0.0
    short = segments.length < 0.5 * extent
    at = np.where(short, segments.across + usual * (middle - 0.5 * (segments.first + segments.last)), at)
    order = np.argsort(at, kind="stable")
    breaks = np.flatnonzero(np.diff(at[order]) > 3.0 * sd) + 1
    groups = np.split(order, breaks) if len(order) else []
    lines = [
        (float(np.average(at[group], weights=segments.length[group])), float(np.median(segments.lean[group])))
        for group in groups
        if float(segments.length[group].sum()) >= LONG * extent
    ]
    places = np.array(lines).reshape(-1, 2)
    return Seen(at=places[:, 0], lean=places[:, 1], middle=middle, span=plot.span(across), sd=sd, rises=across == 0)
