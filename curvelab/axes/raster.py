"""The printed grid of an image, found from marks and measured on its untouched grey levels."""

from dataclasses import dataclass, replace

import cv2
import numpy as np

from curvelab.axes.bent import Sighted, bent_plane
from curvelab.axes.comb import Alignment
from curvelab.axes.extent import AT_LINE, covered_range
from curvelab.axes.grid import AXIS_NAMES, Grid, aligned_marks, disagrees, rough_rows
from curvelab.axes.marks import mark_values, with_marks
from curvelab.axes.measure import Measured, measure_lines
from curvelab.axes.models import RICHER, Model
from curvelab.axes.paths import Look
from curvelab.axes.pattern import MAIN, Range, finer_lines, linear_lines, log_lines
from curvelab.axes.planefit import Line, Scatter, affine_map, fit_plane
from curvelab.axes.search import search_lines
from curvelab.axes.strips import STRIP, Profile, Strips, profile_along, shared_slopes, strips_of
from curvelab.axes.unlike import without_curves
from curvelab.axes.widths import FEWEST, SHARP
from curvelab.records.arrays import Bytes, Floats
from curvelab.records.axes import Axis, GridLine, PlaneMap
from curvelab.records.sheet import Pixels

SEARCH_SCATTER = Scatter(lines=(0.05, 0.05), place=0.2)

LEAST_STRIPS = 12

LEAST_LINE_SD = 0.005
"""Pixels that the stroke model leaves on drawings without noise; this and the next two from drawings of many widths."""

UNSETTLED_SD = 0.05
SHARP_SD = 0.006

ROOM = 3.0
"""Pixels that a finer line has on both sides: no two lines of the pattern may claim the same printed one."""

LONGEST_TICK = 24.0
"""Pixels by which ticks may stand out of a frame."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _View:
    """One axis on the image: its marks as (column, row), and strips of the whole image and of the marks' part."""

    axis: Axis
    look: Look
    marks: Floats
    whole: Strips
    seed: Strips

    @property
    def seed_range(self) -> Range:
        """Scaled range between the outermost marks, which lies in the plot."""
        scaled = mark_values(self.axis)
        return float(scaled.min()), float(scaled.max())


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _State:
    """What is known so far: the map from (column, row), the lines that are there, and how far the plot reaches."""

    plane: PlaneMap
    lines: tuple[Floats, Floats]
    covered: tuple[Range, Range]

    def around(self, axis: int) -> tuple[Floats, Floats, Range]:
        """Lines of an axis, those that cross them, and the range over which they run."""
        return self.lines[axis], self.lines[1 - axis], self.covered[1 - axis]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Round:
    """One round of the search: the part of the image looked at, how far off lines may be, and the maps allowed."""

    strips: list[Strips]
    reach: float
    models: tuple[Model, ...]


def raster_grid(pixels: Pixels, axes: tuple[Axis, Axis]) -> Grid:
    """The grid lines of an image.

    Parameters
    ----------
    pixels : Pixels
    axes : (Axis, Axis)
        Current and second axis, with at least two marks each.
    """
    views = _views(pixels, axes)
    bent = _bent(views)
    if bent is not None:
        return _measured(pixels, views, *bent, astray=(False, False))
    slopes = shared_slopes(views[0].seed, views[1].seed)
    profiles = [profile_along(view.seed, slope) for view, slope in zip(views, slopes, strict=True)]
    laid = [_laid(view, slope, profile) for view, slope, profile in zip(views, slopes, profiles, strict=True)]
    astray = (disagrees(laid[0], profiles[0]), disagrees(laid[1], profiles[1]))
    seeds = (views[0].seed_range, views[1].seed_range)
    if not any(alignment.agrees for alignment in laid):
        return Grid(lines=(), covered=seeds, disagrees=astray)
    main = tuple(alignment.lines if alignment.agrees else np.zeros(0) for alignment in laid)
    state = _State(plane=_first_plane(views, laid, slopes), lines=(main[0], main[1]), covered=seeds)
    state = _searched(state, views, state.lines, _Round(strips=[view.seed for view in views], reach=3.0, models=()))
    return _measured(pixels, views, laid, state, astray=astray)


