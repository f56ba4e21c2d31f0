"""The lines of one direction of a plot as places across, told at one place along them."""

from dataclasses import dataclass, replace

import numpy as np

from curvelab.axes.fan import Fan, fanned
from curvelab.axes.plots import Plot
from curvelab.axes.segments import Segments
from curvelab.records.arrays import Floats

HARDLY_ANY = 4
"""Lines or ticks without which an axis has none."""

TICK = 0.05
"""Share of the plot that a tick is long at most."""

LONG = 0.3
"""Share of the plot that a line covers; shorter ones are ticks, curves or parts of boxes."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Seen:
    """Lines told apart across.

    Parameters
    ----------
    at : array, rising
        Places across, at ``middle`` along.
    fan : Fan
        How the lines lean, across by along; its places count from 0 across.
    middle : float
    span : (float, float)
        What the plot covers across.
    sd : float
        How well places are known.
    rises : bool
        Whether values rise with places, as a rule: to the right, but not downwards.
    """

    at: Floats
    fan: Fan
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
        """Slope of the lines in the plot's middle."""
        return self.slope_at(0.5 * sum(self.span))

    def slope_at(self, place: float) -> float:
        """Slope of the lines near a place across."""
        return float(self.fan.at(np.array([place]))[0])


def with_ticks(seen: Seen, pieces: Segments, plot: Plot, across: int, near: float) -> Seen:
    """The lines, and the short pieces that stand on a side of the frame, where there are hardly any lines.

    Parameters
    ----------
    seen : Seen
    pieces : Segments
        All pieces of the page of that direction.
    plot : Plot
    across : 0 or 1
    near : float
        How far ends that meet may be apart.
    """
    if len(seen.at) >= HARDLY_ANY:
        return seen
    low, high = plot.span(1 - across)
    short = pieces.length <= TICK * (high - low)
    on_side = np.zeros(len(short), dtype=bool)
    for side in (low, high):
        on_side |= (pieces.first <= side + near) & (pieces.last >= side - near)
    first, last = plot.span(across)
    ticks = pieces.where(short & on_side & (pieces.across >= first - near) & (pieces.across <= last + near))
    at = ticks.across + seen.fan.at(ticks.across) * (seen.middle - 0.5 * (ticks.first + ticks.last))
    both = np.sort(np.concatenate([seen.at, at]))
    kept = both[np.diff(both, prepend=-np.inf) > 3.0 * seen.sd]
    return replace(seen, at=kept) if len(at) >= HARDLY_ANY else seen


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
    off_middle = middle - 0.5 * (segments.first + segments.last)
    at = segments.across + segments.lean * off_middle
    long = segments.length >= LONG * extent
    fan = fanned(at[long], segments.lean[long], segments.length[long], sd)
    # A short piece's own slope is poor: that of the others carries it to the middle. A long one that leans is a curve.
    at = np.where(segments.length < 0.5 * extent, segments.across + fan.at(at) * off_middle, at)
    follows = ~long
    follows[long] = fan.members
    order = np.argsort(at, kind="stable")
    order = order[follows[order]]
    breaks = np.flatnonzero(np.diff(at[order]) > 3.0 * sd) + 1
    groups = np.split(order, breaks) if len(order) else []
    lines = [
        float(np.average(at[group], weights=segments.length[group]))
        for group in groups
        if float(segments.length[group].sum()) >= LONG * extent
    ]
    return Seen(at=np.array(lines), fan=fan, middle=middle, span=plot.span(across), sd=sd, rises=across == 0)
