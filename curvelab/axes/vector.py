"""The printed grid of a page that carries exact strokes."""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.comb import Alignment, Ruler
from curvelab.axes.grid import AXIS_NAMES, Grid, aligned_marks, disagrees
from curvelab.axes.marks import mark_places, mark_values, pixel_size
from curvelab.axes.pattern import Range, finer_lines, linear_lines
from curvelab.axes.segments import Segments, straight_segments
from curvelab.axes.strips import Profile
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, GridLine
from curvelab.records.sheet import Sheet

SAME_LINE = 0.05
"""Pieces closer across than this part of a pixel are of one line."""

LONG = 0.25
"""Share of the marks' part of the plot that a grid line covers; shorter lines are ticks."""

FEWEST_LONG = 3
GAP = 40.0
"""Pixels by which the pieces of one line may be apart along it."""

NEAR = 2.0
"""Pixels by which a line may lie off where the ruler has it, before the ruler is refined."""

EXACT = 0.1
"""Pixels within which lines are looked for once the ruler rests on them, at least."""

BUMP = 1.0
"""Standard deviation, in pixels, of a line in the profile the pattern is laid on."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Drawn:
    """One line: its pieces, and where it lies across at the profile's middle."""

    at: float
    pieces: Segments

    @property
    def length(self) -> float:
        return float(self.pieces.length.sum())


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _View:
    """One axis on the page: its lines, how they lean, and its pattern laid on them."""

    axis: Axis
    index: int
    across: int
    lines: list[_Drawn]
    slope: float
    profile: Profile
    alignment: Alignment


def vector_grid(sheet: Sheet, axes: tuple[Axis, Axis]) -> Grid:
    """The grid lines, or where there are none the ticks, among a page's strokes.

    Parameters
    ----------
    sheet : Sheet
        With strokes.
    axes : (Axis, Axis)
        Current and second axis, with at least two marks each.
    """
    directions = straight_segments(sheet.strokes)
    pixel = pixel_size(sheet)
    views = tuple(_view(axes, k, directions[0 if axes[k].direction == "x" else 1], pixel) for k in (0, 1))
    matched = [_matched(view, pixel) if view.alignment.agrees else {} for view in views]
    covered = tuple(_covered(views[k], matched[k], matched[1 - k]) for k in (0, 1))
    lines = [
        _grid_line(view, scaled, line)
        for view, found in zip(views, matched, strict=True)
        for scaled, line in found.items()
    ]
    astray = tuple(disagrees(view.alignment, view.profile) for view in views)
    return Grid(lines=tuple(lines), covered=(covered[0], covered[1]), disagrees=(astray[0], astray[1]))


def _view(axes: tuple[Axis, Axis], k: int, segments: Segments, pixel: float) -> _View:
    axis = axes[k]
    across = 0 if axis.direction == "x" else 1
    marks = mark_places(axis)
    along = mark_places(axes[1 - k])[:, 1 - across]
    low, high = float(along.min()), float(along.max())
    margin = 0.05 * (high - low)
    near = segments.where((segments.last >= low - margin) & (segments.first <= high + margin))
    slope = _usual_lean(near)
    middle = 0.5 * (low + high)
    lines = _lines(near, slope, middle, (low, high), pixel)
    long = [line for line in lines if line.length >= LONG * (high - low)]
    lines = long if len(long) >= FEWEST_LONG else lines
    places = np.array([line.at for line in lines])
    profile = _profile(places, middle, pixel)
    at = marks[:, across] - slope * (marks[:, 1 - across] - middle)
    return _View(
        axis=axis,
        index=k,
        across=across,
        lines=lines,
        slope=slope,
        profile=profile,
        alignment=aligned_marks(axis, at, profile),
    )


def _usual_lean(segments: Segments) -> float:
    """Median slope of the longest segments."""
    if not segments.length.size:
        return 0.0
    longest = segments.length >= 0.5 * segments.length.max()
    return float(np.median(segments.lean[longest]))


def _lines(segments: Segments, slope: float, middle: float, seed: Range, pixel: float) -> list[_Drawn]:
    """Pieces joined to lines: on one straight line, and connected to the marks' part of the plot."""
    at = segments.across - slope * (0.5 * (segments.first + segments.last) - middle)
    order = np.argsort(at, kind="stable")
    groups = np.split(order, np.flatnonzero(np.diff(at[order]) > SAME_LINE * pixel) + 1) if len(order) else []
    lines = []
    for group in groups:
        members = group[np.argsort(segments.first[group], kind="stable")]
        reach = np.maximum.accumulate(segments.last[members])
        runs = np.split(members, np.flatnonzero(segments.first[members][1:] > reach[:-1] + GAP * pixel) + 1)
        inside = [_overlap(segments, run, seed) for run in runs]
        chosen = np.zeros(len(at), dtype=bool)
        chosen[runs[int(np.argmax(inside))]] = True
        lines.append(_Drawn(at=float(np.median(at[chosen])), pieces=segments.where(chosen)))
    return lines