def _bent(views: tuple[_View, _View]) -> tuple[list[Alignment], _State] | None:
    """The start on a page seen at an angle, whose lines have no slope in common; None on others."""
    sighted = tuple(Sighted(axis=view.axis, look=view.look, marks=view.marks, strips=view.whole) for view in views)
    laid = [Alignment(ruler=each.ruler, lines=each.lines, agrees=True, score=0.0, step=each.step) for each in sighted]
    plane = bent_plane(_first_plane(views, laid, (0.0, 0.0)), (sighted[0], sighted[1]))
    if plane is None:
        return None
    seeds = (views[0].seed_range, views[1].seed_range)
    return laid, _State(plane=plane, lines=(laid[0].lines, laid[1].lines), covered=seeds)


def _measured(
    pixels: Pixels, views: tuple[_View, _View], laid: list[Alignment], state: _State, *, astray: tuple[bool, bool]
) -> Grid:
    """The grid from a first map of it: how far it reaches, every line it has, each measured."""
    axes = (views[0].axis, views[1].axis)
    state = _extended(state, views)
    for finest, reach in ((False, 3.0), (True, 1.5)):
        candidates = [
            _candidates(axis, alignment, part, finest=finest)
            for axis, alignment, part in zip(axes, laid, state.covered, strict=True)
        ]
        part = _Round(strips=_inside(state, views), reach=reach, models=RICHER)
        state = _searched(state, views, (candidates[0], candidates[1]), part)
    measured = [measure_lines(view.look, state.plane, *state.around(k)) for k, view in enumerate(views)]
    covered = (_to_lines(state, measured[0], 0), _to_lines(state, measured[1], 1))
    measured = [without_curves(axis, lines, part) for axis, lines, part in zip(axes, measured, covered, strict=True)]
    grid = [_grid_line(pixels, view, line) for view, lines in zip(views, measured, strict=True) for line in lines]
    line_sd = [_line_sd(lines) * pixels.size_in_places for lines in measured]
    common_sd = [_common_sd(lines) * pixels.size_in_places for lines in measured]
    return Grid(
        lines=tuple(grid),
        covered=covered,
        disagrees=astray,
        line_sd=(line_sd[0], line_sd[1]),
        common_sd=(common_sd[0], common_sd[1]),
    )


def _views(pixels: Pixels, axes: tuple[Axis, Axis]) -> tuple[_View, _View]:
    to_pixels = np.linalg.inv(pixels.to_place[:, :2])
    looks, marks = [], []
    for k, axis in enumerate(axes):
        across = int(np.argmax(np.abs(to_pixels[:, 0 if axis.direction == "x" else 1])))
        image: Bytes = pixels.grey if across == 0 else np.ascontiguousarray(cv2.transpose(pixels.grey))
        looks.append(Look(axis=k, across=across, image=image))
        marks.append(pixels.columns_rows(np.array([mark.at for mark in axis.marks], dtype=np.float64)))
    views = []
    for k, axis in enumerate(axes):
        whole = strips_of(looks[k].image, (0, looks[k].image.shape[0]))
        # The other axis's marks tell where along the lines the plot certainly is.
        along = marks[1 - k][:, looks[1 - k].across]
        seed = _strips_between(whole, float(along.min()), float(along.max()))
        views.append(_View(axis=axis, look=looks[k], marks=marks[k], whole=whole, seed=seed))
    return views[0], views[1]


def _strips_between(strips: Strips, first: float, last: float) -> Strips:
    """The strips between two places, at least a few about their middle."""
    middle = 0.5 * (first + last)
    half = max(0.5 * (last - first), 0.5 * LEAST_STRIPS * STRIP)
    inside = np.abs(strips.along - middle) <= half
    if not inside.any():
        inside = np.abs(strips.along - middle) <= np.abs(strips.along - middle).min()
    return Strips(dark=strips.dark[inside], along=strips.along[inside])


def _laid(view: _View, slope: float, profile: Profile) -> Alignment:
    look = view.look
    across = view.marks[:, look.across] - slope * (view.marks[:, 1 - look.across] - profile.middle)
    return aligned_marks(view.axis, across, profile)


def _first_plane(views: tuple[_View, _View], laid: list[Alignment], slopes: tuple[float, float]) -> PlaneMap:
    places = np.concatenate([view.marks for view in views])
    centre = 0.5 * (places.min(axis=0) + places.max(axis=0))
    reach = 0.5 * float(np.ptp(places, axis=0).max())
    rows = [
        rough_rows(alignment.ruler, slope, view.seed.middle, view.look.across, centre, reach)
        for view, alignment, slope in zip(views, laid, slopes, strict=True)
    ]
    return affine_map(centre, reach, np.stack(rows))


