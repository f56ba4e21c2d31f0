"""Stretches without points: crossed where the curve hardly turns, else a new part."""

import numpy as np
import pytest

from curvelab.fit.curve import fit_curve
from curvelab.records.curve import COVERAGE_FACTOR
from tests.fit.drawn_points import FORMS, drawn
from tests.fit.measured import errors_along


@pytest.mark.parametrize(("width", "bridged"), [(0.05, True), (0.6, False)])
def test_a_gap_is_crossed_only_where_the_points_say_how(width, bridged):
    truth = FORMS["iec very inverse"]()
    points = drawn(truth, np.random.default_rng(1), missing=((1.0, 1.0 + width),))
    fit = fit_curve(points)
    error, _ = errors_along(truth, fit, px=400.0)
    assert [gap.bridged for gap in fit.gaps] == [bridged]
    assert len(fit.parts) == (1 if bridged else 2)
    assert np.abs(error).max() * 400.0 < 0.1


def test_uncertainty_grows_inside_a_gap():
    truth = FORMS["iec very inverse"]()
    gap = (1.0, 1.08)
    fit = fit_curve(drawn(truth, np.random.default_rng(2), missing=(gap,)))
    whole = fit_curve(drawn(truth, np.random.default_rng(2)))
    (start, end) = (fit.gaps[0].start[0], fit.gaps[0].end[0])

    def widest(one):
        (part,) = one.parts
        inside = (np.log10(part.current) > start) & (np.log10(part.current) < end)
        return part.sd_value[inside].max()

    assert widest(fit) > 1.2 * widest(whole)


def test_a_corner_inside_a_wide_gap_is_not_invented():
    truth = FORMS["thermal, drop, floor"]()
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(truth.x), np.diff(truth.y)))])
    corner = length[np.argmin(np.hypot(truth.x - truth.kinks[0][0], truth.y - truth.kinks[0][1]))]
    fit = fit_curve(drawn(truth, np.random.default_rng(3), missing=((corner - 0.1, corner + 0.1),)))
    assert len(fit.parts) == 2
    assert fit.parts[0].current[-1] < 10 ** truth.kinks[0][0]


def test_points_missing_close_to_a_corner_do_not_hide_it():
    truth = FORMS["thermal, drop, floor"]()
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(truth.x), np.diff(truth.y)))])
    corner = length[np.argmin(np.hypot(truth.x - truth.kinks[0][0], truth.y - truth.kinks[0][1]))]
    fit = fit_curve(drawn(truth, np.random.default_rng(3), missing=((corner - 0.01, corner + 0.01),)))
    assert len(fit.parts) == 1
    kink = fit.kinks[0]
    assert abs(kink.log_current - truth.kinks[0][0]) < 0.1 / 400.0
    assert abs(kink.log_value - truth.kinks[0][1]) < COVERAGE_FACTOR * 2.0 * kink.sd_log_value
