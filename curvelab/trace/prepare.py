"""Prepare a plot for tracing: everything that does not depend on which line is asked for."""

from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet
from curvelab.trace.gridmodel import predict_grid
from curvelab.trace.ink import read_ink
from curvelab.trace.prepared import Prepared, Raster
from curvelab.trace.strokes import curve_ink, stroke_graph

__all__ = ["Prepared", "prepare"]


def prepare(sheet: Sheet, axes: Axes) -> Prepared:
    """Everything a trace on this plot needs, once.

    Parameters
    ----------
    sheet : Sheet
        Its exact strokes are used where it has them, else its pixels.
    axes : Axes
        With the measured grid lines in ``axes.grid``.
    """
    raster = None if sheet.is_vector else _raster(sheet, axes)
    return Prepared(axes=axes, pixels=sheet.pixels, raster=raster, strokes=sheet.strokes)


def _raster(sheet: Sheet, axes: Axes) -> Raster:
    ink = read_ink(sheet, axes)
    grid = predict_grid(ink, sheet.pixels, axes.grid)
    skeleton, fill, widths, graph = stroke_graph(curve_ink(ink, grid), ink.noise)
    return Raster(ink=ink, grid=grid, skeleton=skeleton, fill=fill, widths=widths, graph=graph)