def _searched(state: _State, views: tuple[_View, _View], candidates: tuple[Floats, Floats], part: _Round) -> _State:
    """The lines found among candidates, and the map fitted to them."""
    lines: list[Line] = []
    values = []
    for view, scaled, strips in zip(views, candidates, part.strips, strict=True):
        found = search_lines(view.look, strips, state.plane, scaled, part.reach)
        values.append(np.array([line.scaled for line in found]))
        lines += [Line(axis=view.look.axis, scaled=line.scaled, points=line.points) for line in found]
    axes = (views[0].axis, views[1].axis)
    lines, tilts = with_marks(lines, axes, (views[0].marks, views[1].marks), 1.0)
    fitted = fit_plane(state.plane, lines, SEARCH_SCATTER, tilts, part.models)
    return _State(plane=fitted.map, lines=(values[0], values[1]), covered=state.covered)


def _extended(state: _State, views: tuple[_View, _View]) -> _State:
    """How far the plot reaches; an axis whose crossing lines are not known reaches as far as its marks."""
    covered = list(state.covered)
    for k, view in enumerate(views):
        if len(state.lines[k]):
            covered[1 - k] = covered_range(
                view.look, state.plane, state.lines[k], state.lines[1 - k], state.covered[1 - k]
            )
    return replace(state, covered=(covered[0], covered[1]))


def _candidates(axis: Axis, alignment: Alignment, covered: Range, *, finest: bool) -> Floats:
    """Lines that may be there: the main ones or those of the finest paper; on a linear axis the steps found."""
    if not alignment.agrees:
        return np.zeros(0)
    pixel = 1.0 / abs(alignment.ruler.per_scaled)
    margin = AT_LINE * pixel
    wide = (covered[0] - margin, covered[1] + margin)
    if axis.scale == "log":
        return finer_lines(axis, wide, ROOM * pixel) if finest else log_lines(axis, wide, MAIN)
    return linear_lines(axis, wide, alignment.step)


def _to_lines(state: _State, measured: list[Measured], axis: int) -> Range:
    """The covered range, its ends moved onto the outermost lines next to them: ticks outside a frame prolong lines."""
    low, high = state.covered[axis]
    scaled = np.array([line.scaled for line in measured])
    if not len(scaled):
        return low, high
    rate = np.abs(state.plane.jacobian(state.plane.centre)[0, axis]).max()
    first, last = float(scaled.min()), float(scaled.max())
    return (
        first if -AT_LINE * rate <= first - low <= LONGEST_TICK * rate else low,
        last if -AT_LINE * rate <= high - last <= LONGEST_TICK * rate else high,
    )


def _sharp(lines: list[Measured]) -> bool:
    return bool(lines) and float(np.median([line.blur for line in lines])) < SHARP


def _line_sd(lines: list[Measured]) -> float:
    """Pixels that each line is off at least: sharp strokes too few to settle their width by where they lie."""
    return UNSETTLED_SD if _sharp(lines) and len(lines) < FEWEST else LEAST_LINE_SD


def _common_sd(lines: list[Measured]) -> float:
    """Pixels by which all lines of an axis may be off together: sharp strokes whose width is not quite known."""
    return SHARP_SD if _sharp(lines) else 0.0


def _inside(state: _State, views: tuple[_View, _View]) -> list[Strips]:
    """Strips of each view within the plot."""
    corners = state.plane.places([[c, v] for c in state.covered[0] for v in state.covered[1]])
    low, high = corners.min(axis=0), corners.max(axis=0)
    return [
        _strips_between(view.whole, float(low[1 - view.look.across]), float(high[1 - view.look.across]))
        for view in views
    ]


def _grid_line(pixels: Pixels, view: _View, line: Measured) -> GridLine:
    size = pixels.size_in_places
    return GridLine(
        axis=AXIS_NAMES[view.look.axis],
        value=float(view.axis.unscaled(line.scaled)),
        points=pixels.places(line.points),
        sd=line.sd * size,
        width=line.width * size,
        darkness=line.darkness,
    )
