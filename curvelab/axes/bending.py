"""Pages that were bent, on which too few lines show how."""

import numpy as np

from curvelab.axes.planefit import RICHER
from curvelab.records.axes import Axes
from curvelab.records.warning import ReadingWarning

BENT = 3.0
"""Pixels by which a map leaves its own straight part at the frame's corners, from which on the page is bent."""


def bending_doubts(axes: Axes, pixel: float) -> tuple[ReadingWarning, ...]:
    """A warning where a page is bent and an axis has fewer lines than it takes to follow that.

    Parameters
    ----------
    axes : Axes
    pixel : float
        One pixel in the sheet's unit.
    """
    enough = max(model.lines for model in RICHER)
    counts = {name: len({line.value for line in axes.grid if line.axis == name}) for name in ("current", "value")}
    few = [name for name, count in counts.items() if count < enough]
    if not few or bend(axes) < BENT * pixel:
        return ()
    x0, y0, x1, y1 = axes.frame
    text = (
        f"The page is bent or was seen at an angle, and only {min(counts.values())} lines of one direction show how: "
        "values may be off by more than the interval says; give a flat scan, or marks all over the plot."
    )
    return (ReadingWarning(code="page-bent", text=text, at=(0.5 * (x0 + x1), 0.5 * (y0 + y1))),)


def bend(axes: Axes) -> float:
    """How far the map leaves its own tangent at the frame's corners, in the sheet's unit."""
    x0, y0, x1, y1 = axes.frame
    middle = np.array([[0.5 * (x0 + x1), 0.5 * (y0 + y1)]])
    corners = np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]])
    tangent = axes.map.jacobian(middle)[0]
    straight = axes.map.scaled(middle) + (corners - middle) @ tangent.T
    off = np.linalg.solve(tangent, (axes.map.scaled(corners) - straight).T)
    return float(np.abs(off).max())
