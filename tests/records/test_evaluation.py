"""Curves evaluate and invert themselves: straight lines in log-log, steps by edge, intervals along the normal."""

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from curvelab.records.band import Band, bands_of
from curvelab.records.curve import COVERAGE_FACTOR, Curve, Part, typed_part
from curvelab.records.evaluation import currents_at, outer_bounds, values_at

STEP = ([2.0, 5.0, 5.0, 40.0], [100.0, 8.0, 0.05, 0.02])


def curve(edge, *parts, quantity="time", **fields):
    return Curve(
        element="whole", edge=edge, meaning="clearing", base="A", quantity=quantity, parts=tuple(parts), **fields
    )


def sure(current, value, sd_current, sd_value, common=0.0):
    shape = np.shape(current)
    return Part(
        current=current,
        value=value,
        sd_current=np.broadcast_to(sd_current, shape),
        sd_value=np.broadcast_to(sd_value, shape),
        sd_common=np.full(shape, common),
    )


def at(line, *currents):
    return values_at(line, np.array(currents))


@pytest.mark.parametrize(("edge", "at_step"), [("slow", 8.0), ("mean", 8.0), ("fast", 0.05)])
def test_each_tabulated_current_gives_its_time_to_the_last_digit_and_a_step_the_time_of_its_edge(edge, at_step):
    answer = at(curve(edge, typed_part(*STEP)), 2.0, 5.0, 40.0)
    assert answer.value.tolist() == [100.0, at_step, 0.02]
    assert np.isnan(answer.lower).all()
    assert np.isnan(answer.upper).all()


@pytest.mark.parametrize("ends", [([5.0, 5.0, 9.0], [8.0, 1.0, 0.5]), ([2.0, 5.0, 5.0], [20.0, 8.0, 1.0])])
def test_a_step_at_either_end_is_answered_by_edge_too(ends):
    assert at(curve("slow", typed_part(*ends)), 5.0).value[0] == 8.0
    assert at(curve("fast", typed_part(*ends)), 5.0).value[0] == 1.0


def test_a_current_that_rounding_moved_off_a_step_still_lies_on_it():
    for moved in (5.0 * (1 - 2e-16), 5.0 * (1 + 3e-16)):
        assert at(curve("slow", typed_part(*STEP)), moved).value[0] == pytest.approx(8.0, rel=1e-12)
        assert at(curve("fast", typed_part(*STEP)), moved).value[0] == pytest.approx(0.05, rel=1e-12)


def test_between_points_it_agrees_with_interpolation_of_logarithms():
    # numpy.interp on the logarithms is the independent reference.
    rng = np.random.default_rng(3)
    current, time = np.sort(rng.uniform(1, 900, 40)), np.sort(rng.uniform(0.01, 900, 40))[::-1]
    asked = np.exp(rng.uniform(np.log(current[0]), np.log(current[-1]), 500))
    expected = np.exp(np.interp(np.log(asked), np.log(current), np.log(time)))
    for edge in ("fast", "slow"):
        line = curve(edge, typed_part(current, time))
        np.testing.assert_allclose(at(line, *asked).value, expected, rtol=1e-12)
        np.testing.assert_allclose(currents_at(line, expected).value, asked, rtol=1e-10)


def test_many_sorted_currents_give_the_same_as_few():
    line = curve("slow", sure([1.0, 7.0, 7.0, 90.0], [50.0, 9.0, 1.0, 0.1], 0.01, 0.02))
    many = np.sort(np.append(np.geomspace(0.5, 200, 20_000), [1.0, 7.0, 90.0]))
    shuffled = np.random.default_rng(1).permutation(many.size)
    one, other = values_at(line, many), values_at(line, many[shuffled])
    for name in ("value", "lower", "upper"):
        np.testing.assert_array_equal(getattr(one, name)[shuffled], getattr(other, name))


def test_nothing_is_said_outside_the_ends_and_in_a_gap():
    line = curve("slow", typed_part([2.0, 4.0], [90.0, 30.0]), typed_part([6.0, 9.0], [10.0, 1.0]))
    answer = at(line, 1.9, 2.0, 4.0, 5.0, 6.0, 9.0, 9.1)
    assert np.isnan(answer.value).tolist() == [True, False, False, True, False, False, True]


def test_a_time_in_a_gap_is_answered_on_the_safe_side():
    parts = typed_part([2.0, 4.0], [90.0, 30.0]), typed_part([6.0, 9.0], [10.0, 1.0])
    assert currents_at(curve("slow", *parts), np.array([20.0])).value[0] == 6.0
    assert currents_at(curve("fast", *parts), np.array([20.0])).value[0] == 4.0


