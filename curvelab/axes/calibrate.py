"""Axes of a plot from marks and the grid that is printed there; where there are no marks, from the sheet alone."""

from dataclasses import replace

from curvelab.axes.bending import bending_doubts
from curvelab.axes.choose import checked_plot
from curvelab.axes.decide import fitting_axes
from curvelab.axes.entries import checked_axes
from curvelab.axes.find import FoundAxes, Words, find_axes, is_open
from curvelab.axes.finish import finished_axes
from curvelab.axes.marks import pixel_size
from curvelab.axes.raster import raster_grid
from curvelab.axes.vector import vector_grid
from curvelab.lettering.read import read_words
from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry


def calibrate(
    sheet: Sheet, current: AxisEntry, value: AxisEntry | None, plot: int | None = None, words: Words = read_words
) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    """The map between places and values, and what is doubtful about it.

    Marks say roughly where values are; the printed grid lines near them, measured on the exact strokes or on the
    untouched grey levels, say it exactly. Where no grid is found the marks alone decide. An axis with fewer than two
    marks gets them from the lines, numbers and titles of the sheet.

    Parameters
    ----------
    sheet : Sheet
    current : AxisEntry
        What the worksheet says of the current axis.
    value : AxisEntry or None
        The same of the second axis; None where not even its quantity is said.
    plot : int, optional
        Which plot of the page, from 1.
    words : callable, optional
        Reads the words of a sheet in rectangles.

    Raises
    ------
    AxesError
        Marks, units, factors or directions that cannot be used; a plot that is not there; axes that cannot be read.
    """
    found = _found(sheet, current, value, plot, words)
    axes, warnings = checked_axes(sheet, found.current, found.value)
    grid = raster_grid(sheet.pixels, axes) if sheet.pixels else vector_grid(sheet, axes)
    calibrated, doubts = finished_axes(sheet, axes, grid)
    automatic = not current.marks and not (value and value.marks)
    if automatic:
        fitting = fitting_axes(calibrated, pixel_size(sheet))
        if fitting != (calibrated.current, calibrated.value):
            calibrated, doubts = finished_axes(sheet, fitting, grid)
    bent = bending_doubts(calibrated, sheet.pixels.size_in_places) if sheet.pixels else ()
    return replace(calibrated, automatic=automatic, plot=found.plot), (*found.warnings, *warnings, *doubts, *bent)


def _found(sheet: Sheet, current: AxisEntry, value: AxisEntry | None, plot: int | None, words: Words) -> FoundAxes:
    """Entries that say all that is needed: as given, or read from the sheet."""
    if value is None or is_open(current) or is_open(value):
        return find_axes(sheet, current, value, plot, words)
    return FoundAxes(current=current, value=value, plot=checked_plot(sheet, plot), warnings=())
