"""The printed grid of a page that carries exact strokes."""

from curvelab.axes.grid import Grid
from curvelab.records.axes import Axis
from curvelab.records.sheet import Sheet


def vector_grid(sheet: Sheet, axes: tuple[Axis, Axis]) -> Grid | None:
    """Todo."""
    return None