def test_a_gap_in_a_vertical_stretch_leaves_its_current_to_the_edge():
    parts = typed_part([2.0, 5.0], [90.0, 30.0]), typed_part([5.0, 9.0], [10.0, 1.0])
    assert at(curve("slow", *parts), 5.0).value[0] == 30.0
    assert at(curve("fast", *parts), 5.0).value[0] == 10.0


def test_a_level_stretch_inverts_to_its_start_on_the_slow_and_its_end_on_the_fast_edge():
    points = typed_part([2.0, 4.0, 9.0, 12.0], [50.0, 0.4, 0.4, 0.1])
    assert currents_at(curve("slow", points), np.array([0.4])).value[0] == 4.0
    assert currents_at(curve("fast", points), np.array([0.4])).value[0] == 9.0


def test_a_vertical_stretch_inverts_to_its_current_exactly():
    times = np.array([7.9, 0.4, 0.051])
    for edge in ("fast", "slow"):
        assert currents_at(curve(edge, typed_part(*STEP)), times).value.tolist() == [5.0, 5.0, 5.0]


def test_the_interval_is_that_of_the_normal_turned_to_time_and_to_current():
    # A line of slope -m: time at a current has sqrt(1 + m^2) of what is along the normal, current at a time that / m.
    slope, normal = 3.0, 0.004
    sd_value, sd_current = normal * np.hypot(1, slope), normal * np.hypot(1, slope) / slope
    current = np.geomspace(10, 1000, 9)
    line = curve("slow", sure(current, 1e6 * current**-slope, sd_current, sd_value))
    asked = np.array([30.0, 77.0, 400.0])
    times = values_at(line, asked)
    np.testing.assert_allclose(np.log(times.upper / times.value), COVERAGE_FACTOR * sd_value, rtol=1e-9)
    np.testing.assert_allclose(np.log(times.value / times.lower), COVERAGE_FACTOR * sd_value, rtol=1e-9)
    currents = currents_at(line, times.value)
    np.testing.assert_allclose(np.log(currents.upper / asked), COVERAGE_FACTOR * sd_current, rtol=1e-9)
    np.testing.assert_allclose(np.log(asked / currents.lower), COVERAGE_FACTOR * sd_current, rtol=1e-9)


def test_the_interval_at_both_ends_is_that_of_the_end_itself():
    line = curve("slow", sure([10.0, 1000.0], [100.0, 1.0], 0.002, 0.002))
    answer = at(line, 10.0, 1000.0)
    np.testing.assert_allclose(np.log(answer.upper / answer.lower), 2 * COVERAGE_FACTOR * 0.002, rtol=1e-9)


def test_near_a_step_the_interval_reaches_over_it():
    nan = np.nan
    step = sure([2.0, 5.0, 5.0, 40.0], [100.0, 8.0, 0.05, 0.02], [0.01, 0.01, 0.01, nan], [0.02, nan, nan, 0.01])
    before, beyond = at(curve("slow", step), 4.95, 5.05).lower, at(curve("slow", step), 4.95, 5.05).upper
    assert before[0] < 0.06
    assert beyond[1] > 7.0
    current = currents_at(curve("slow", step), np.array([0.4]))
    assert current.value[0] == 5.0
    np.testing.assert_allclose([current.lower[0], current.upper[0]], 5 * np.exp([-0.0196, 0.0196]), rtol=1e-4)


def test_what_a_sheet_shares_can_be_left_out():
    line = curve("slow", sure([10.0, 1000.0], [100.0, 1.0], 0.005 * np.sqrt(2), 0.005 * np.sqrt(2), common=0.004))
    whole, own = values_at(line, np.array([50.0])), values_at(line, np.array([50.0]), own=True)
    ratio = np.log(own.upper / own.value) / np.log(whole.upper / whole.value)
    assert ratio[0] == pytest.approx(0.003 / 0.005, rel=1e-9)


def test_one_unknown_uncertainty_leaves_the_interval_unknown():
    line = curve("slow", sure([1.0, 2.0, 3.0], [9.0, 5.0, 1.0], [0.01, np.nan, 0.01], [0.01, np.nan, 0.01]))
    assert np.isnan(at(line, 1.5).lower).all()


def test_beyond_the_ends_the_outer_bounds_go_on_level():
    line = curve("slow", sure([10.0, 1000.0], [100.0, 1.0], 0.01, 0.01))
    lower, upper = outer_bounds(line, np.array([1.0, 9.95, 5000.0]))
    assert lower[0] == pytest.approx(100.0)
    assert 97 < lower[1] < 100
    assert upper[2] == pytest.approx(1.0)


