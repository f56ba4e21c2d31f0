"""The practice of today, simulated: a careful person who clicks two places an axis and 25 a curve, 1 px off."""

import numpy as np

from demo_curves.drawing.geometry import at_length, lengths
from tests.drawn import DrawnSheet, score

CLICKS = 25
SCATTER_PX = 1.0


def person_rms(sheet: DrawnSheet, seed: int = 1) -> float:
    """Root mean square distance normal to the lines, in units of the sheet, of values clicked by hand.

    The axes are straight lines through two clicked marks each, so the person is spared the page's tilt and curl; the
    curve is straight in log-log between clicks.
    """
    rng = np.random.default_rng(seed)
    plot = sheet.truth.plots[0]
    per_px = 1.0 if sheet.truth.unit == "px" else 72.0 / sheet.truth.dpi
    left, top, right, bottom = plot.frame
    corners = np.array([[left, bottom], [right, top]])
    clicked = corners + rng.normal(0.0, SCATTER_PX * per_px, corners.shape)
    stretch = (corners[1] - corners[0]) / (clicked[1] - clicked[0])
    errors = []
    for curve in plot.curves:
        flat = plot.matrix[:, :2] @ np.log10(np.stack([curve.current, curve.value])) + plot.matrix[:, 2:]
        points = flat.T
        places = at_length(points, np.linspace(0.0, lengths(points)[-1], CLICKS))
        places = places + rng.normal(0.0, SCATTER_PX * per_px, places.shape)
        read = corners[0] + (places - clicked[0]) * stretch
        logs = np.linalg.solve(plot.matrix[:, :2], (read - plot.matrix[:, 2]).T)
        errors.append(score(plot, curve.design.name, 10.0 ** logs[0], 10.0 ** logs[1]).rms)
    return float(np.sqrt(np.mean(np.square(errors))))
