"""The decade's length and phase from lines alone, against log10 exactly."""

import numpy as np
import pytest
from numpy.typing import NDArray

from curvelab.axes.fan import Fan
from curvelab.axes.rulers import log_rulers
from curvelab.axes.seen import Seen
from tests.axes.printed import decades

Floats = NDArray[np.float64]
LEVEL = Fan(slope=0.0, growth=0.0, members=np.ones(0, dtype=bool))


def seen_at(places: Floats, sd: float = 0.5) -> Seen:
    """Lines at places, upright, on a plot from 50 to 1550."""
    at = np.sort(places)
    return Seen(at=at, fan=LEVEL, middle=0.0, span=(50.0, 1550.0), sd=sd, rises=True)


def lines(low: float, per_decade: float, mantissas: tuple[float, ...]) -> Floats:
    """Places of log lines from ``low`` at 50 on."""
    values = np.array(decades(low, low * 10 ** (1500.0 / per_decade), mantissas))
    places: Floats = 50.0 + per_decade * np.log10(values / low)
    return places


@pytest.mark.parametrize("low", [1.0, 2.0, 1.5, 8.0])
@pytest.mark.parametrize("mantissas", [tuple(range(1, 10)), (1, 2, 3, 4, 5, 6, 8)])
@pytest.mark.parametrize("per_decade", [150.0, 237.0, 481.3])
def test_exact_lines_give_the_ruler_exactly(low: float, mantissas: tuple[float, ...], per_decade: float) -> None:
    best = log_rulers(seen_at(lines(low, per_decade, mantissas)))[0]
    assert best.ruler.per_scaled == pytest.approx(per_decade, rel=1e-9)
    # The place of a decade: log10(low) decades before the plot begins, but for whole ones.
    turns = (best.ruler.origin - 50.0) / per_decade + np.log10(low)
    assert abs(turns - round(turns)) < 1e-9


def test_a_falling_axis_gives_a_negative_decade() -> None:
    best = log_rulers(seen_at(1600.0 - lines(1.0, 300.0, tuple(range(1, 10)))))[0]
    assert best.ruler.per_scaled == pytest.approx(-300.0, rel=1e-9)


def test_one_two_five_paper_reads_the_same_from_both_ends() -> None:
    first, second = log_rulers(seen_at(lines(1.0, 300.0, (1, 2, 5))))[:2]
    assert first.score == pytest.approx(second.score)
    assert first.ruler.per_scaled == pytest.approx(-second.ruler.per_scaled)


def test_missing_and_false_lines_are_borne() -> None:
    """Three lines in ten missing, five false, half a pixel of scatter: the phase is right on all of 60 pages."""
    right = 0
    for seed in range(60):
        rng = np.random.default_rng(seed)
        per_decade, low = rng.uniform(180, 420), 10 ** rng.uniform(0, 1)
        places = 50.0 + per_decade * np.log10(np.array(decades(low, low * 10 ** (1500 / per_decade))) / low)
        places = places[rng.random(len(places)) > 0.3] + 0.3 * rng.standard_normal(1)
        places = np.concatenate([places + 0.3 * rng.standard_normal(len(places)), rng.uniform(60, 1540, 5)])
        best = log_rulers(seen_at(places))[0]
        turns = (best.ruler.origin - 50.0) / per_decade + np.log10(low)
        right += abs(best.ruler.per_scaled / per_decade - 1) < 2e-3 and abs(turns - round(turns)) < 0.01
    assert right >= 59


def test_two_lines_give_nothing() -> None:
    assert log_rulers(seen_at(np.array([100.0, 500.0]))) == []
