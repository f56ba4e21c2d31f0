"""Pages that were bent or seen at an angle: the map follows their lines, as far as these show how."""

import numpy as np

from curvelab.records.axes import Axes
from curvelab.records.warning import ReadingWarning

BENT = 3.0
"""Pixels by which a map leaves its own straight part at the frame's corners, from which on the page is bent."""


def bending_doubts(axes: Axes, pixel: float) -> tuple[ReadingWarning, ...]:
    """A warning where a page is bent.

    Parameters
    ----------
    axes : Axes
    pixel : float
        One pixel in the sheet's unit.
    """
    off = bend(axes)
    if off < BENT * pixel:
        return ()
    lines = min(len({line.value for line in axes.grid if line.axis == name}) for name in ("current", "value"))
    x0, y0, x1, y1 = axes.frame
    text = (
        f"The page is bent or was seen at an angle, by {off / pixel:.0f} pixels at a corner; {lines} lines of one "
        "direction show how, and between them values may be off by more than the interval says: give a flat scan."
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
