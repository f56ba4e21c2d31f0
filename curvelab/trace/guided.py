"""Trace one line from guide places."""

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.trace import Trace
from curvelab.records.warning import ReadingWarning
from curvelab.trace.guide import Guide
from curvelab.trace.prepared import Prepared
from curvelab.trace.raster import trace_raster
from curvelab.trace.select import written
from curvelab.trace.vector import trace_strokes
from curvelab.trace.window import plot_window

__all__ = ["Guide", "trace_guided"]


def trace_guided(prepared: Prepared, guide: Guide) -> tuple[Trace, tuple[ReadingWarning, ...]]:
    """Follow the line a guide means, from end to end within the plot, sub-pixel.

    Parameters
    ----------
    prepared : Prepared
    guide : Guide
        Places within about 4 px of the line; one is enough where the line is unambiguous.

    Raises
    ------
    TraceError
        A place lies off the plot, no line is there, the places lie on different lines, or no line has the colour.
    """
    _check_places(prepared, guide)
    if prepared.raster is None:
        return trace_strokes(prepared, guide)
    return trace_raster(prepared, prepared.raster, guide)


def _check_places(prepared: Prepared, guide: Guide) -> None:
    if not guide.through:
        raise TraceError("A curve has no guide place", "At least one place on the line is expected", "Add `through`")
    window = plot_window(prepared.axes)
    # a hand-set place may lie just outside: 8 px, or 3 pt of exact strokes
    slack = 8.0 * prepared.raster.pixels.size_in_places if prepared.raster else 3.0
    for place in guide.through:
        depth = float(window.depth(np.array([place]))[0])
        if not depth >= -slack:
            x0, y0, x1, y1 = prepared.axes.frame
            raise TraceError(
                f"Guide place {written(place)} lies off the plot",
                f"The plot reaches from {written((x0, y0))} to {written((x1, y1))}",
                "Set the guide place on the line",
            )
