"""Polygons of rulers: areas and moments against closed formulas and a random sample."""

import numpy as np
import pytest

from curvelab.axes.polygon import box, cut, moments


def test_a_square_has_its_known_moments() -> None:
    area, mean, covariance = moments(box(1.5) + np.array([2.0, -1.0]))
    assert area == pytest.approx(9.0)
    assert mean == pytest.approx([2.0, -1.0])
    assert covariance == pytest.approx(np.eye(2) * 3.0**2 / 12)


def test_a_cut_square_matches_a_sample() -> None:
    normals = np.array([[1.0, 0.5], [1.0, -0.8], [-1.0, 0.1]])
    limits = np.array([0.6, 0.4, 0.7])
    corners = box(1.0)
    for normal, limit in zip(normals, limits, strict=True):
        corners = cut(corners, normal, limit)
    sample = np.random.default_rng(2).uniform(-1, 1, (400_000, 2))
    inside = sample[np.all(sample @ normals.T <= limits, axis=1)]
    area, mean, covariance = moments(corners)
    assert area == pytest.approx(4 * len(inside) / len(sample), rel=0.01)
    assert mean == pytest.approx(inside.mean(axis=0), abs=0.01)
    assert covariance == pytest.approx(np.cov(inside.T), abs=0.005)


def test_nothing_is_left_beyond_a_side() -> None:
    assert moments(cut(box(1.0), np.array([1.0, 0.0]), -2.0))[0] == 0.0
