"""Whatever points come in, what comes out is monotone, or refused."""

import contextlib

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from curvelab.errors import FitError
from curvelab.fit.curve import fit_curve
from curvelab.records.points import FitPoints


def points_of(x, y, *, sd, correlation_length, blur=0.0, breaks=()):
    return FitPoints(
        log_current=x,
        log_value=y,
        sd=np.full(len(x), sd),
        common=np.zeros((len(x), 2, 2)),
        correlation_length=correlation_length,
        blur=blur,
        breaks=breaks,
    )


def assert_monotone(fit, rising):
    assert fit.parts
    for part in fit.parts:
        assert np.all(np.isfinite(part.current))
        assert np.all(np.isfinite(part.value))
        assert np.all(np.diff(part.current) >= 0.0)
        assert np.all(np.diff(part.value) * (1.0 if rising else -1.0) >= 0.0)
        assert np.all(np.isfinite(part.sd_current) | np.isfinite(part.sd_value))


@st.composite
def staircases(draw):
    """A random monotone polyline sampled with noise, strays, gaps, any direction."""
    seed = draw(st.integers(0, 2**32 - 1))
    rng = np.random.default_rng(seed)
    corners = draw(st.integers(2, 7))
    steps = rng.exponential(0.6, (corners, 2)) * (rng.random((corners, 2)) < 0.7) + 1e-3
    x = np.concatenate([[0.0], np.cumsum(steps[:, 0])])
    y = np.concatenate([[0.0], -np.cumsum(steps[:, 1])])
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(x), np.diff(y)))])
    n = draw(st.sampled_from([2, 3, 7, 20, 60, 300, 900]))
    s = np.sort(rng.uniform(0.0, length[-1], n))
    sd = draw(st.sampled_from([1e-8, 1e-5, 1e-4, 1e-3]))
    px, py = np.interp(s, length, x), np.interp(s, length, y)
    noisy = draw(st.booleans())
    if noisy:
        px, py = px + sd * rng.standard_normal(n), py + sd * rng.standard_normal(n)
        stray = rng.random(n) < draw(st.sampled_from([0.0, 0.02, 0.1]))
        py = py + stray * rng.normal(0.0, 0.05, n)
    rising = draw(st.booleans())
    breaks = tuple(sorted(set(rng.integers(1, n, draw(st.integers(0, 2))).tolist())))
    blur = draw(st.sampled_from([0.0, 0.0075]))
    correlation_length = draw(st.sampled_from([0.0, 1e-3, 1e-2])) if not noisy else 1e-3
    return points_of(
        px, -py if rising else py, sd=sd, correlation_length=correlation_length, blur=blur, breaks=breaks
    ), rising


@settings(max_examples=60, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
@given(staircases())
def test_random_staircases_stay_monotone_or_are_refused(case):
    points, rising = case
    with contextlib.suppress(FitError):
        assert_monotone(fit_curve(points, rising=rising), rising)


@settings(max_examples=60, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
@given(
    st.integers(0, 2**32 - 1),
    st.sampled_from([3, 10, 80, 500]),
    st.sampled_from([0.0, 2e-3]),
    st.sampled_from(["cloud", "walk", "line", "repeats", "two lines"]),
)
def test_adversarial_points_stay_monotone_or_are_refused(seed, n, correlation_length, kind):
    rng = np.random.default_rng(seed)
    t = np.linspace(0.0, 1.0, n)
    x, y = {
        "cloud": lambda: (rng.random(n), rng.random(n)),
        "walk": lambda: (np.cumsum(rng.normal(1e-3, 2e-3, n)), -np.cumsum(rng.normal(1e-3, 2e-3, n))),
        "line": lambda: (t + rng.normal(0, 0.02, n), -t + rng.normal(0, 0.02, n)),
        "repeats": lambda: (np.round(t, 1), -np.round(t, 1)),
        "two lines": lambda: (t, -t - 0.2 * (np.arange(n) % 2)),
    }[kind]()
    with contextlib.suppress(FitError):
        assert_monotone(fit_curve(points_of(x, y, sd=1e-4, correlation_length=correlation_length)), rising=False)


@pytest.mark.parametrize("sd", [1e-7, 1e-4, 1e-2])
def test_noise_on_a_vertical_line_cannot_make_it_lean_back(sd):
    rng = np.random.default_rng(4)
    y = np.linspace(1.0, -1.0, 800)
    fit = fit_curve(points_of(0.3 + sd * rng.standard_normal(800), y, sd=sd, correlation_length=1e-3))
    assert_monotone(fit, rising=False)
    (part,) = fit.parts
    assert np.ptp(part.current) == 0.0
    assert abs(np.log10(part.current[0]) - 0.3) < 4.0 * sd / np.sqrt(800)
