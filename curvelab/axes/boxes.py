"""Where the plots of a page lie."""

from curvelab.axes.choose import plots_of
from curvelab.axes.page import page_of
from curvelab.axes.plots import Box
from curvelab.records.sheet import Sheet


def plot_boxes(sheet: Sheet) -> tuple[Box, ...]:
    """The box (x0, y0, x1, y1) of every plot in places, in the order of their numbers from 1."""
    page = page_of(sheet)
    return tuple(page.area(plot.box) for plot in plots_of(page))
