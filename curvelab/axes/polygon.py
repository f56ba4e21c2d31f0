"""Convex polygons cut by half-planes, with the mean and covariance of a point anywhere inside with equal chance."""

import numpy as np

from curvelab.records.arrays import Floats


def box(half: float) -> Floats:
    """A square about the origin, corners in order."""
    return half * np.array([[-1.0, -1.0], [1.0, -1.0], [1.0, 1.0], [-1.0, 1.0]])


def cut(corners: Floats, normal: Floats, limit: float) -> Floats:
    """The part of a convex polygon where normal . point <= limit; no corners where nothing is left."""
    excess = corners @ normal - limit
    if len(corners) == 0 or excess.max() <= 0:
        return corners
    kept = []
    for k, (corner, over) in enumerate(zip(corners, excess, strict=True)):
        following, after = corners[(k + 1) % len(corners)], excess[(k + 1) % len(corners)]
        if over <= 0:
            kept.append(corner)
        if (over < 0 < after) or (after < 0 < over):
            kept.append(corner + (following - corner) * (over / (over - after)))
    return np.array(kept).reshape(-1, 2)


def moments(corners: Floats) -> tuple[float, Floats, Floats]:
    """Area, centroid (2,) and covariance (2, 2) of a uniform distribution over a convex polygon.

    Fan of triangles; a triangle's second moment about the origin is area / 12 times (sum of v v' + s s'), s the sum of
    its corners.
    """
    if len(corners) < 3:
        return 0.0, np.zeros(2), np.zeros((2, 2))
    origin = corners.mean(axis=0)
    first, second = corners - origin, np.roll(corners, -1, axis=0) - origin
    areas = 0.5 * np.abs(first[:, 0] * second[:, 1] - first[:, 1] * second[:, 0])
    total = float(areas.sum())
    if total <= 0:
        return 0.0, origin, np.zeros((2, 2))
    sums = first + second
    mean = (areas / total) @ sums / 3
    outer = sum(part[:, :, None] * part[:, None, :] for part in (first, second, sums))
    second_moment = np.tensordot(areas / total, outer, axes=1) / 12
    return total, origin + mean, second_moment - np.outer(mean, mean)
