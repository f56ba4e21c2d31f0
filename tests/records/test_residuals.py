"""Residuals against shifts put in by hand."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.records.residuals import curve_distances, grid_residuals
from tests.reading.example import FAST, axes, read_curve


def test_a_grid_line_moved_by_half_a_pixel_says_so():
    made = axes()
    line = made.grid[0]
    truth = made.places([line.value, line.value], [1.0, 10.0])
    moved = replace(line, points=truth + np.array([0.5, 0.0]))
    assert grid_residuals(made, [replace(line, points=truth), moved]) == pytest.approx([0.0, 0.5], abs=1e-9)


def test_places_off_their_curve_are_so_far_away_on_the_side_they_are():
    made, read = axes(), read_curve("fast", FAST)
    assert np.abs(curve_distances(made, read)).max() < 1e-9
    # The curve falls to the right: up and to the right is its left side.
    trace = replace(read.trace, places=read.trace.places + np.array([0.3, -0.4]))
    assert curve_distances(made, replace(read, trace=trace)).min() > 0.0
    higher = replace(read.trace, places=read.trace.places + np.array([0.0, -0.25]))
    level = curve_distances(made, replace(read, trace=higher))
    assert level[-1] == pytest.approx(0.25)
