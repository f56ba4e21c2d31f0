"""Polylines: vertices that repeat, as plotting programs write them, give no place twice."""

import numpy as np

from curvelab.trace.polyline import filled_in


def test_every_vertex_once_and_no_step_longer_than_the_spacing() -> None:
    points = np.array([[0.0, 0.0], [0.0, 0.0], [3.0, 4.0], [3.0, 4.0], [3.0, 10.0], [3.0, 10.0]])
    dense = filled_in(points, 2.0)
    steps = np.hypot(*np.diff(dense, axis=0).T)
    assert (steps > 0.0).all()
    assert steps.max() <= 2.0
    assert steps.sum() == 11.0
    for corner in np.unique(points, axis=0):
        assert (dense == corner).all(axis=1).sum() == 1
