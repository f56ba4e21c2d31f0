"""An adjustable device: settings, bases, elements combined."""

import numpy as np
import pytest

from curvelab.errors import DeviceError
from curvelab.records.device import Setting
from tests.devices.made import device, line, moulded_case


def test_asked_without_its_settings_it_lists_them_with_their_ranges():
    with pytest.raises(DeviceError) as error:
        moulded_case().trip_time(1000.0)
    for words in ("quay-250", "ir 0.4 to 1 xIn", "tr 2, 4, 8 (at 6 Ir)", "ii 2 to 10 xIn or off"):
        assert words in str(error.value)
    assert "\n" not in str(error.value)


def test_one_setting_that_the_answer_depends_on_is_not_enough():
    with pytest.raises(DeviceError, match="without its settings"):
        moulded_case().at(ir=0.8).trip_current(1.0)


@pytest.mark.parametrize(
    ("given", "message"),
    [
        ({"ir": 0.3}, "ir 0.4 to 1 xIn"),
        ({"ir": 1.01}, "ir 0.4 to 1 xIn"),
        ({"tr": 3.0}, "tr 2, 4, 8"),
        ({"ir": "off"}, "ir = off"),
        ({"isd": 5.0}, "no setting 'isd'"),
    ],
)
def test_a_setting_it_does_not_have_or_cannot_take_is_refused(given, message):
    with pytest.raises(DeviceError, match=message):
        moulded_case().at(**given)


def test_a_device_without_settings_takes_none():
    with pytest.raises(DeviceError, match="no settings"):
        device(line("slow", [(1, 10), (5, 1)]), rated_current_a=10.0).at(ir=1.0)


def test_settings_are_kept_and_the_device_asked_is_another():
    plain = moulded_case()
    half = plain.at(ir=0.8)
    assert dict(half.at(tr=8).settings) == {"ir": 0.8, "tr": 8.0}
    assert dict(plain.settings) == {}


def test_currents_count_in_the_settings_and_times_scale_with_the_delay():
    asked = moulded_case().at(ir=0.8, tr=8, ii=10)
    assert asked.trip_time(6 * 200.0).slow.value == 8.0
    assert asked.trip_time(6.0, base="xIr").slow.value == 8.0
    assert asked.at(tr=2).trip_time(6.0, base="xIr").slow.value == 2.0
    assert asked.at(tr=2).trip_current(2.0, base="xIr").trips.value == 6.0


def test_the_earliest_element_trips_edge_by_edge():
    asked = moulded_case().at(ir=1.0, tr=8, ii=4)
    # Ii = 1000 A: fast edge picks up at 800 A, slow edge at 1200 A.
    times = asked.trip_time([700.0, 900.0, 1100.0, 1300.0])
    assert times.fast.status.tolist() == ["value"] * 4
    assert times.fast.value[1:].tolist() == [0.01] * 3
    assert times.fast.value[0] > 1
    assert (times.slow.value[:3] > 1).all()
    assert times.slow.value[3] == 0.04
    currents = asked.trip_current(0.1)
    assert (currents.trips.value, currents.trips.status) == (1200.0, "value")
    assert (currents.holds.value, currents.holds.status) == (800.0, "value")


def test_switched_off_an_element_does_not_act():
    asked = moulded_case().at(ir=1.0, tr=8, ii="off")
    assert asked.trip_time(1500.0).slow.value == 8.0
    assert asked.trip_time(1500.0).fast.value == 6.4
    with pytest.raises(DeviceError, match="ii off"):
        asked.trip_time(2.0, base="xIi")


def test_below_all_pick_ups_it_never_trips():
    answer = moulded_case().at(ir=1.0, tr=8, ii=4).trip_time(240.0)
    assert (answer.fast.status, answer.slow.status) == ("never", "never")


def test_beyond_its_line_an_element_is_overtaken_by_the_one_drawn_lower():
    answer = moulded_case().at(ir=0.4, tr=8, ii=4).trip_time(20_000.0)
    assert (answer.fast.status, answer.fast.value) == ("value", 0.01)
    assert (answer.slow.status, answer.slow.value) == ("value", 0.04)


def test_left_of_an_element_that_is_not_drawn_nothing_is_known_though_another_is_drawn_lower():
    asked = device(
        line("fast", [(4, 100), (20, 2)], element="overload"),
        line("fast", [(2, 0.02), (50, 0.01)], element="instantaneous"),
        rated_current_a=10.0,
    )
    assert asked.trip_time(30.0).fast.status == "not_covered"
    assert asked.trip_time(50.0).fast.status == "value"


def test_an_element_nobody_knows_of_makes_no_answer_surer():
    # The instantaneous element's lines begin without a step: nobody knows what it does below 10 In.
    asked = device(
        line("fast", [(1, 1000), (20, 2)], element="overload"),
        line("slow", [(1.2, 1000), (20, 3)], element="overload"),
        line("fast", [(10, 0.02), (50, 0.01)], element="instantaneous"),
        line("slow", [(10, 0.05), (50, 0.03)], element="instantaneous"),
        rated_current_a=10.0,
    )
    below = asked.trip_time(50.0)
    assert below.fast.status == "not_covered"
    assert below.slow.status == "at_most"
    assert asked.trip_time(150.0).fast.value == pytest.approx(0.02 * 1.5 ** (np.log(0.5) / np.log(5)))


def test_a_line_drawn_for_one_setting_answers_only_there():
    fixed = device(
        line("slow", [(100, 10), (1000, 1)], base="A", at={"tr": 4.0}),
        settings=(Setting(name="tr", steps=(2.0, 4.0)),),
    )
    assert fixed.at(tr=4).trip_time(100.0).slow.value == 10.0
    assert fixed.at(tr=2).trip_time(100.0).slow.status == "not_covered"


def test_of_two_time_settings_drawn_the_nearest_is_scaled():
    drawn = [
        line(
            "mean",
            [(1, 100 * tms), (20, 2 * tms)],
            base="xIr",
            time_setting="tms",
            time_setting_at=tms,
            at={"tms": tms},
        )
        for tms in (0.1, 1.0)
    ]
    relay = device(
        *drawn,
        kind="relay",
        settings=(
            Setting(name="tms", from_value=0.05, to_value=1.0),
            Setting(name="ir", from_value=1.0, to_value=10.0, base="A"),
        ),
    )
    asked = relay.at(tms=0.2, ir=5.0).trip_time([5.0, 100.0])
    np.testing.assert_allclose(asked.mean.value, [20.0, 0.4])
    assert relay.at(tms=0.2, ir=5.0).trip_time(4.0).mean.status == "never"


def test_a_setting_that_does_not_say_what_it_counts_is_refused():
    lost = device(
        line("slow", [(1, 10), (5, 1)], base="xIr"), settings=(Setting(name="ir", from_value=1.0, to_value=2.0),)
    )
    with pytest.raises(DeviceError, match="counted in"):
        lost.at(ir=1.0).trip_time(5.0)