def test_let_through_rises_and_its_interval_too():
    line = curve("slow", sure([1e3, 1e4], [1e4, 4e4], 0.01, 0.006), quantity="let_through")
    answer = at(line, 1e3, 2e3, 1e4)
    assert (answer.lower < answer.value).all()
    assert (answer.upper > answer.value).all()
    np.testing.assert_allclose(answer.value[[0, 2]], [1e4, 4e4])
    np.testing.assert_allclose(np.log(answer.upper / answer.lower), 2 * COVERAGE_FACTOR * 0.006, rtol=0.02)


steps = st.lists(
    st.tuples(st.floats(0, 0.8), st.floats(0, 1.5), st.floats(1e-4, 0.3), st.floats(1e-4, 0.3), st.integers(0, 2)),
    min_size=2,
    max_size=12,
)


@settings(max_examples=150, deadline=None)
@given(steps, st.sampled_from(["fast", "slow", "mean"]))
def test_the_interval_always_holds_the_value_and_stays_finite(pieces, edge):
    along, down, sd_current, sd_value, infinite = (np.array(column) for column in zip(*pieces, strict=True))
    current, time = np.exp(np.cumsum(along)), 1e4 * np.exp(-np.cumsum(down))
    part = sure(
        current,
        time,
        np.where(infinite == 1, np.nan, sd_current),
        np.where(infinite == 2, np.nan, sd_value),
    )
    line = curve(edge, part)
    answer = values_at(line, np.append(np.geomspace(current[0], current[-1], 60), current))
    inverse = currents_at(line, np.append(np.geomspace(time[-1], time[0], 60), time))
    for bounded in (answer, inverse):
        assert np.isfinite([bounded.value, bounded.lower, bounded.upper]).all()
        assert (bounded.lower <= bounded.value).all()
        assert (bounded.value <= bounded.upper).all()


@settings(max_examples=150, deadline=None)
@given(steps)
def test_time_and_current_undo_each_other_on_the_safe_side(pieces):
    along, down, *_ = (np.array(column) for column in zip(*pieces, strict=True))
    current, time = np.exp(np.cumsum(along)), 1e4 * np.exp(-np.cumsum(down))
    asked = np.geomspace(time[-1], time[0], 40)
    trips = currents_at(curve("slow", typed_part(current, time)), asked).value
    holds = currents_at(curve("fast", typed_part(current, time)), asked).value
    beyond, before = trips * (1 + 1e-9), holds * (1 - 1e-9)
    late = values_at(curve("slow", typed_part(current, time)), np.minimum(beyond, current[-1])).value
    early = values_at(curve("fast", typed_part(current, time)), np.maximum(before, current[0])).value
    inside = beyond < current[-1]
    assert (late[inside] <= asked[inside] * (1 + 1e-6)).all()
    inside = before > current[0]
    assert (early[inside] >= asked[inside] * (1 - 1e-6)).all()


def test_curves_gather_into_bands_and_a_band_asks_its_edges():
    fast, slow = curve("fast", typed_part(*STEP)), curve("slow", typed_part(*STEP))
    mean = curve("mean", typed_part(*STEP), at={"ir": 1.0})
    first, second = bands_of([fast, slow, mean])
    assert (first.fast, first.slow, first.mean) == (fast, slow, None)
    assert second.mean is mean
    assert isinstance(first, Band)
    answer = first.values("slow", np.array([5.0]))
    assert answer is not None
    assert answer.value[0] == 8.0
    assert first.values("mean", np.array([5.0])) is None
    inverse = first.currents("fast", np.array([0.4]))
    assert inverse is not None
    assert inverse.value[0] == 5.0


def test_a_band_lies_between_lines_of_different_meaning_and_no_line_is_lost():
    def of(edge, meaning):
        return replace(curve(edge, typed_part(*STEP)), meaning=meaning)

    melts, off = of("fast", "pre_arcing"), of("slow", "operating")
    (fuse,) = bands_of([melts, off])
    assert (fuse.fast, fuse.slow) == (melts, off)
    early, late, melted = of("fast", "operating"), off, of("slow", "pre_arcing")
    first, second = bands_of([melts, early, late, melted])
    assert (first.fast, first.slow) == (melts, melted)
    assert (second.fast, second.slow) == (early, late)


def test_two_points_a_rounding_apart_are_one_step():
    near = typed_part([2.0, 5.0, 5.0 * (1 + 1e-13), 40.0], [100.0, 8.0, 0.05, 0.02])
    assert at(curve("slow", near), 5.0).value[0] == 8.0
    assert at(curve("fast", near), 5.0).value[0] == pytest.approx(0.05, rel=1e-9)
    assert currents_at(curve("slow", near), np.array([0.4])).value[0] == pytest.approx(5.0, rel=1e-9)