def _overlap(segments: Segments, run: "np.ndarray[tuple[int], np.dtype[np.intp]]", seed: Range) -> float:
    length = np.minimum(segments.last[run], seed[1]) - np.maximum(segments.first[run], seed[0])
    return float(np.maximum(length, 0.0).sum())


def _profile(places: Floats, middle: float, pixel: float) -> Profile:
    """The lines as bumps, so that the same pattern search serves strokes and pixels."""
    if not len(places):
        return Profile(dark=np.zeros(3), first=0.0, step=pixel, middle=middle)
    first = float(places.min()) - 10 * pixel
    count = int((float(places.max()) + 10 * pixel - first) / pixel) + 1
    grid = first + pixel * np.arange(count)
    offset = (grid[:, None] - places[None, :]) / (BUMP * pixel)
    dark = 2.0 * np.exp(-0.5 * offset**2).max(axis=1)
    return Profile(dark=dark, first=first, step=pixel, middle=middle)


def _matched(view: _View, pixel: float) -> dict[float, _Drawn]:
    """Scaled value of each line that stands where the pattern has one, by a ruler refined to exactness."""
    places = np.array([line.at for line in view.lines])
    ruler, scaled, near = view.alignment.ruler, view.alignment.lines, NEAR * pixel
    ends = np.sort(ruler.scaled(np.array([places.min() - near, places.max() + near])))
    for _ in range(2):
        nearest, off = _nearest(ruler.across(scaled), places)
        good = off <= near
        per_scaled, origin = np.polyfit(scaled[good], places[nearest[good]], 1)
        ruler = Ruler(origin=float(origin), per_scaled=float(per_scaled))
        scatter = float(np.median(_nearest(ruler.across(scaled[good]), places)[1]))
        scaled, near = _candidates(view, (float(ends[0]), float(ends[1]))), max(5 * scatter, EXACT * pixel)
    nearest, off = _nearest(ruler.across(scaled), places)
    return {float(scaled[k]): view.lines[int(nearest[k])] for k in np.flatnonzero(off <= near)}


def _nearest(predicted: Floats, places: Floats) -> tuple["np.ndarray[tuple[int], np.dtype[np.intp]]", Floats]:
    nearest = np.argmin(np.abs(predicted[:, None] - places[None, :]), axis=1)
    return nearest, np.abs(places[nearest] - predicted)


def _candidates(view: _View, covered: Range) -> Floats:
    if view.axis.scale == "log":
        return finer_lines(view.axis, covered)
    return linear_lines(view.axis, covered, view.alignment.step)


def _covered(view: _View, matched: dict[float, _Drawn], others: dict[float, _Drawn]) -> Range:
    """Scaled range the plot covers: between its marks, as far as its own lines stand and those across it run."""
    scaled = [*mark_values(view.axis), *matched]
    if len(others) >= FEWEST_LONG:
        # An end of the other axis's lines, taken along their lean to where this axis's ruler counts.
        ruler = view.alignment.ruler
        runs = [(line.pieces.first.min(), line.pieces.last.max()) for line in others.values()]
        leans = [view.slope * (line.at - view.profile.middle) for line in others.values()]
        ends = np.median([(first - lean, last - lean) for (first, last), lean in zip(runs, leans, strict=True)], axis=0)
        scaled += list(ruler.scaled(ends))
    return float(min(scaled)), float(max(scaled))


def _grid_line(view: _View, scaled: float, line: _Drawn) -> GridLine:
    pieces = line.pieces
    start, stop = int(np.argmin(pieces.first)), int(np.argmax(pieces.last))
    along = np.array([pieces.first[start], pieces.last[stop]])
    across = np.array([_across_at(pieces, start, along[0]), _across_at(pieces, stop, along[1])])
    points = np.stack([across, along] if view.across == 0 else [along, across], axis=1)
    return GridLine(
        axis=AXIS_NAMES[view.index],
        value=float(view.axis.unscaled(scaled)),
        points=points,
        sd=0.0,
        width=float(pieces.width.max()),
        darkness=float(np.clip(pieces.darkness.max(), 0.0, 1.0)),
    )


def _across_at(pieces: Segments, k: int, along: float) -> float:
    return float(pieces.across[k] + pieces.lean[k] * (along - 0.5 * (pieces.first[k] + pieces.last[k])))
