"""How lines lean, with curves among them that are as straight as lines."""

import numpy as np

from curvelab.axes.fan import fanned, parallel


def test_more_curves_than_lines_do_not_lean_the_lines() -> None:
    lean = np.array([0.01] * 6 + [0.09, 0.095, 0.1, 0.035, 0.08, 0.085, 0.092])
    length = np.array([1800.0] * 6 + [1000.0] * 7)
    for fan in (parallel(lean, length, 0.6), fanned(np.linspace(0, 500, 13), lean, length, 0.6)):
        assert np.abs(fan.at(np.array([0.0, 500.0])) - 0.01).max() < 1e-9
        assert fan.members.tolist() == [True] * 6 + [False] * 7


def test_a_page_seen_at_an_angle_fans_its_lines_out() -> None:
    at = np.linspace(-600.0, 600.0, 20)
    lean = 0.004 + 5e-5 * at
    lean[[3, 11]] = 0.1
    fan = fanned(at, lean, np.full(20, 1500.0), 0.6)
    assert abs(fan.slope - 0.004) < 1e-6
    assert abs(fan.growth - 5e-5) < 1e-8
    assert not fan.members[[3, 11]].any()


def test_no_lines_lean_nowhere() -> None:
    nothing = np.zeros(0)
    assert fanned(nothing, nothing, nothing, 0.6).at(np.array([3.0])) == 0.0
