"""Disconnection: currents, loops, measured loops, electrodes and verdicts, worked by hand."""

import pytest

from curvelab.calculators.circumstances import Circumstances
from curvelab.calculators.disconnection import disconnection
from curvelab.devices.device import Device
from curvelab.errors import DeviceError, InputError
from curvelab.records.device import Breaking, DeviceRecord, Nameplate
from tests.devices.made import b32, device, line, moulded_case, rcd


def c20(**fields):
    return device(
        line("fast", [(1.13, 9000), (5, 2), (5, 0.01), (50, 0.008)]),
        line("slow", [(1.45, 3500), (10, 3), (10, 0.05), (50, 0.02)]),
        key="c20",
        characteristic="C",
        rated_current_a=20.0,
        **fields,
    )


def fuse(meaning="operating", characteristic="gG", **fields):
    points = [(200, 300), (1000, 0.4), (5000, 0.01)]
    slow = line("slow", points, base="A", meaning=meaning)
    return device(slow, key="fuse", kind="fuse", characteristic=characteristic, rated_current_a=100.0, **fields)


def rcbo():
    return device(
        line("slow", [(1, 0.3), (2, 0.15), (5, 0.04), (500, 0.04)], base="xIdn", element="residual"),
        line("slow", [(1.45, 3000), (5, 8), (5, 0.06), (50, 0.02)]),
        key="rcbo",
        kind="rcbo",
        characteristic="B",
        rated_current_a=16.0,
        rated_residual_current_a=0.03,
    )


def asked(made, **words):
    return disconnection(made, Circumstances(voltage_v=230.0, **words))


def only(answer):
    (finding,) = answer.findings
    return finding


def test_the_greatest_loop_of_a_b32_with_the_least_voltage_as_designed_and_measured():
    answer = asked(b32(), practice="bs7671")
    assert answer.required.time_s == 0.4
    assert answer.trips.value == 160.0
    assert answer.greatest_loop.value == pytest.approx(0.95 * 230 / 160, rel=1e-12) == 1.365625
    assert answer.greatest_measured_loop.value == pytest.approx(1.0925)
    assert answer.findings == ()


def test_a_loop_of_1_30_meets_and_one_of_1_37_fails_though_tables_print_it():
    assert only(asked(b32(), loop_ohm=1.30)).outcome == "meets"
    answer = asked(b32(), loop_ohm=1.37)
    assert answer.fault.current_a == pytest.approx(159.489, abs=1e-3)
    assert only(answer).outcome == "fails"
    assert any("Tables print 1.37 ohm" in note and "1.3656" in note for note in answer.notes)
    assert asked(b32(), loop_ohm=1.38).notes == ()


def test_a_measured_loop_is_judged_by_its_own_limit():
    assert only(asked(b32(), loop_ohm=1.09, measured=True)).outcome == "meets"
    assert only(asked(b32(), loop_ohm=1.10, measured=True)).outcome == "fails"


def test_at_exactly_the_limit_it_is_at_the_limit_and_never_meets():
    assert only(asked(b32(), loop_ohm=1.365625)).outcome == "at limit"


@pytest.mark.parametrize(
    ("practice", "greatest", "fault_a", "outcome"),
    [
        ("asnzs3000", 1.5333, 164.286, "meets"),
        ("bs7671", 1.0925, 156.071, "fails"),
        ("iec60364", 1.15, 164.286, "fails"),
    ],
)
def test_practices_reckon_a_c20_differently(practice, greatest, fault_a, outcome):
    answer = asked(c20(), practice=practice, loop_ohm=1.40)
    assert answer.greatest_loop.value == pytest.approx(greatest, abs=5e-5)
    assert answer.fault.current_a == pytest.approx(fault_a, abs=1e-3)
    assert only(answer).outcome == outcome


def test_a_practice_that_counts_on_the_mean_says_from_where_the_device_surely_trips():
    answer = asked(c20(), practice="asnzs3000")
    assert answer.trips.basis == "standard"
    assert any("slow edge surely trips from 200 A" in note for note in answer.notes)


def test_a_device_without_a_factor_takes_its_mean_line_and_nothing_else():
    mean = device(
        line("mean", [(2.0, 30.0), (6.0, 3.0), (6.0, 0.02), (50.0, 0.01)]), kind="mccb", rated_current_a=100.0
    )
    assert asked(mean, practice="asnzs3000").trips.value == pytest.approx(600.0)
    assert asked(fuse(), practice="asnzs3000").trips.status == "not_covered"


