"""The sense of a line: neither its current nor its value turns back anywhere along a time-current curve."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.records.sheet import Pixels


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Sense:
    """How far a place lies along a line.

    Operating time falls as the current rises; let-through energy and peak current rise with it.
    """

    axes: Axes
    pixels: Pixels
    origin: tuple[int, int]

    def progress(self, columns_rows: Floats) -> Floats:
        """Distance in px along current and value of places in the prepared image, both rising along a line, (n, 2)."""
        places = self.pixels.places(columns_rows + np.array(self.origin))
        x0, y0, x1, y1 = self.axes.frame
        slope = np.linalg.norm(self.axes.map.jacobian(np.array([[0.5 * (x0 + x1), 0.5 * (y0 + y1)]]))[0], axis=1)
        falls = self.axes.value.quantity == "time"
        signs = np.array([1.0, -1.0 if falls else 1.0])
        progress: Floats = signs * self.axes.map.scaled(places) / (slope * self.pixels.size_in_places)
        return progress
