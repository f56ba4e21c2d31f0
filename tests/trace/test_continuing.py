"""Continuations that must be earned: dashes beside dashes, kinks at crossings and behind labels, curves on the grid."""

from dataclasses import replace

import numpy as np

from curvelab.records.axes import GridLine
from curvelab.trace.gridmodel import grid_lines
from curvelab.trace.profile import stroke_profile
from tests.trace.pages import away_from, axes_without_grid, ink_of, page
from tests.trace.test_path import SHAPE, dashed, trace_of


def test_short_dashes_are_not_left_for_the_longer_ones_beside_them() -> None:
    line = np.array([[60.0, 60.0], [480.0, 370.0]])
    other = line + np.array([14.0, -8.0])
    ink = np.maximum(dashed(line, 3.0, dash=9.0, pause=8.0), dashed(other, 3.0, dash=18.0, pause=6.0))
    trace, doubts = trace_of(ink, (94.0, 85.0), (430.0, 333.0))
    assert away_from(trace.places, line).max() < 1.0
    assert not doubts
    assert trace.places[0, 0] < 80
    assert trace.places[-1, 0] > 460


def test_a_kink_inside_a_crossing_is_followed_between_guides_and_not_cut_short() -> None:
    kinked = np.array([[60.0, 60.0], [280.0, 220.0], [283.0, 395.0]])
    other = np.array([[225.0, 40.0], [292.0, 240.0], [330.0, 395.0]])
    ink = np.maximum(ink_of(kinked, 3.5, SHAPE), ink_of(other, 3.5, SHAPE))
    trace, _ = trace_of(ink, (98.0, 87.6), (282.4, 360.0))
    assert away_from(trace.places, kinked).max() < 3.0
    assert np.median(away_from(trace.places, kinked)) < 0.1


def test_a_line_that_kinks_soon_behind_its_label_is_followed() -> None:
    line = np.array([[60.0, 60.0], [300.0, 230.0], [302.0, 395.0]])
    ink = ink_of(line, 3.0, SHAPE)
    ink[180:217, 215:300] = 0.0
    trace, _ = trace_of(ink, (98.0, 87.0))
    assert trace.places[-1, 1] > 385
    assert away_from(trace.places, line).max() < 1.5
    assert len(trace.gaps) == 1


def test_a_kink_unseen_under_a_label_is_told() -> None:
    line = np.array([[60.0, 60.0], [260.0, 200.0], [262.0, 395.0]])
    ink = ink_of(line, 3.0, SHAPE)
    ink[180:220, 215:300] = 0.0
    trace, doubts = trace_of(ink, (98.0, 86.5))
    assert trace.places[-1, 1] > 385
    assert [doubt.code for doubt in doubts] == ["trace-doubt"]


def test_an_upright_curve_among_the_grid_lines_stays_a_curve() -> None:
    sheet = page(np.zeros(SHAPE))
    upright = np.array([[100.0, 20.0], [100.0, 300.0]])

    def line(value: float) -> GridLine:
        return GridLine(axis="current", value=value, points=upright, sd=0.05, width=2.0, darkness=1.0)

    values = (1.0, 1.5, 1.9, 2.0, 8.0, 10.0, 15.0, 20.0, 50.0)
    axes = replace(axes_without_grid(sheet), grid=tuple(map(line, values)))
    assert [kept.value for kept in grid_lines(axes)] == [1.0, 1.5, 2.0, 8.0, 10.0, 15.0, 20.0, 50.0]


def test_a_profile_is_the_mean_of_the_stroke_over_a_pixel() -> None:
    # a sharp stroke 3 px wide at 30 degrees, averaged over 400 x 400 places of each pixel
    profile = stroke_profile(3.0, 0.05, 6.0)
    angle = np.radians(30.0)
    inside = (np.arange(400) + 0.5) / 400 - 0.5
    across = inside[None, :] * np.cos(angle) + inside[:, None] * np.sin(angle)
    for distance in (0.0, 1.0, 1.4, 1.9, 2.3):
        mean = np.mean(np.abs(across + distance) <= 1.5)
        assert abs(float(profile.value(np.array([distance]), np.array([angle]))[0]) - mean) < 5e-3
