"""Residuals of a reading, in the sheet's unit: of grid lines about the axes, and of places about their curve."""

from collections.abc import Sequence

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, GridLine
from curvelab.records.reading import ReadCurve


def grid_residuals(axes: Axes, lines: Sequence[GridLine]) -> Floats:
    """How far each grid line lies from where the axes put its value: mean of its places, shape (n,).

    Along the direction in which the value rises.
    """
    return np.array([_grid_residual(axes, line) for line in lines])


def _grid_residual(axes: Axes, line: GridLine) -> float:
    index, axis = (0, axes.current) if line.axis == "current" else (1, axes.value)
    off = axes.map.scaled(line.points)[:, index] - float(axis.scaled(line.value))
    slope = np.hypot(*axes.map.jacobian(line.points)[:, index, :].T)
    return float(np.mean(off / slope))


def curve_distances(axes: Axes, read: ReadCurve) -> Floats:
    """Signed distance on the sheet of each of a line's places from its tabulated curve, shape (n,).

    Positive to the left of the curve's course from low to high current, as seen on the sheet.
    """
    if read.trace is None:
        return np.empty(0)
    parts = [axes.places(part.current, part.value) for part in read.curve.parts]
    starts, ends = np.concatenate([part[:-1] for part in parts]), np.concatenate([part[1:] for part in parts])
    return np.array([_distance(place, starts, ends) for place in read.trace.places])


def _distance(place: Floats, starts: Floats, ends: Floats) -> float:
    along = ends - starts
    squared = np.maximum(np.einsum("ij,ij->i", along, along), 1e-300)
    offset = place - starts
    share = np.clip(np.einsum("ij,ij->i", offset, along) / squared, 0.0, 1.0)
    away = offset - share[:, None] * along
    nearest = int(np.argmin(np.einsum("ij,ij->i", away, away)))
    side = along[nearest, 0] * away[nearest, 1] - along[nearest, 1] * away[nearest, 0]
    return float(np.copysign(np.hypot(*away[nearest]), -side))
