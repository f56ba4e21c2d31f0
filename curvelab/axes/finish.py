"""From a grid to the finished axes: the map, the marks' residuals, the frame, and what is doubtful."""

from dataclasses import replace

import numpy as np

from curvelab.axes.entries import mark_text, table_name
from curvelab.axes.grid import AXIS_NAMES, Grid, rough_rows
from curvelab.axes.marks import AGREEING, CLICK_SD, FEWEST_LINES, fitted_ruler, mark_places, mark_values, pixel_size, with_marks
from curvelab.axes.planefit import RICHER, Fitted, Line, Scatter, affine_map, fit_plane
from curvelab.axes.snapped import SNAPPED_SD, snapped_axes
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, Axis, GridLine, PlaneMap
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning

LEAST_LINE_SD = 0.005
"""Pixels that a line of an image is off at least: what the stroke model leaves on drawings without noise."""

LEAST_PLACE_SD = 0.01
VECTOR_SD = 1e-5
"""The same for exact strokes, in their unit."""


def finished_axes(sheet: Sheet, axes: tuple[Axis, Axis], grid: Grid) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    """Fit the final map in places of the sheet and say what is doubtful."""
    pixel = pixel_size(sheet)
    snapped = snapped_axes(sheet.pixels, axes, grid.lines) if sheet.pixels else (False, False)
    fitted, used = _fitted(sheet, axes, grid, snapped)
    marked = (_with_residuals(axes[0], 0, fitted.map), _with_residuals(axes[1], 1, fitted.map))
    residuals = np.array([mark.residual for axis in marked for mark in axis.marks])
    calibrated = Axes(
        current=marked[0],
        value=marked[1],
        map=fitted.map,
        frame=_frame(fitted.map, grid),
        mark_residual_rms=float(np.sqrt(np.mean(residuals**2))),
        grid_residual_rms=fitted.residual_rms if any(used) else None,
        grid=grid.lines,
    )
    doubts = [
        doubt
        for k, axis in enumerate(marked)
        for doubt in _doubts(axis, snapped=snapped[k], by_grid=used[k], astray=grid.disagrees[k], pixel=pixel)
    ]
    return calibrated, tuple(doubts)


def _fitted(
    sheet: Sheet, axes: tuple[Axis, Axis], grid: Grid, snapped: tuple[bool, bool]
) -> tuple[Fitted, tuple[bool, bool]]:
    """The map, and for each axis whether its lines decided."""
    pixel = pixel_size(sheet)
    places = (mark_places(axes[0]), mark_places(axes[1]))
    lines = [_line(axes, line) for line in grid.lines]
    used = tuple(sum(line.axis == k for line in lines) >= FEWEST_LINES for k in (0, 1))
    lines, tilts = with_marks(lines, axes, places, pixel)
    least, place = (VECTOR_SD, VECTOR_SD) if sheet.pixels is None else (LEAST_LINE_SD * pixel, LEAST_PLACE_SD * pixel)
    line_sds = [SNAPPED_SD * pixel if moved else least for moved in snapped]
    scatter = Scatter(lines=(line_sds[0], line_sds[1]), place=place)
    # Strokes lie where an affine map put them; pixels may have been bent on the way.
    models = () if sheet.pixels is None else RICHER
    return fit_plane(_start(axes, places, lines), lines, scatter, tilts, models), (used[0], used[1])


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


def _doubts(axis: Axis, *, snapped: bool, by_grid: bool, astray: bool, pixel: float) -> list[ReadingWarning]:
    name = table_name(axis.quantity)
    doubts = []
    if snapped:
        text = f"The grid lines of {name} were drawn on whole pixels, each up to half a pixel off; the interval says so."
        doubts.append(ReadingWarning(code="grid-snapped", text=text))
    if astray:
        text = (
            f"The grid lines seen along {name} are not where its marks have them: "
            f"check values and places of {' and '.join(mark_text(mark) for mark in axis.marks)}."
        )
        doubts.append(ReadingWarning(code="grid-disagrees", text=text, at=axis.marks[0].at))
    if not by_grid:
        text = (
            f"{name} rests on its {len(axis.marks)} marks alone, as no grid lines were found for it; a mark is "
            f"taken to be {CLICK_SD * pixel:.2g} off: give more marks, or exact ones."
        )
        doubts.append(ReadingWarning(code="axes-from-marks", text=text))
    for mark in axis.marks:
        if mark.residual is not None and abs(mark.residual) > AGREEING * pixel:
            what = "its grid line" if by_grid else "where the other marks have its value"
            text = f"The {mark_text(mark)} of {name} lies {abs(mark.residual):.3g} from {what}: correct its place or value."
            doubts.append(ReadingWarning(code="mark-outlying", text=text, at=mark.at))
    return doubts
