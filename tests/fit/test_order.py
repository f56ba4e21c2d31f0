"""Fast edge never above slow."""

import dataclasses

import numpy as np
import pytest

from curvelab.errors import FitError
from curvelab.fit.curve import fit_curve
from curvelab.fit.order import keep_order
from tests.fit.drawn_points import drawn, inverse_time, thermal_drop_floor

FAST, SLOW = thermal_drop_floor(tau_s=60.0), thermal_drop_floor(tau_s=80.0)


def edges(seed):
    rng = np.random.default_rng(seed)
    return fit_curve(drawn(FAST, rng, sd_px=0.1)), fit_curve(drawn(SLOW, rng, sd_px=0.1))


def level_at(part, u):
    x, y = np.log10(part.current), np.log10(part.value)
    return np.interp(u, (x - y) / np.sqrt(2.0), (x + y) / np.sqrt(2.0))


@pytest.mark.parametrize("seed", range(4))
def test_edges_that_share_a_drop_and_a_floor_are_parted_within_their_scatter(seed):
    before = edges(seed)
    fast, slow = keep_order(*before)
    u = np.linspace(0.5, 2.5, 4001)
    over = level_at(before[0].parts[0], u) - level_at(before[1].parts[0], u)
    assert np.all(level_at(fast.parts[0], u) <= level_at(slow.parts[0], u) + 1e-9)
    assert fast.moved == slow.moved
    assert fast.moved * 400.0 < 0.2
    if over.max() > 1e-9:
        assert fast.moved == pytest.approx(0.5 * over.max(), rel=0.1)
    for fit in (fast, slow):
        part = fit.parts[0]
        assert np.all(np.diff(part.current) >= 0.0)
        assert np.all(np.diff(part.value) <= 0.0)
        assert np.all(np.isfinite(part.sd_current) | np.isfinite(part.sd_value))


def test_edges_in_order_come_back_untouched():
    rng = np.random.default_rng(1)
    fast, slow = fit_curve(drawn(inverse_time(tms=0.5), rng)), fit_curve(drawn(inverse_time(tms=0.7), rng))
    assert keep_order(fast, slow) == (fast, slow)
    assert fast.moved == 0.0


def test_edges_the_wrong_way_round_are_refused_with_the_place():
    fast, slow = edges(1)
    with pytest.raises(FitError, match=r"The fast edge lies above the slow edge by \d+ % near .*, .*which line is"):
        keep_order(slow, fast)


def test_the_order_holds_for_rising_curves_too():
    fast, slow = edges(2)

    def mirrored(fit):
        parts = tuple(dataclasses.replace(part, value=1.0 / part.value) for part in fit.parts)
        return dataclasses.replace(fit, rising=True, parts=parts)

    low, high = keep_order(mirrored(fast), mirrored(slow))
    np.testing.assert_allclose(1.0 / low.parts[0].value, keep_order(fast, slow)[0].parts[0].value, rtol=1e-9)
    assert np.all(np.diff(high.parts[0].value) >= 0.0)
