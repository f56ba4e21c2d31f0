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


@dataclass(frozen=True, slots=True, eq=False)
class Photo:
    """A curled sheet seen at an angle: curl = (across, down), then a projective matrix (3, 3).

    Curl moves places down by ``curl[0]`` px times a smooth wave along x, then across by ``curl[1]`` px times one along
    y; both are shears, so that the inverse is exact. ``size_px`` is what the waves are measured in.
    """

    matrix: NDArray[np.float64]
    curl: tuple[float, float]
    phase: tuple[float, float]
    size_px: tuple[int, int]

    def forward(self, points: Points) -> Points:
        """Clean places to photographed places."""
        x, y = points[:, 0], points[:, 1]
        y = y + self.curl[0] * np.sin(np.pi * x / self.size_px[0] + self.phase[0])
        x = x + self.curl[1] * np.sin(np.pi * y / self.size_px[1] + self.phase[1])
        return _projected(np.stack([x, y], axis=1), self.matrix)

    def inverse(self, points: Points) -> Points:
        """Photographed places to clean places."""
        flat = _projected(points, np.linalg.inv(self.matrix))
        x, y = flat[:, 0], flat[:, 1]
        x = x - self.curl[1] * np.sin(np.pi * y / self.size_px[1] + self.phase[1])
        y = y - self.curl[0] * np.sin(np.pi * x / self.size_px[0] + self.phase[0])
        return np.stack([x, y], axis=1)

    def described(self) -> dict[str, object]:
        """Name of the map and its numbers."""
        return {"kind": "photo", "matrix": self.matrix.tolist(), "curl": self.curl, "phase": self.phase}


def _projected(points: Points, matrix: NDArray[np.float64]) -> Points:
    below = matrix[2, 0] * points[:, 0] + matrix[2, 1] * points[:, 1] + matrix[2, 2]
    return (_turned(points, matrix[:2, :2]) + matrix[:2, 2]) / below[:, None]


def keystone(size_px: tuple[int, int], angle_deg: float, lean: tuple[float, float]) -> NDArray[np.float64]:
    """Matrix of a page turned about its middle and seen at an angle.

    ``lean`` is the share by which the scale falls from the page's middle to its right edge and to its bottom edge.
    """
    centre = (np.array(size_px, dtype=float) - 1.0) / 2.0
    turn = np.deg2rad(angle_deg)
    to_middle = np.array([[1, 0, -centre[0]], [0, 1, -centre[1]], [0, 0, 1]])
    turned = np.array([[np.cos(turn), -np.sin(turn), 0], [np.sin(turn), np.cos(turn), 0], [0, 0, 1]])
    seen = np.array([[1, 0, 0], [0, 1, 0], [lean[0] / centre[0], lean[1] / centre[1], 1]])
    matrix: NDArray[np.float64] = np.linalg.inv(to_middle) @ seen @ turned @ to_middle
    return matrix
