"""From a grid to the finished axes: the map, the marks' residuals, the frame, and what is doubtful."""

from dataclasses import replace

import numpy as np

from curvelab.axes.doubts import doubts_of
from curvelab.axes.grid import AXIS_NAMES, Grid, rough_rows
from curvelab.axes.marks import FEWEST_LINES, fitted_ruler, mark_places, mark_values, pixel_size, with_marks
from curvelab.axes.planefit import Line, Scatter, affine_map, fit_plane
from curvelab.axes.snapfit import snapped_map
from curvelab.axes.snapped import find_snapping
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, Axis, GridLine, PlaneMap
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning

LEAST_PLACE_SD = 0.01
"""Pixels that a place of a line is off at least."""

VECTOR_SD = 1e-5
"""The same for exact strokes, in their unit."""


def finished_axes(sheet: Sheet, axes: tuple[Axis, Axis], grid: Grid) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    """Fit the final map in places of the sheet and say what is doubtful."""
    snapping = find_snapping(sheet.pixels, axes, grid.lines) if sheet.pixels else None
    within = snapped_map(sheet.pixels, axes, snapping) if sheet.pixels and snapping else None
    plane = within or _with_common(_fitted(sheet, axes, grid), grid.common_sd)
    used = (_enough(grid, 0), _enough(grid, 1))
    marked = (_with_residuals(axes[0], 0, plane), _with_residuals(axes[1], 1, plane))
    residuals = np.array([mark.residual for axis in marked for mark in axis.marks])
    calibrated = Axes(
        current=marked[0],
        value=marked[1],
        map=plane,
        frame=_frame(plane, grid),
        mark_residual_rms=float(np.sqrt(np.mean(residuals**2))),
        grid_residual_rms=_grid_rms(axes, grid, plane) if any(used) else None,
        grid=grid.lines,
        snapped=within is not None,
    )
    return calibrated, tuple(doubts_of(sheet, marked, grid, used, snapped=snapping is not None))


def _enough(grid: Grid, axis: int) -> bool:
    return sum(line.axis == AXIS_NAMES[axis] for line in grid.lines) >= FEWEST_LINES


def _fitted(sheet: Sheet, axes: tuple[Axis, Axis], grid: Grid) -> PlaneMap:
    """The map fitted to the grid lines, or to the marks of an axis that has none."""
    pixel = pixel_size(sheet)
    places = (mark_places(axes[0]), mark_places(axes[1]))
    lines, tilts = with_marks([_line(axes, line) for line in grid.lines], axes, places, pixel)
    start = _start(axes, places, lines)
    if sheet.pixels is None:
        # Strokes lie where an affine map put them; pixels may have been bent on the way.
        return fit_plane(start, lines, Scatter(lines=(VECTOR_SD, VECTOR_SD), place=VECTOR_SD), tilts, ()).map
    return fit_plane(start, lines, Scatter(lines=grid.line_sd, place=LEAST_PLACE_SD * pixel), tilts).map


def _with_common(plane: PlaneMap, common_sd: tuple[float, float]) -> PlaneMap:
    """The map with an error added that all lines of an axis share: in the constants alone."""
    covariance = np.array(plane.covariance)
    steepness = np.linalg.norm(plane.jacobian(plane.centre)[0], axis=1)
    for axis in (0, 1):
        covariance[3 * axis, 3 * axis] += (common_sd[axis] * steepness[axis]) ** 2
    return replace(plane, covariance=covariance)


def _grid_rms(axes: tuple[Axis, Axis], grid: Grid, plane: PlaneMap) -> float:
    """Root mean square over the lines of their mean distance from where the map has them."""
    off = []
    for line in (_line(axes, line) for line in grid.lines):
        steepness = np.linalg.norm(plane.jacobian(line.points)[:, line.axis], axis=1)
        off.append(float(np.mean((plane.scaled(line.points)[:, line.axis] - line.scaled) / steepness)))
    return float(np.sqrt(np.mean(np.square(off))))


def _line(axes: tuple[Axis, Axis], line: GridLine) -> Line:
    k = AXIS_NAMES.index(line.axis)
    return Line(axis=k, scaled=float(axes[k].scaled(line.value)), points=line.points)


def _start(axes: tuple[Axis, Axis], places: tuple[Floats, Floats], lines: list[Line]) -> PlaneMap:
    """An upright map through the marks, normalised to what the lines cover."""
    everything = np.concatenate([*places, *(line.points for line in lines)])
    low, high = everything.min(axis=0), everything.max(axis=0)
    centre, reach = 0.5 * (low + high), 0.5 * float((high - low).max())
    rows = []
    for axis, at in zip(axes, places, strict=True):
        across = 0 if axis.direction == "x" else 1
        ruler = fitted_ruler(at[:, across], mark_values(axis))
        rows.append(rough_rows(ruler, 0.0, 0.0, across, centre, reach))
    return affine_map(centre, reach, np.stack(rows))


def _with_residuals(axis: Axis, index: int, plane: PlaneMap) -> Axis:
    """The axis with each mark's distance along it from where the map has its value."""
    places = mark_places(axis)
    along = plane.jacobian(places)[:, index, 0 if axis.direction == "x" else 1]
    residuals = (plane.scaled(places)[:, index] - mark_values(axis)) / along
    marks = (replace(mark, residual=float(residual)) for mark, residual in zip(axis.marks, residuals, strict=True))
    return replace(axis, marks=tuple(marks))


def _frame(plane: PlaneMap, grid: Grid) -> tuple[float, float, float, float]:
    corners = plane.places([[current, value] for current in grid.covered[0] for value in grid.covered[1]])
    low, high = corners.min(axis=0), corners.max(axis=0)
    return float(low[0]), float(low[1]), float(high[0]), float(high[1])
