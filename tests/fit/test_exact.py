"""Exact strokes: straight lines stay straight lines, corners stay corners, dense curves shrink or are kept."""

import numpy as np
import pytest

from curvelab.errors import FitError
from curvelab.fit.curve import fit_curve
from curvelab.records.points import FitPoints
from tests.fit.drawn_points import FORMS, inverse_time


def strokes(x, y, sd=1e-8, breaks=()):
    x = np.asarray(x, float)
    return FitPoints(
        log_current=x,
        log_value=np.asarray(y, float),
        sd=np.full(len(x), sd),
        common=np.zeros((len(x), 2, 2)),
        correlation_length=0.0,
        breaks=breaks,
    )


@pytest.mark.parametrize("reverse", [False, True])
@pytest.mark.parametrize(
    ("x", "y"), [([0, 1], [2, 0]), ([1, 1], [2, 0]), ([0, 1], [1, 1]), ([0, 0.5, 0.5, 2.0], [1.0, 0.5, -2.0, -2.0])]
)
def test_few_strokes_are_kept_to_the_digit(x, y, reverse):
    step = -1 if reverse else 1
    (part,) = fit_curve(strokes(x[::step], y[::step])).parts
    np.testing.assert_allclose(np.log10(part.current), x, atol=1e-12)
    np.testing.assert_allclose(np.log10(part.value), y, atol=1e-12)


def test_upright_strokes_repeat_their_current_exactly():
    (part,) = fit_curve(strokes([0, 0.5, 0.5 + 1e-13, 2.0], [1.0, 0.5, -2.0, -2.0 - 1e-13])).parts
    assert part.current[1] == part.current[2]
    assert part.value[2] == part.value[3]
    assert np.isfinite(part.sd_current[1:3]).all()
    assert np.isnan(part.sd_current[3])


def test_a_coarse_polyline_is_the_truth_with_its_corners():
    truth = inverse_time()
    k = np.linspace(0, len(truth.x) - 1, 25).astype(int)
    fit = fit_curve(strokes(truth.x[k], truth.y[k]))
    (part,) = fit.parts
    np.testing.assert_allclose(np.log10(part.value), truth.y[k], atol=1e-12)
    assert [piece.form for piece in fit.pieces] == ["points"]


@pytest.mark.parametrize("form", ["iec inverse", "iec extremely inverse", "fuse", "thermal, drop, floor"])
def test_dense_strokes_are_followed_within_their_accuracy_and_the_chords(form):
    truth = FORMS[form]()
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(truth.x), np.diff(truth.y)))])
    k = np.unique(np.searchsorted(length, np.linspace(0.0, length[-1], 900))).clip(0, len(truth.x) - 1)
    fit = fit_curve(strokes(truth.x[k], truth.y[k]))
    (part,) = fit.parts
    error = truth.normal_error(np.log10(part.current), np.log10(part.value))
    inner = slice(1, -1)
    assert np.abs(error[inner]).max() < 3e-5
    assert np.abs(np.log10(part.current[0]) - truth.x[k[0]]) < 1e-5


def test_strokes_that_run_backwards_are_refused_with_the_place():
    with pytest.raises(FitError, match=r"run backwards by 0\.\d+ decade.*never rises"):
        fit_curve(strokes([0, 1, 0.2, 2], [2, 1.5, 1.4, 0]))


def test_a_gap_between_strokes_stays_a_gap():
    fit = fit_curve(strokes([0, 1, 1.5, 2], [2, 1, 0.5, 0], breaks=(2,)))
    assert [len(part.current) for part in fit.parts] == [2, 2]


def test_strokes_that_step_aside_a_little_are_kept_to_their_end():
    """A page's coordinates are rounded stroke by stroke: what is off by a hundredth of a pixel is no stray."""
    x = np.linspace(0.02, 1.3, 280)
    y = np.log10(0.014 / (10.0 ** (0.02 * x) - 1.0)) + np.where(x > 0.6, 1.6e-5, 0.0)
    (part,) = fit_curve(strokes(x, y)).parts
    np.testing.assert_allclose(np.log10(part.current[[0, -1]]), x[[0, -1]], atol=1e-9)
    np.testing.assert_allclose(np.interp(x, np.log10(part.current), np.log10(part.value)), y, atol=1e-4)