@pytest.mark.parametrize(
    ("system", "voltage_v", "circuit", "time_s"),
    [
        ("TN", 120, "final", 0.8),
        ("TN", 121, "final", 0.4),
        ("TN", 230, "final", 0.4),
        ("TN", 231, "final", 0.2),
        ("TN", 400, "final", 0.2),
        ("TN", 401, "final", 0.1),
        ("TT", 100, "final", 0.3),
        ("TT", 230, "final", 0.2),
        ("TT", 277, "final", 0.07),
        ("TT", 690, "final", 0.04),
        ("TN", 230, "distribution", 5.0),
        ("TT", 230, "distribution", 1.0),
    ],
)
def test_required_times(system, voltage_v, circuit, time_s):
    # IEC 60364-4-41 table 41.1 and 411.3.2.3/.4, in a copy of BS 7671 table 41.1 (TT distribution: from memory).
    answer = disconnection(b32(), Circumstances(voltage_v=voltage_v, system=system, circuit=circuit))
    assert answer.required.time_s == time_s


def test_a_required_time_of_ones_own_takes_the_place_of_the_table():
    answer = disconnection(c20(), Circumstances(voltage_v=48.0, required_s=0.4, practice="iec60364"))
    assert answer.greatest_loop.value == pytest.approx(48.0 / 200.0)


def test_the_electrode_of_a_30_ma_rcd_in_a_tt_system():
    answer = asked(rcd(), system="TT", loop_ohm=1200.0)
    touch = {each.rule: each for each in answer.findings}["touch-voltage"]
    assert (touch.value, touch.limit, touch.outcome) == (pytest.approx(36.0), 50.0, "meets")
    assert answer.fault.current_a == pytest.approx(0.19167, abs=1e-5)
    assert "6.39 IΔn" in answer.fault.words
    assert answer.greatest_loop.value == pytest.approx(1666.67, abs=0.01)
    assert [each.outcome for each in answer.findings] == ["meets", "meets"]
    assert answer.time.value == pytest.approx(0.04)


def test_an_electrode_above_the_greatest_fails_by_its_touch_voltage():
    answer = asked(rcd(), system="TT", loop_ohm=1700.0)
    assert {each.rule: each.outcome for each in answer.findings} == {"disconnects": "meets", "touch-voltage": "fails"}


def test_a_slow_rcd_lets_the_time_set_the_electrode():
    # 0.2 s only from 230 mA on: 230 V over that is 1000 ohm, though 50 V would allow 1667 ohm.
    slow = device(
        line("slow", [(0.03, 0.5), (0.23, 0.2), (10, 0.1)], base="A", element="residual"),
        kind="rcd",
        rated_residual_current_a=0.03,
    )
    assert asked(slow, system="TT").greatest_loop.value == pytest.approx(1000.0)


def test_an_rcd_in_a_tn_system_is_reckoned_by_its_loop():
    # Half of 0.3 s to 0.15 s between one and two times 30 mA: 0.4 s is reached at 30 mA at the latest.
    answer = asked(rcd(), practice="bs7671")
    assert answer.greatest_loop.status == "at_least"
    assert answer.greatest_loop.value == pytest.approx(0.95 * 230 / 0.03)


def test_an_rcbo_disconnects_by_its_residual_element_and_says_what_its_overcurrent_elements_do():
    answer = asked(rcbo())
    assert answer.trips.value == pytest.approx(0.03)
    assert any("overcurrent elements alone" in note and "80 A" in note for note in answer.notes)


def test_pre_arcing_never_stands_for_operating():
    answer = asked(fuse("pre_arcing"), loop_ohm=0.1)
    assert (answer.trips.status, only(answer).outcome) == ("not_covered", "not covered")
    assert "pre-arcing" in answer.trips.reason
    assert asked(fuse()).trips.value == pytest.approx(1000.0)


def test_a_relay_needs_the_time_of_its_breaker():
    relay = device(
        line("slow", [(100, 10), (1000, 0.1)], base="A", meaning="relay_output"), kind="relay", rated_current_a=100.0
    )
    assert "breaker" in asked(relay).trips.reason
    # 0.32 s are left to the relay: 10 s x (100 / I)^2.
    assert asked(relay, breaker_time_s=0.08).trips.value == pytest.approx(100 * (10 / 0.32) ** 0.5)
    assert asked(relay, breaker_time_s=0.4).trips.status == "not_covered"
    with pytest.raises(DeviceError, match="no relay"):
        asked(b32(), breaker_time_s=0.05)


def test_a_switch_does_not_disconnect():
    switch = Device(DeviceRecord(nameplate=Nameplate(key="isolator", kind="switch", rated_current_a=63.0)))
    answer = asked(switch, loop_ohm=0.5)
    assert "not a protective device" in answer.trips.reason
    assert only(answer).outcome == "not covered"


def test_a_mean_line_without_tolerance_decides_nothing():
    mean = device(line("mean", [(2.0, 30.0), (5.0, 3.0), (5.0, 0.02), (50.0, 0.01)]), rated_current_a=10.0)
    answer = asked(mean, loop_ohm=1.0)
    assert "tolerance" in only(answer).note
    assert only(answer).outcome == "not covered"


