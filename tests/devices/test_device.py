"""A device asked: times and currents with the status that is honest."""

import numpy as np
import pytest

from curvelab.devices.device import Device
from curvelab.errors import DeviceError
from curvelab.records.curve import Conditions
from curvelab.records.device import Breaking, DeviceRecord, Nameplate
from tests.devices.made import COLD, HOT, b32, device, line, rcd


def test_a_number_asked_is_answered_by_numbers_and_an_array_by_arrays_of_its_shape():
    one = b32().trip_time(160.0)
    assert (one.current, one.slow.status, one.slow.value) == (160.0, "value", 8.0)
    assert isinstance(one.slow.value, float)
    many = b32().trip_time([[160.0, 96.0], [100.0, 320.0]])
    assert many.slow.value.shape == many.slow.status.shape == many.fast.lower.shape == (2, 2)
    assert many.slow.value[0, 0] == 8.0


def test_typed_points_have_no_interval_rather_than_one_of_nought():
    answer = b32().trip_time(100.0)
    assert np.isnan([answer.slow.lower, answer.slow.upper, answer.fast.lower, answer.fast.upper]).all()


def test_a_step_answers_the_longer_time_slow_and_the_shorter_fast():
    answer = b32().trip_time([96.0, 160.0])
    assert answer.fast.value[0] == 0.012
    assert answer.slow.value[1] == 8.0


def test_current_that_surely_trips_and_surely_holds_lie_at_the_steps_to_the_digit():
    currents = b32().trip_current(0.4)
    assert (currents.trips.status, currents.trips.value) == ("value", 160.0)
    assert (currents.holds.status, currents.holds.value) == ("value", 96.0)
    assert currents.mean is None
    assert b32().trip_current(0.4, base="xIn").trips.value == 5.0


@pytest.mark.parametrize("rating", [0.1, 3.0, 6.0, 13.0, 63.0, 125.0])
def test_multiples_asked_as_amperes_still_find_the_step(rating):
    plate = Nameplate(key="s", kind="mcb", rated_current_a=rating)
    of_series = Device(DeviceRecord(nameplate=plate, curves=b32().record.curves))
    for multiple in (1.45, 2.55, 5.0):
        assert of_series.trip_time(multiple, base="xIn").slow.value == pytest.approx(
            of_series.trip_time(multiple * rating).slow.value, rel=1e-12
        )
    assert of_series.trip_time(5.0 * rating).slow.value == pytest.approx(8.0, rel=1e-12)


def test_left_of_a_line_that_leaves_the_plot_at_its_top_it_takes_at_least_the_top_time():
    answer = b32(leaves_top=True).trip_time([10.0, 40.0])
    assert answer.slow.status.tolist() == ["at_least", "at_least"]
    assert answer.slow.value.tolist() == [3000.0, 3000.0]
    assert answer.fast.status.tolist() == ["at_least", "value"]


def test_the_lower_bound_left_of_the_top_knows_that_the_end_is_uncertain():
    answer = b32(sd=0.01, leaves_top=True).trip_time([10.0, 46.39])
    assert answer.slow.status.tolist() == ["at_least", "at_least"]
    assert answer.slow.lower[0] == pytest.approx(3000.0)
    assert answer.slow.lower[1] < 2990
    assert np.isnan(answer.slow.upper).all()


def test_without_leaving_the_top_nothing_is_said_to_the_left():
    answer = b32().trip_time(10.0)
    assert (answer.slow.status, answer.fast.status) == ("not_covered", "not_covered")
    assert np.isnan(answer.slow.value)


def test_right_of_the_slow_edge_it_takes_at_most_its_last_time_up_to_the_breaking_capacity():
    answer = b32().trip_time([1600.0, 5000.0, 6000.0, 6001.0])
    assert answer.slow.status.tolist() == ["value", "at_most", "at_most", "above_breaking"]
    assert answer.slow.value[1] == 0.02
    assert answer.fast.status.tolist() == ["value", "not_covered", "not_covered", "above_breaking"]
    assert np.isnan(answer.slow.value[3])


def test_without_a_breaking_capacity_nothing_is_said_beyond_the_last_point():
    assert b32(breaking=()).trip_time(5000.0).slow.status == "not_covered"


def test_the_breaking_capacity_is_that_of_the_voltage_and_without_one_the_least():
    capacities = (
        Breaking(quantity="Icu", value_a=50e3, voltage_v=230.0),
        Breaking(quantity="Icu", value_a=10e3, voltage_v=690.0),
        Breaking(quantity="Ics", value_a=1e3),
    )
    asked = b32(breaking=capacities)
    assert asked.trip_time(20e3).slow.status == "above_breaking"
    assert asked.trip_time(20e3, conditions=Conditions(voltage_v=230.0)).slow.status == "at_most"
    assert asked.trip_time(20e3, conditions=Conditions(voltage_v=400.0)).slow.status == "above_breaking"


def test_below_a_declared_pick_up_it_never_trips():
    answer = rcd().trip_time([0.012, 0.015, 0.03], base="A")
    assert answer.fast.status.tolist() == ["never", "value", "value"]
    assert answer.slow.status.tolist() == ["not_covered", "not_covered", "value"]


def test_an_rcd_does_not_see_a_current_between_line_and_neutral():
    answer = rcd().trip_time(500.0, path="line_to_neutral")
    assert (answer.fast.status, answer.slow.status) == ("not_seen", "not_seen")
    assert rcd().trip_current(0.04, path="line_to_neutral").trips.status == "not_seen"
    assert rcd().trip_time(5.0, base="xIdn").slow.value == 0.04


