"""What is done once a page, and what every trace on it starts from."""

from dataclasses import dataclass

from curvelab.records.axes import Axes
from curvelab.records.sheet import Pixels, Stroke
from curvelab.trace.chains import ChainGraph
from curvelab.trace.gridmodel import GridInk
from curvelab.trace.ink import Image, Ink
from curvelab.trace.sense import Sense
from curvelab.trace.thinning import Mask


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Raster:
    """The plot's pixels, prepared.

    Parameters
    ----------
    pixels : Pixels
    ink : Ink
    grid : GridInk
        Predicted ink of the grid.
    sense : Sense
        Which way lines run on this plot.
    skeleton : array, shape (height, width), bool
        Middle lines of the strokes.
    fill : array, shape (height, width), bool
        Filled areas.
    inside : array, shape (height, width), bool
        Pixels inside the plot's frame.
    widths : array, shape (height, width), float32
        Local width of the strokes in px.
    graph : ChainGraph
    """

    pixels: Pixels
    ink: Ink
    grid: GridInk
    sense: Sense
    skeleton: Mask
    fill: Mask
    inside: Mask
    widths: Image
    graph: ChainGraph


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Prepared:
    """One plot of one page, ready for tracing; nothing in it changes.

    ``raster`` is None where exact strokes exist; ``strokes`` is empty where they do not.
    """

    axes: Axes
    raster: Raster | None
    strokes: tuple[Stroke, ...]
