"""Axes of a plot from marks and the grid that is printed there."""

from curvelab.axes.entries import checked_axes
from curvelab.axes.finish import finished_axes
from curvelab.axes.raster import raster_grid
from curvelab.axes.vector import vector_grid
from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry


def calibrate(sheet: Sheet, current: AxisEntry, value: AxisEntry) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    """The map between places and values, and what is doubtful about it.

    Marks say roughly where values are; the printed grid lines near them, measured on the exact strokes or on the
    untouched grey levels, say it exactly. Where no grid is found the marks alone decide.

    Parameters
    ----------
    sheet : Sheet
    current, value : AxisEntry
        What the worksheet says of the current axis and of the second axis, each with at least two marks.

    Raises
    ------
    AxesError
        Marks, units, factors or directions that cannot be used.
    """
    axes, warnings = checked_axes(sheet, current, value)
    grid = raster_grid(sheet.pixels, axes) if sheet.pixels else vector_grid(sheet, axes)
    calibrated, doubts = finished_axes(sheet, axes, grid)
    return calibrated, (*warnings, *doubts)