def test_an_rcbo_is_asked_between_line_and_neutral_unless_the_current_is_residual():
    rcbo = device(
        *b32().record.curves, *rcd().record.curves, kind="rcbo", rated_current_a=32.0, rated_residual_current_a=0.03
    )
    assert rcbo.trip_time(160.0).slow.value == 8.0
    assert rcbo.trip_time(5.0, base="xIdn").slow.value == 0.04
    both = rcbo.trip_time(1.5, path="residual")
    assert (both.slow.status, both.slow.value) == ("at_most", 0.04)


def test_a_mean_line_without_tolerance_gives_a_mean_and_nothing_else():
    answer = device(line("mean", [(100, 10), (1000, 0.1)], base="A"), kind="fuse").trip_time(1000.0)
    assert (answer.fast, answer.slow) == (None, None)
    assert answer.mean.value == 0.1


def test_pre_arcing_never_stands_in_for_operating():
    pre_arcing = [line(edge, [(100, 10), (1000, 0.1)], base="A", meaning="pre_arcing") for edge in ("fast", "slow")]
    fuse = device(*pre_arcing, kind="fuse")
    assert fuse.trip_time(500.0).slow.meaning == "pre_arcing"
    assert fuse.trip_time(500.0, meaning="operating").slow.status == "not_covered"
    operating = line(
        "slow", [(800, 0.3), (1000, 0.2)], base="A", meaning="operating", conditions=Conditions(supply="ac")
    )
    both = device(*pre_arcing, operating, kind="fuse")
    assert (both.trip_time(1000.0).slow.value, both.trip_time(1000.0).slow.meaning) == (0.2, "operating")
    assert (both.trip_time(1000.0).fast.value, both.trip_time(1000.0).fast.meaning) == (0.1, "pre_arcing")
    assert both.trip_time(500.0).slow.status == "not_covered"
    assert both.trip_time(500.0, meaning="pre_arcing").slow.status == "value"


def test_a_band_valid_cold_bounds_a_hot_device_on_the_slow_side_only():
    answer = b32().trip_time(160.0, conditions=HOT)
    assert (answer.slow.status, answer.slow.value) == ("at_most", 8.0)
    assert answer.fast.status == "not_covered"
    hot = b32(conditions=HOT).trip_time(96.0, conditions=COLD)
    assert (hot.fast.status, hot.fast.value) == ("at_least", 0.012)
    assert hot.slow.status == "not_covered"


def test_left_open_the_start_is_the_one_that_makes_the_band_widest():
    hot = [line(edge, [(1.2, 900), (5, 1), (50, 0.01)], conditions=HOT) for edge in ("fast", "slow")]
    cold = [line(edge, [(1.2, 3000), (5, 8), (50, 0.02)], conditions=COLD) for edge in ("fast", "slow")]
    answer = device(*hot, *cold, rated_current_a=10.0).trip_time(50.0)
    assert (answer.fast.value, answer.slow.value) == (1.0, 8.0)


@pytest.mark.parametrize(
    "conditions",
    [
        Conditions(supply="dc"),
        Conditions(frequency_hz=400.0),
        Conditions(ambient_c=55.0),
        Conditions(time_kind="virtual"),
    ],
)
def test_conditions_the_sheet_does_not_cover_are_not_covered(conditions):
    assert b32().trip_time(160.0, conditions=conditions).slow.status == "not_covered"


def test_virtual_times_answer_no_time():
    virtual = device(line("slow", [(100, 10), (1000, 0.001)], base="A", conditions=Conditions(time_kind="virtual")))
    assert virtual.trip_time(500.0).slow.status == "not_covered"


def test_let_through_answers_no_time():
    energy = device(line("slow", [(1e3, 1e4), (6e3, 3e4)], base="A", quantity="let_through"))
    answer = energy.trip_time(2000.0)
    assert (answer.fast, answer.slow, answer.mean) == (None, None, None)


@pytest.mark.parametrize("current", [0.0, -1.0, float("nan"), float("inf"), "much"])
def test_a_current_that_is_none_is_refused(current):
    with pytest.raises(DeviceError, match="current"):
        b32().trip_time(current)


@pytest.mark.parametrize(
    ("base", "message"), [("xIq", "not a base"), ("xIdn", "rated_residual"), ("xIr", "no setting 'ir'")]
)
def test_a_base_the_device_lacks_is_refused(base, message):
    with pytest.raises(DeviceError, match=message):
        b32().trip_time(5.0, base=base)


def test_times_before_and_beyond_the_edges_give_bounds_on_the_safe_side():
    currents = b32().trip_current([5000.0, 0.001])
    assert currents.trips.status.tolist() == ["at_most", "not_covered"]
    assert currents.trips.value[0] == pytest.approx(1.45 * 32)
    assert currents.holds.status.tolist() == ["value", "at_least"]
    assert currents.holds.value[1] == 1600.0


def test_what_it_is_asked_is_what_it_is():
    asked = b32()
    assert (asked.key, asked.nameplate.kind, asked.revision, asked.state) == ("riverside-b32", "mcb", None, None)
    assert [band.element for band in asked.bands] == ["whole"]
    assert asked.bands[0].slow is asked.record.curves[1]


def test_beyond_the_lines_of_all_elements_the_earliest_last_time_bounds_the_device():
    overload = line("slow", [(1.5, 1000.0), (8.0, 5.0)], element="overload")
    instantaneous = line("slow", [(5.0, 0.05), (20.0, 0.01)], element="instantaneous")
    made = device(overload, instantaneous, rated_current_a=10.0, breaking=(Breaking(quantity="Icn", value_a=6000.0),))
    answer = made.trip_time([100.0, 1000.0, 7000.0]).slow
    assert list(answer.status) == ["value", "at_most", "above_breaking"]
    assert answer.value[1] == 0.01
