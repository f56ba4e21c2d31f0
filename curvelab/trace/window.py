"""The plot's own rectangle: where its frame lies on a sheet that may be skewed."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes

GRID_IS_FRAME = 0.03
"""An outermost grid line within this share of the span from the frame's middle is the frame."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PlotWindow:
    """Scaled (current, value) between which the plot lies."""

    axes: Axes
    low: Floats
    high: Floats

    def depth(self, places: Floats) -> Floats:
        """Distance of places from the frame in the sheet's unit, positive inside, shape (n,)."""
        scaled = self.axes.map.scaled(places)
        slope = np.linalg.norm(self.axes.map.jacobian(places), axis=2)
        room = np.minimum(scaled - self.low, self.high - scaled) / slope
        depth: Floats = room.min(axis=1)
        return depth

    def corners(self) -> Floats:
        """Places of the plot's four corners, in order round it."""
        (a, c), (b, d) = self.low, self.high
        return self.axes.map.places(np.array([[a, c], [b, c], [b, d], [a, d]]))

    def holds(self, places: Floats, slack: float) -> NDArray[np.bool_]:
        """Which places lie inside, or outside by no more than ``slack``."""
        return self.depth(places) >= -slack


def plot_window(axes: Axes) -> PlotWindow:
    """The plot's rectangle in scaled values, from the frame and the outermost grid lines."""
    x0, y0, x1, y1 = axes.frame
    xm, ym = 0.5 * (x0 + x1), 0.5 * (y0 + y1)
    sides = axes.map.scaled(np.array([[x0, ym], [x1, ym], [xm, y0], [xm, y1]]))
    low, high = np.empty(2), np.empty(2)
    for k, axis in enumerate((axes.current, axes.value)):
        lines = [line.value for line in axes.grid if line.axis == ("current", "value")[k]]
        scaled = np.sort(axis.scaled(lines)) if lines else np.zeros(0)
        bounds = np.sort(sides[:, k])[[0, -1]]
        span = bounds[1] - bounds[0]
        for grid_line, side in zip(scaled[[0, -1]] if scaled.size else (), (0, 1), strict=False):
            if abs(grid_line - bounds[side]) < GRID_IS_FRAME * span:
                bounds[side] = grid_line
        low[k], high[k] = bounds
    return PlotWindow(axes=axes, low=low, high=high)
