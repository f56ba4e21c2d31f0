"""Maps from a place on the clean sheet to the place on the sheet as scanned."""

from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

Points = NDArray[np.float64]


class PlaceMap(Protocol):
    """An exact, invertible map of places (n, 2)."""

    def forward(self, points: Points) -> Points:
        """Clean places to scanned places."""
        ...

    def inverse(self, points: Points) -> Points:
        """Scanned places to clean places."""
        ...

    def described(self) -> dict[str, object]:
        """Name and numbers of the map, for the truth file."""
        ...


@dataclass(frozen=True, slots=True)
class SamePlace:
    """Nothing moved."""

    def forward(self, points: Points) -> Points:
        """The places themselves."""
        return points

    def inverse(self, points: Points) -> Points:
        """The places themselves."""
        return points

    def described(self) -> dict[str, object]:
        """Name of the map."""
        return {"kind": "same"}


SAME_PLACE = SamePlace()


@dataclass(frozen=True, slots=True, eq=False)
class Affine:
    """Scanned place = matrix (2, 3) @ (x, y, 1): skew, shear and unequal feed."""

    matrix: NDArray[np.float64]

    def forward(self, points: Points) -> Points:
        """Clean places to scanned places."""
        return _turned(points, self.matrix[:, :2]) + self.matrix[:, 2]

    def inverse(self, points: Points) -> Points:
        """Scanned places to clean places."""
        return _turned(points - self.matrix[:, 2], np.linalg.inv(self.matrix[:, :2]))

    def described(self) -> dict[str, object]:
        """Name of the map and its matrix."""
        return {"kind": "affine", "matrix": self.matrix.tolist()}


def _turned(points: Points, square: NDArray[np.float64]) -> Points:
    """Points times a square; written out, as a matrix product this thin is slow for a whole page of pixels."""
    x, y = points[:, 0], points[:, 1]
    return np.stack([square[0, 0] * x + square[0, 1] * y, square[1, 0] * x + square[1, 1] * y], axis=1)


def scan_skew(size_px: tuple[int, int], angle_deg: float, stretch: tuple[float, float]) -> Affine:
    """The page turned about its middle, clockwise on the sheet for a positive angle, and stretched across and down."""
    centre = (np.array(size_px, dtype=float) - 1.0) / 2.0
    turn = np.deg2rad(angle_deg)
    square = np.array([[np.cos(turn), -np.sin(turn)], [np.sin(turn), np.cos(turn)]]) @ np.diag(stretch)
    return Affine(np.column_stack([square, centre - square @ centre]))
