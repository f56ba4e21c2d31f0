"""The path of a line over a page: labels and text in its way, dashes that kink at crossings, lines that only cross."""

import numpy as np
import pytest

from curvelab.errors import TraceError
from curvelab.trace.guided import Guide, trace_guided
from curvelab.trace.prepare import prepare
from demo_curves.drawing.geometry import at_length, lengths
from tests.trace.pages import away_from, axes_without_grid, ink_of, page

SHAPE = (420, 560)


def dashed(line: np.ndarray, width: float, dash: float = 16.0, pause: float = 8.0) -> np.ndarray:
    ink = np.zeros(SHAPE)
    for start in np.arange(0.0, lengths(line)[-1] - dash, dash + pause):
        points = at_length(line, np.linspace(start, start + dash, 9))
        ink = np.maximum(ink, ink_of(points, width, SHAPE))
    return ink


def trace_of(ink: np.ndarray, *through: tuple[float, float]):
    sheet = page(ink, 0.02)
    return trace_guided(prepare(sheet, axes_without_grid(sheet)), Guide(through=through))


def test_two_guides_on_crossing_lines_are_refused() -> None:
    first, second = np.array([[60.0, 80.0], [500.0, 330.0]]), np.array([[250.0, 40.0], [320.0, 390.0]])
    ink = np.maximum(ink_of(first, 3.0, SHAPE), ink_of(second, 3.0, SHAPE))
    with pytest.raises(TraceError, match="different lines"):
        trace_of(ink, (100.0, 102.7), (312.0, 350.0))


def test_guides_that_turn_back_are_refused() -> None:
    # joined at the top, as the edges of a band are: one stroke, but no time-current line
    line = np.array([[60.0, 330.0], [250.0, 100.0], [500.0, 330.0]])
    with pytest.raises(TraceError, match="turns back along neither axis"):
        trace_of(ink_of(line, 3.0, SHAPE), (100.0, 281.6), (420.0, 256.4))


def test_a_dashed_line_that_kinks_under_another_is_followed_between_its_guides() -> None:
    kinked = np.array([[60.0, 60.0], [250.0, 190.0], [252.0, 390.0]])
    other = np.array([[150.0, 40.0], [340.0, 330.0], [345.0, 345.0]])
    ink = np.maximum(dashed(kinked, 2.5), ink_of(other, 4.0, SHAPE))
    trace, _ = trace_of(ink, (98.0, 86.0), (251.6, 350.0))
    assert away_from(trace.places, kinked).max() < 3.0
    assert trace.places[:, 1].max() > 370


def test_lettering_in_the_way_is_no_part_of_the_line() -> None:
    line = np.array([[60.0, 80.0], [500.0, 330.0]])
    ink = ink_of(line, 3.0, SHAPE)
    ink[170:230, 230:310] = 0.0
    circle = np.radians(np.linspace(0, 360, 25))
    for x in (250.0, 270.0, 290.0):
        ring = np.stack([x + 7 * np.cos(circle), 200 + 11 * np.sin(circle)], axis=1)
        ink = np.maximum(ink, ink_of(ring, 2.5, SHAPE))
    trace, _ = trace_of(ink, (100.0, 103.0))
    assert away_from(trace.places, line).max() < 0.5
    assert trace.places[:, 0].max() > 490
    assert len(trace.gaps) == 1
