"""Derating tables: currents scale at temperatures of the table, are bounded between them, and nothing beyond."""

import pytest

from curvelab.records.curve import Conditions
from curvelab.records.device import Derating
from tests.devices.made import device, line

TABLE = (
    Derating(ambient_c=20.0, factor=1.06, element="overload"),
    Derating(ambient_c=30.0, factor=1.0, element="overload"),
    Derating(ambient_c=50.0, factor=0.88, element="overload"),
)
POINTS = [(1.5, 1000.0), (3.0, 100.0), (6.0, 10.0)]


def breaker(*derating, element="overload", ambient_reference_c=30.0):
    lines = [line(edge, POINTS, element=element) for edge in ("fast", "slow", "mean")]
    return device(*lines, rated_current_a=10.0, derating=derating, ambient_reference_c=ambient_reference_c)


def at(ambient_c):
    return {"conditions": Conditions(ambient_c=ambient_c)}


def test_at_a_temperature_of_the_table_the_currents_scale():
    asked = breaker(*TABLE)
    warm = asked.trip_time(0.88 * 30.0, **at(50.0))
    for answer in (warm.fast, warm.slow, warm.mean):
        assert answer.status == "value"
        assert answer.value == pytest.approx(100.0)
    assert asked.trip_time(30.0, **at(30.0)).slow.value == pytest.approx(100.0)
    assert asked.trip_current(100.0, **at(20.0)).trips.value == pytest.approx(1.06 * 30.0)


def test_between_two_temperatures_each_edge_is_bounded_on_its_safe_side():
    answer = breaker(*TABLE).trip_time(28.0, **at(40.0))
    assert answer.slow.status == "at_most"
    assert answer.slow.value == pytest.approx(breaker(*TABLE).trip_time(28.0, **at(30.0)).slow.value)
    assert answer.fast.status == "at_least"
    assert answer.fast.value == pytest.approx(breaker(*TABLE).trip_time(28.0, **at(50.0)).fast.value)
    assert answer.mean.status == "not_covered"


@pytest.mark.parametrize("ambient_c", [-5.0, 70.0])
def test_beyond_the_table_nothing_is_known(ambient_c):
    assert breaker(*TABLE).trip_time(28.0, **at(ambient_c)).slow.status == "not_covered"


def test_without_a_table_another_temperature_is_not_covered():
    assert breaker().trip_time(28.0, **at(40.0)).slow.status == "not_covered"
    assert breaker().trip_time(28.0, **at(30.0)).slow.status == "value"


def test_a_table_for_the_whole_device_bounds_what_may_be_magnetic():
    whole = breaker(Derating(ambient_c=50.0, factor=0.88), element="whole")
    answer = whole.trip_time(28.0, **at(50.0))
    assert answer.slow.status == "at_most"
    assert answer.slow.value == whole.trip_time(28.0).slow.value
    assert answer.fast.status == "at_least"
    assert answer.fast.value == pytest.approx(whole.trip_time(28.0 / 0.88).fast.value)


def test_a_table_for_another_element_leaves_this_one_alone():
    asked = breaker(*TABLE, element="instantaneous")
    assert asked.trip_time(28.0, **at(50.0)).slow.value == asked.trip_time(28.0).slow.value


def test_a_curve_drawn_for_another_temperature_is_taken_back_to_the_reference():
    drawn = line("slow", POINTS, element="overload", conditions=Conditions(ambient_c=50.0))
    asked = device(drawn, rated_current_a=10.0, derating=TABLE, ambient_reference_c=30.0)
    assert asked.trip_time(30.0, **at(50.0)).slow.value == pytest.approx(100.0)
    assert asked.trip_time(30.0 / 0.88, **at(30.0)).slow.value == pytest.approx(100.0)
