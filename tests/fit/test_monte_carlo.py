"""Stated intervals against Monte Carlo draws of what they state (JCGM 101): calibration and coefficients together."""

import dataclasses

import numpy as np
import pytest
from scipy.interpolate import BSpline

from curvelab.fit.curve import fit_curve
from curvelab.records.curve import Curve
from curvelab.records.evaluation import currents_at, values_at
from tests.fit.drawn_points import FORMS, correlated, drawn

DRAWS = 4000
ROOT_2 = np.sqrt(2.0)
SCALE_SD, SHIFT_SD = 3e-4, 2e-4
"""Calibration errors of the sheet: of a decade's length, relative, and of the place of the time axis, in decades."""


@pytest.fixture(scope="module")
def fitted():
    points = drawn(FORMS["fuse"](), np.random.default_rng(51), sd_px=0.1, noise=lambda rng, n: correlated(rng, n, 1.2))
    shared = np.zeros((len(points.sd), 2, 2))
    shared[:, 0, 0] = SCALE_SD * points.log_current
    shared[:, 1, 1] = SHIFT_SD
    common = shared @ shared.transpose(0, 2, 1)
    return fit_curve(dataclasses.replace(points, shared=shared, common=common))


@pytest.fixture(scope="module")
def lines(fitted):
    """Draws of the whole curve: log10 (current, value), each of shape (draws, places)."""
    (piece,) = fitted.pieces
    rng = np.random.default_rng(52)
    u = np.linspace(piece.start, piece.end, 4001)
    v = BSpline(piece.knots, rng.multivariate_normal(piece.coefficients, piece.covariance, DRAWS).T, 3)(u).T
    x, y = (u + v) / ROOT_2, (v - u) / ROOT_2
    return x * (1.0 + SCALE_SD * rng.standard_normal((DRAWS, 1))), y + SHIFT_SD * rng.standard_normal((DRAWS, 1))


def curve_of(fitted):
    return Curve(element="whole", edge="mean", meaning=None, base="A", parts=fitted.parts)


@pytest.mark.parametrize("share", [0.1, 0.3, 0.5, 0.7, 0.9])
def test_time_at_a_current_and_current_at_a_time(fitted, lines, share):
    """From the nearly upright beginning to the end; within 5 % of the half width, as 4000 draws tell it."""
    curve = curve_of(fitted)
    (part,) = fitted.parts
    k = int(share * part.current.size)
    current, value = part.current[k : k + 1], part.value[k : k + 1]
    x, y = lines
    times = [np.interp(np.log10(current[0]), row_x, row_y) for row_x, row_y in zip(x, y, strict=True)]
    currents = [np.interp(-np.log10(value[0]), -row_y, row_x) for row_x, row_y in zip(x, y, strict=True)]
    for answer, sampled in ((values_at(curve, current), times), (currents_at(curve, value), currents)):
        low, high = np.quantile(sampled, [0.025, 0.975])
        stated = np.log10([answer.lower[0], answer.upper[0]])
        assert np.abs(stated - [low, high]).max() < 0.05 * (high - low)


def test_parameters_of_a_form_scatter_as_stated():
    """Independent sheets: noise and calibration drawn anew each time."""
    truth = FORMS["iec very inverse"]()
    rng = np.random.default_rng(53)
    scores = []
    for _ in range(40):
        points = drawn(truth, rng, px=200.0, sd_px=0.1, noise=lambda r, n: correlated(r, n, 1.2))
        shared = np.zeros((len(points.sd), 2, 1))
        shared[:, 0, 0] = SCALE_SD * points.log_current
        moved = points.log_current * (1.0 + SCALE_SD * rng.standard_normal())
        (form,) = fit_curve(dataclasses.replace(points, log_current=moved, shared=shared)).forms
        scores.append([(p.value / true - 1.0) / p.sd for p, true in zip(form.parameters, (1.0, 0.5), strict=True)])
    spread = np.sqrt(np.mean(np.square(scores), axis=0))
    # Of 40 sheets the root mean square score is known to 11 %.
    assert np.all((spread > 0.6) & (spread < 1.4))
