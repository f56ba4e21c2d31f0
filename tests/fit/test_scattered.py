"""Points as raster traces give them: accuracy, corners, coverage, size of the model."""

import dataclasses

import numpy as np
import pytest
from scipy.interpolate import BSpline

from curvelab.errors import FitError
from curvelab.fit.curve import fit_curve
from curvelab.records.curve import COVERAGE_FACTOR
from tests.fit.drawn_points import FORMS, autoregressive, correlated, drawn
from tests.fit.measured import corner_errors, errors_along

PX = 400.0
SEEDS = range(900, 908)

NOISES = {
    "clean": {"sd_px": 0.05, "noise": lambda rng, n: correlated(rng, n, 1.2)},
    "scan": {"sd_px": 0.15, "strays": 0.005, "noise": lambda rng, n: autoregressive(rng, n, 0.7)},
}


def fits(form, noise, seeds=SEEDS):
    truth = FORMS[form]()
    return truth, [fit_curve(drawn(truth, np.random.default_rng(seed), **NOISES[noise])) for seed in seeds]


@pytest.mark.parametrize(("noise", "limit_px"), [("clean", 0.1), ("scan", 0.45)])
@pytest.mark.parametrize("form", FORMS)
def test_the_fit_stays_near_the_truth_between_corners(form, noise, limit_px):
    truth, results = fits(form, noise, SEEDS[:3])
    for fit in results:
        error, _ = errors_along(truth, fit, px=PX)
        assert len(fit.parts) == 1
        assert np.abs(error).max() * PX < limit_px
        assert np.sqrt(np.mean(error**2)) * PX < 0.3 * limit_px


@pytest.mark.parametrize("form", ["thermal, drop, floor", "breaker"])
def test_corners_are_found_and_placed(form):
    truth, results = fits(form, "clean")
    errors = np.array([corner_errors(truth, fit) for fit in results]) * PX
    assert all(len(fit.kinks) == len(truth.kinks) for fit in results)
    assert np.sqrt(np.mean(errors**2)) < 0.1
    assert errors.max() < 0.3


@pytest.mark.parametrize("form", ["iec inverse", "iec very inverse", "iec extremely inverse", "fuse"])
def test_a_smooth_curve_gets_no_corner(form):
    _, results = fits(form, "clean")
    assert [len(fit.kinks) for fit in results] == [0] * len(results)


def test_stated_intervals_hold_the_truth():
    """Over all forms and both noises together; single curves have few independent stretches."""
    inside, points = 0, 0
    for noise in NOISES:
        for form in FORMS:
            truth, results = fits(form, noise, SEEDS[:3])
            for fit in results:
                error, sd = errors_along(truth, fit, px=PX)
                inside += np.count_nonzero(np.abs(error) <= COVERAGE_FACTOR * sd)
                points += len(error)
    assert 0.92 < inside / points < 0.98


def test_the_scatter_found_replaces_a_wrong_one_stated():
    truth = FORMS["iec very inverse"]()
    honest = fit_curve(drawn(truth, np.random.default_rng(5), sd_px=0.1))
    boasting = fit_curve(drawn(truth, np.random.default_rng(5), sd_px=0.1, stated=0.2))
    assert honest.noise_scale == pytest.approx(1.0, abs=0.1)
    assert boasting.noise_scale == pytest.approx(5.0, rel=0.1)
    assert boasting.budget.total == pytest.approx(honest.budget.total, rel=0.1)


def test_correlated_neighbours_widen_the_uncertainty():
    truth = FORMS["iec very inverse"]()
    white = fit_curve(drawn(truth, np.random.default_rng(6), sd_px=0.1))
    alike = fit_curve(drawn(truth, np.random.default_rng(6), sd_px=0.1, noise=lambda rng, n: correlated(rng, n, 2.0)))
    # Noise smoothed by a Gaussian of 2 points has an inflation of sqrt(4 pi) x 2 = 7.1 against white.
    assert alike.correlation == pytest.approx(7.1, rel=0.35)
    assert white.correlation == pytest.approx(1.0, abs=0.3)
    assert alike.budget.correlation > alike.budget.trace
    assert alike.budget.total > 1.5 * white.budget.total


@pytest.mark.parametrize("form", FORMS)
def test_the_tabulated_form_follows_the_model_and_is_in_order(form):
    _, (fit,) = fits(form, "clean", SEEDS[:1])
    (part,) = fit.parts
    assert fit.numbers <= 60
    assert np.all(np.diff(part.current) >= 0.0)
    assert np.all(np.diff(part.value) <= 0.0)
    x, y = np.log10(part.current), np.log10(part.value)
    u, v = (x - y) / np.sqrt(2.0), (x + y) / np.sqrt(2.0)
    for piece in fit.pieces:
        places = np.linspace(piece.start, piece.end, 3001)
        model = BSpline(piece.knots, piece.coefficients, piece.degree)(places)
        # 0.2 % in value is 8.7e-4 decade; the model is followed far more closely.
        assert np.abs(np.interp(places, u, v) - model).max() < 5e-5


