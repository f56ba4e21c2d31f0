"""Affine maps of the plane as arrays of shape (2, 3): place = A @ (x, y, 1)."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from curvelab.records.arrays import Floats

IDENTITY: Floats = np.array([[1.0, 0.0, 0.0], [0.0, 1.0, 0.0]])
IDENTITY.flags.writeable = False


def from_six(six: Sequence[float]) -> Floats:
    """The map written (a b c d e f) in PDF and SVG: x' = a x + c y + e, y' = b x + d y + f."""
    a, b, c, d, e, f = six
    return np.array([[a, c, e], [b, d, f]], dtype=np.float64)


def compose(outer: Floats, inner: Floats) -> Floats:
    """The map that applies ``inner`` first, then ``outer``."""
    result: Floats = outer[:, :2] @ inner
    result[:, 2] += outer[:, 2]
    return result


def apply(matrix: Floats, points: ArrayLike) -> Floats:
    """Map points, shape (n, 2) -> (n, 2)."""
    result: Floats = np.asarray(points, dtype=np.float64) @ matrix[:, :2].T + matrix[:, 2]
    return result


def scale_of(matrix: Floats) -> float:
    """Length scale of the map: the geometric mean over both directions."""
    return float(np.sqrt(abs(matrix[0, 0] * matrix[1, 1] - matrix[0, 1] * matrix[1, 0])))
