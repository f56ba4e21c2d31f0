"""Where a map has the grid lines: their paths across an image, and where they cross each other.

An image is looked at with the lines of one axis running down its rows (`Look`); places are (column, row) of the image
as it is, and a path gives the place across for places along.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Bytes, Floats
from curvelab.records.axes import PlaneMap

PATH_STEPS = 6


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Look:
    """An image with the lines of one axis running down its rows.

    ``axis`` is 0 for the current axis's lines, 1 for the value axis's; ``across`` is the index, in (column, row), of
    the coordinate that tells the lines apart. ``image`` has its columns across.
    """

    axis: int
    across: int
    image: Bytes

    def places(self, across: Floats, along: Floats) -> Floats:
        """(column, row) pairs, shape (..., 2)."""
        pair = (across, along) if self.across == 0 else (along, across)
        return np.stack(np.broadcast_arrays(*pair), axis=-1)

    def paths(self, plane: PlaneMap, scaled: Floats, along: Floats) -> Floats:
        """Places across, shape (lines, n), of the lines at places along, shape (n,) or (lines, n)."""
        along = np.broadcast_to(along, (len(scaled), along.shape[-1]))
        across = np.full(along.shape, plane.centre[self.across])
        for _ in range(PATH_STEPS):
            places = self.places(across, along).reshape(-1, 2)
            off = scaled[:, None] - plane.scaled(places)[:, self.axis].reshape(along.shape)
            step = off / plane.jacobian(places)[:, self.axis, self.across].reshape(along.shape)
            across = across + step
            if step.size == 0 or np.abs(step).max() < 1e-6:
                break
        return across

    def crossings(self, plane: PlaneMap, scaled: Floats, others: Floats) -> Floats:
        """Places along, shape (lines, others), where lines cross those of the other axis."""
        pairs = np.stack(np.meshgrid(scaled, others, indexing="ij"), axis=-1).reshape(-1, 2)
        places = plane.places(pairs if self.axis == 0 else pairs[:, ::-1])
        along: Floats = places[:, 1 - self.across].reshape(len(scaled), len(others))
        return along