def test_vertical_and_horizontal_stretches_are_exactly_that():
    _, (fit,) = fits("thermal, drop, floor", "clean", SEEDS[:1])
    (part,) = fit.parts
    upright = np.flatnonzero(np.diff(part.current) == 0.0)
    flat = np.flatnonzero(np.diff(part.value) == 0.0)
    assert upright.size
    assert flat.size
    assert np.isnan(part.sd_value[upright[1:]]).all()
    assert np.isnan(part.sd_current[flat[1:]]).all()
    assert np.isfinite(part.sd_current[upright]).all()
    assert np.isfinite(part.sd_value[flat]).all()
    assert np.isfinite(part.sd_common).all()


def test_strays_are_named_and_not_followed():
    truth = FORMS["iec inverse"]()
    points = drawn(truth, np.random.default_rng(7), sd_px=0.05)
    x = points.log_current.copy()
    x[[100, 300, 301, len(x) - 1]] += 0.03
    fit = fit_curve(replaced(points, log_current=x))
    error, _ = errors_along(truth, fit, px=PX)
    assert {100, 300, 301, len(x) - 1} <= set(fit.strays)
    assert len(fit.strays) < 8
    assert np.abs(error).max() * PX < 0.1


def test_a_trace_given_backwards_is_the_same_curve():
    truth = FORMS["breaker"]()
    points = drawn(truth, np.random.default_rng(8))
    back = replaced(points, log_current=points.log_current[::-1], log_value=points.log_value[::-1], sd=points.sd[::-1])
    there, here = fit_curve(points), fit_curve(back)
    np.testing.assert_allclose(there.parts[0].current, here.parts[0].current, rtol=1e-9)


def test_a_rising_curve_is_the_mirror_of_a_falling_one():
    points = drawn(FORMS["fuse"](), np.random.default_rng(9))
    falling = fit_curve(points)
    rising = fit_curve(replaced(points, log_value=-points.log_value), rising=True)
    np.testing.assert_allclose(rising.parts[0].value, 1.0 / falling.parts[0].value, rtol=1e-9)
    np.testing.assert_allclose(rising.parts[0].sd_value, falling.parts[0].sd_value, rtol=1e-9)


def test_the_calibration_is_kept_apart_and_counted():
    points = drawn(FORMS["iec inverse"](), np.random.default_rng(10), sd_px=0.05)
    common = np.tile(np.diag([1e-4**2, 3e-4**2]), (len(points.sd), 1, 1))
    part = fit_curve(replaced(points, common=common)).parts[0]
    steep, flat = 0, -1
    slope = np.diff(np.log(part.value)) / np.diff(np.log(part.current))
    for end, m in ((steep, slope[0]), (flat, slope[-1])):
        expected = np.log(10.0) * np.sqrt((m**2 * 1e-8 + 9e-8) / (1.0 + m**2))
        assert part.sd_common[end] == pytest.approx(expected, rel=0.05)
    total = 1.0 / np.sqrt(1.0 / part.sd_current**2 + 1.0 / part.sd_value**2)
    assert np.all(total > part.sd_common)


@pytest.mark.parametrize(
    ("x", "y", "message"),
    [
        ([0.0], [1.0], r"has 1 point.*At least two"),
        ([0.0, 0.0, 0.0], [1.0, 1.0, 1.0], r"All 3 points lie at 1, 10"),
        ([0.0, np.nan], [1.0, 0.0], r"Point 2 of 2"),
        (np.linspace(0, 1, 300), np.linspace(0, 1, 300), r"The curve rises with the current, from 1 at 1 to 10 at 10"),
        (np.linspace(0, 1, 400), -np.linspace(0, 1, 400) + 0.5 * np.sin(np.linspace(0, 15, 400)), r"never rises"),
        (np.cos(np.linspace(0, 6, 400)), np.sin(np.linspace(0, 6, 400)), r"The curve rises"),
    ],
)
def test_what_is_no_curve_is_refused(x, y, message):
    points = drawn(FORMS["iec inverse"](), np.random.default_rng(0))
    n = len(x)
    bad = replaced(points, log_current=x, log_value=y, sd=np.full(n, 1e-4), common=np.zeros((n, 2, 2)))
    with pytest.raises(FitError, match=message):
        fit_curve(bad)


def replaced(points, **changes):
    return dataclasses.replace(points, **changes)


@pytest.mark.parametrize("form", FORMS)
@pytest.mark.parametrize(("count", "off_px"), [(20, 3.0), (60, 20.0)])
def test_a_run_of_points_on_something_else_is_not_followed(form, count, off_px):
    truth = FORMS[form]()
    points = drawn(truth, np.random.default_rng(11), noise=lambda rng, n: correlated(rng, n, 1.2))
    x, y = points.log_current.copy(), points.log_value.copy()
    run = slice(250, 250 + count)
    x[run] += off_px / PX / np.sqrt(2.0)
    y[run] += off_px / PX / np.sqrt(2.0)
    fit = fit_curve(replaced(points, log_current=x, log_value=y))
    error, _ = errors_along(truth, fit, px=PX)
    assert set(range(250, 250 + count)) <= set(fit.strays)
    assert len(fit.strays) < count + 25
    assert len(fit.kinks) == len(truth.kinks)
    assert np.abs(error).max() * PX < 0.15
