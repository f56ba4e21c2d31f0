"""Plots on a page: lines of both directions that cross or meet make one, whatever stands apart is another."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_matrix
from scipy.sparse.csgraph import connected_components

from curvelab.axes.segments import Segments
from curvelab.records.arrays import Floats

SMALLEST = 0.12
"""Share of the page's larger side that a plot covers at least along either direction."""

LONG = 0.25
"""Share of the plot that a line covers to be one of its grid."""

FEWEST_LINES = 3
"""Lines of a grid along each direction, at least; a table and a border have fewer that reach across."""

REACHED = 0.5
"""Share of the lines that must reach a line across for it to be in the plot."""

MOST_SEGMENTS = 4000
"""Beyond as many, short pieces are left out first."""

Box = tuple[float, float, float, float]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Plot:
    """The pieces of one plot's lines, those told apart by x and those told apart by y, and their box (x0, y0, x1, y1).

    ``frame_only`` says that there is no grid, only a frame.
    """

    box: Box
    upright: Segments
    level: Segments
    frame_only: bool

    @property
    def area(self) -> float:
        """Area of the box."""
        return (self.box[2] - self.box[0]) * (self.box[3] - self.box[1])

    def span(self, across: int) -> tuple[float, float]:
        """The box along x (0) or y (1)."""
        return self.box[across], self.box[across + 2]


def find_plots(upright: Segments, level: Segments, near: float, page: tuple[float, float]) -> tuple[Plot, ...]:
    """The plots of a page in reading order: those with a grid; where none has one, frames.

    Parameters
    ----------
    upright, level : Segments
        Straight pieces told apart by x and by y.
    near : float
        How far ends that meet may be apart.
    page : (float, float)
        Width and height.
    """
    least = 0.5 * SMALLEST * min(page)
    upright, level = _longest(upright, least), _longest(level, least)
    groups = _groups(_meeting(upright, level, near))
    plots = [_plot(upright.where(mine), level.where(others), near) for mine, others in groups]
    large = [plot for plot in plots if plot and min(plot.box[2] - plot.box[0], plot.box[3] - plot.box[1]) >= 2 * least]
    grids = [plot for plot in large if not plot.frame_only]
    found = grids or [plot for plot in large if not _holds_another(plot, large)]
    return tuple(sorted(found, key=lambda plot: _reading_order(plot, found)))


def _longest(segments: Segments, least: float) -> Segments:
    kept = (
        segments.length >= min(least, 0.5 * float(segments.length.max())) if segments.length.size else np.zeros(0, bool)
    )
    if np.sum(kept) > MOST_SEGMENTS:
        kept &= segments.length >= np.sort(segments.length)[-MOST_SEGMENTS]
    return segments.where(kept)


def _meeting(upright: Segments, level: Segments, near: float) -> NDArray[np.bool_]:
    """Whether each upright piece crosses or meets each level one."""
    x, y = upright.across[:, None], level.across[None, :]
    # Where the lines, prolonged, cross: each by its own slope.
    down = y - 0.5 * (upright.first + upright.last)[:, None]
    x = x + upright.lean[:, None] * down
    y = y + level.lean[None, :] * (x - 0.5 * (level.first + level.last)[None, :])
    on_upright = (y >= upright.first[:, None] - near) & (y <= upright.last[:, None] + near)
    on_level = (x >= level.first[None, :] - near) & (x <= level.last[None, :] + near)
    meeting: NDArray[np.bool_] = on_upright & on_level
    return meeting


def _groups(meeting: NDArray[np.bool_]) -> list[tuple[NDArray[np.bool_], NDArray[np.bool_]]]:
    """Masks of the upright and level pieces that hang together."""
    n, m = meeting.shape
    one, other = np.nonzero(meeting)
    graph = coo_matrix((np.ones(len(one)), (one, other + n)), shape=(n + m, n + m))
    count, label = connected_components(graph, directed=False)
    sizes = np.bincount(label, minlength=count)
    return [(label[:n] == k, label[n:] == k) for k in np.flatnonzero(sizes >= 4)]


def _plot(upright: Segments, level: Segments, near: float) -> Plot | None:
    """The plot of pieces that hang together; None where they do not enclose an area."""
    if len(upright.across) < 2 or len(level.across) < 2:
        return None
    (left, right), (top, bottom) = _ends(level, upright, near), _ends(upright, level, near)
    box = (left, top, right, bottom)
    spans = (box[3] - box[1], box[2] - box[0])
    if min(spans) <= 0:
        return None
    counts = [_distinct(part, span, near) for part, span in zip((upright, level), spans, strict=True)]
    return Plot(box=box, upright=upright, level=level, frame_only=min(counts) < FEWEST_LINES or sum(counts) < 8)


def _ends(along: Segments, across: Segments, near: float) -> tuple[float, float]:
    """Where lines begin and end: at the outermost long lines across that most of them reach from within.

    Where there are none across, as most of the long ones do. Lettering that stands in line with lines may seem to
    prolong some, and a hatched ground to break them.
    """
    long = along.length >= 0.5 * along.length.max()
    ends = (float(np.median(along.first[long])), float(np.median(along.last[long])))
    lines = across.across[across.length >= 0.5 * across.length.max()]
    middle = 0.5 * (ends[0] + ends[1])
    # From within means from a little nearer to the middle; ends are only known to about half of ``near``.
    low, high = lines + np.where(lines < middle, 0.6, -2.0) * near, lines + np.where(lines < middle, 2.0, -0.6) * near
    covering = (along.first[:, None] <= low) & (along.last[:, None] >= high)
    reached = lines[covering.sum(axis=0) >= REACHED * len(np.unique(np.round(along.across[long] / near)))]
    before, after = reached[reached < middle], reached[reached > middle]
    return float(before.min()) if before.size else ends[0], float(after.max()) if after.size else ends[1]


def _distinct(segments: Segments, span: float, near: float) -> int:
    """How many lines reach a good part of the plot."""
    across: Floats = np.sort(segments.across[segments.length >= LONG * span])
    return int(np.sum(np.diff(across) > 0.1 * near)) + 1 if across.size else 0


def _holds_another(plot: Plot, others: list[Plot]) -> bool:
    """Whether another frame lies inside: then this one is the page's border."""
    return any(
        other is not plot
        and other.box[0] >= plot.box[0]
        and other.box[1] >= plot.box[1]
        and other.box[2] <= plot.box[2]
        and other.box[3] <= plot.box[3]
        for other in others
    )


def _reading_order(plot: Plot, plots: list[Plot]) -> tuple[int, float]:
    """Row by row, from the left: a row is the plots whose middles lie beside an earlier one."""
    middles = sorted((0.5 * (other.box[1] + other.box[3]), other.box[3] - other.box[1]) for other in plots)
    row, last = 0, middles[0]
    for middle in middles:
        if middle[0] - last[0] > 0.5 * min(middle[1], last[1]):
            row, last = row + 1, middle
        if 0.5 * (plot.box[1] + plot.box[3]) <= middle[0]:
            break
    return row, plot.box[0]
