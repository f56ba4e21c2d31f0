"""Where grid lines stand: log10 exactly, in the printed unit."""

import math

import numpy as np

from curvelab.axes.pattern import MAIN, finer_lines, linear_lines, linear_steps, log_lines
from curvelab.records.axes import Axis, Mark


def axis(**changes: object) -> Axis:
    fields = {"quantity": "current", "scale": "log", "unit": "A", "factor": 1.0, "direction": "x", "marks": ()}
    return Axis(**(fields | changes))  # type: ignore[arg-type]


def test_two_decades_have_nineteen_lines_at_their_logarithms() -> None:
    lines = log_lines(axis(), (0.0, 2.0), MAIN)
    assert list(lines) == [math.log10(k) + d for d in (0, 1) for k in range(1, 10)] + [2.0]


def test_lines_stand_at_round_numbers_of_what_is_printed() -> None:
    """32 times what is printed: the lines stand at 32, 64, 96 ..."""
    lines = 10 ** log_lines(axis(factor=32.0), (1.5, 2.5), MAIN)
    assert np.allclose(lines, 32.0 * np.arange(1, 10))


def test_seconds_that_go_on_in_minutes_have_lines_of_both() -> None:
    time = axis(quantity="time", unit="s", marks=(Mark(at=(0, 0), value=1, unit="min"),))
    lines = np.round(10 ** log_lines(time, (1.0, 2.8), MAIN), 6)
    assert set(range(10, 100, 10)) <= set(lines)
    assert {60, 120, 180, 240, 300, 360, 420, 480, 540} <= set(lines)
    assert len(set(lines)) == len(lines)


def test_the_finest_paper_holds_every_coarser_one() -> None:
    finest = finer_lines(axis(), (0.0, 1.0))
    for value in (1.1, 1.5, 1.9, 2.2, 2.5, 3.5, 4.8, 5.5, 9.5):
        assert np.abs(finest - math.log10(value)).min() < 1e-12


def test_linear_lines_and_steps() -> None:
    assert list(linear_lines(axis(scale="linear", unit="kA"), (0.0, 1000.0), 0.25)) == [0, 250, 500, 750, 1000]
    assert linear_steps(axis(scale="linear"), 100.0, 5.0) == [100, 50, 25, 20, 10, 5]