def test_a_fault_above_the_breaking_capacity_fails_though_it_trips():
    answer = asked(b32(breaking=(Breaking(quantity="Icn", value_a=3000.0),)), loop_ohm=0.05)
    assert {each.rule: each.outcome for each in answer.findings} == {"disconnects": "meets", "breaks": "fails"}
    assert answer.time.status == "above_breaking"


def test_a_back_up_fuse_must_not_be_left_below_its_least_breaking_current():
    made = fuse(characteristic="aM", breaking=(Breaking(quantity="Imin", value_a=1500.0),))
    answer = asked(made, loop_ohm=0.2)
    assert {each.rule: each.outcome for each in answer.findings} == {"disconnects": "meets", "least-breaking": "fails"}
    assert any(caution.code == "least-breaking-current" for caution in answer.cautions)
    # Where the nameplate is silent, 6.3 In of an aM fuse is taken.
    assert asked(fuse(characteristic="aM"), loop_ohm=0.4).findings[-1].limit == pytest.approx(630.0)


def test_the_interval_of_the_curve_reaches_the_loop_and_its_verdict():
    answer = asked(b32(sd=0.02), loop_ohm=1.36)
    low, high = answer.greatest_loop.interval
    assert low < 1.365625 < high
    assert only(answer).outcome == "undecided"
    assert only(asked(b32(sd=0.0005), loop_ohm=1.3650)).outcome == "at limit"


def test_an_adjustable_device_is_asked_at_its_settings():
    with pytest.raises(DeviceError, match="settings"):
        asked(moulded_case())
    answer = asked(moulded_case().at(ir=1.0, tr=8, ii=5))
    assert answer.trips.value == pytest.approx(1.2 * 5 * 250)


def test_cautions_are_there_and_general_ones_last():
    codes = [caution.code for caution in asked(b32(), system="TT").cautions]
    assert codes == ["tt-overcurrent", "re-closing", "qualified-person"]
    assert "measured-loop" in [each.code for each in asked(b32(), loop_ohm=1.0, measured=True).cautions]


@pytest.mark.parametrize(
    "words",
    [
        {"voltage_v": 50.0},
        {"voltage_v": 0.0},
        {"voltage_v": 230.0, "loop_ohm": -1.0},
        {"voltage_v": 230.0, "practice": "x"},
    ],
)
def test_what_cannot_be_is_refused(words):
    with pytest.raises(InputError):
        disconnection(b32(), Circumstances(**words))


def test_a_measured_loop_needs_its_impedance():
    with pytest.raises(InputError, match="measured"):
        Circumstances(voltage_v=230.0, measured=True)


@pytest.mark.parametrize(
    ("delay", "residual_a", "required_s", "current_a"),
    [
        (None, 0.03, 0.4, 0.03),
        (None, 0.03, 0.2, 0.06),
        (None, 0.03, 0.04, 0.25),
        (None, 0.1, 0.04, 0.5),
        ("S", 0.1, 0.2, 0.2),
        ("S", 0.1, 0.15, 0.5),
        ("S", 0.1, 0.04, None),
    ],
)
def test_a_residual_device_without_a_sheet_answers_by_its_product_standard(delay, residual_a, required_s, current_a):
    # IEC 61008-1 table 1: 0.3, 0.15 and 0.04 s at 1, 2 and 5 IDn (S: 0.5, 0.2, 0.15 s), in an article on trip times.
    made = device(kind="rcd", standard="IEC 61008-1", rated_residual_current_a=residual_a, residual_delay=delay)
    trips = asked(made, system="TT", required_s=required_s).trips
    assert trips.value == (None if current_a is None else pytest.approx(current_a))
    assert trips.status == ("not_covered" if current_a is None else "at_most")
    assert current_a is None or trips.basis == "standard"


def test_a_residual_device_under_no_known_standard_is_not_covered_without_a_sheet():
    assert asked(device(kind="rcd", rated_residual_current_a=0.03), system="TT").trips.status == "not_covered"


def test_a_residual_device_with_a_sheet_is_never_taken_by_its_product_standard():
    slow = line("slow", [(1, 0.5), (500, 0.25)], base="xIdn", element="residual")
    made = device(slow, kind="rcd", standard="IEC 61008-1", rated_residual_current_a=0.03)
    assert asked(made, system="TT").trips.status == "not_covered"


def test_a_mean_factor_is_refused_where_the_sheet_shows_the_device_to_hold_there():
    late = device(
        line("fast", [(1.13, 9000), (8, 2), (8, 0.01), (50, 0.008)]),
        line("slow", [(1.45, 3500), (14, 3), (14, 0.05), (50, 0.02)]),
        characteristic="C",
        rated_current_a=20.0,
    )
    answer = asked(late, practice="asnzs3000", loop_ohm=1.0)
    assert "surely holds up to 160 A" in answer.trips.reason
    assert only(answer).outcome == "not covered"
