"""Prepare a plot for tracing: everything that does not depend on which line is asked for."""

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.axes import Axes
from curvelab.records.sheet import Pixels, Sheet
from curvelab.trace.gridmodel import grid_lines, predict_grid
from curvelab.trace.ink import read_ink
from curvelab.trace.prepared import Prepared, Raster
from curvelab.trace.sense import Sense
from curvelab.trace.strokes import curve_ink, plot_area, stroke_graph
from curvelab.trace.window import plot_window

__all__ = ["Prepared", "prepare"]


def prepare(sheet: Sheet, axes: Axes) -> Prepared:
    """Everything a trace on this plot needs, once.

    Parameters
    ----------
    sheet : Sheet
        Its exact strokes are used where it has them, else its pixels.
    axes : Axes
        With the measured grid lines in ``axes.grid``.

    Raises
    ------
    TraceError
        The page has neither strokes nor pixels.
    """
    if sheet.is_vector:
        return Prepared(axes=axes, raster=None, strokes=sheet.strokes)
    if sheet.pixels is None:
        raise TraceError(f"Page {sheet.page} of {sheet.file} is blank", "A page with curves is expected")
    return Prepared(axes=axes, raster=_raster(sheet.pixels, axes), strokes=())


def _raster(pixels: Pixels, axes: Axes) -> Raster:
    ink = read_ink(pixels, axes)
    grid = predict_grid(ink, pixels, grid_lines(axes))
    corners = pixels.columns_rows(plot_window(axes).corners()) - np.array(ink.origin)
    inside = plot_area(ink.dark.shape, corners)
    sense = Sense(axes=axes, pixels=pixels, origin=ink.origin)
    skeleton, fill, widths, graph = stroke_graph(curve_ink(ink, grid), inside, ink.noise, sense.progress)
    return Raster(
        pixels=pixels,
        ink=ink,
        grid=grid,
        sense=sense,
        skeleton=skeleton,
        fill=fill,
        inside=inside,
        widths=widths,
        graph=graph,
    )
