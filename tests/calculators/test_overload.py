"""Overload protection: the set current and the conventional tripping current of the band against a conductor."""

import pytest

from curvelab.calculators.overload import Load, overload
from curvelab.errors import DeviceError, InputError
from tests.devices.made import b32, device, line, moulded_case, rcd


def outcomes(answer):
    return {finding.rule: finding.outcome for finding in answer.findings}


def fuse(meaning="operating", characteristic="gG", rated_a=100.0, **fields):
    # 1.5 In at 2 h.
    points = [(1.4, 10_000), (1.5, 7200), (1.55, 3600), (10, 0.4)]
    slow = line("slow", points, meaning=meaning, **fields)
    return device(slow, key="fuse", kind="fuse", characteristic=characteristic, rated_current_a=rated_a)


def breaker(rated_a=20.0, **fields):
    """Its slow edge reaches an hour at 1.44 In."""
    points = [(1.40, 7200), (1.44, 3600), (2.55, 50), (5, 8), (5, 0.06)]
    return device(line("slow", points, **fields), key="c20", characteristic="B", rated_current_a=rated_a)


def test_a_breaker_protects_what_carries_its_rated_current():
    answer = overload(breaker(), Load(capacity_a=21.0, design_a=18.0))
    assert (answer.set_a, answer.conventional_time_s) == (20.0, 3600.0)
    assert answer.trips.value == pytest.approx(28.8)
    assert answer.least_capacity.value == pytest.approx(20.0)
    assert outcomes(answer) == {"design": "meets", "rated": "meets", "trips": "meets"}


def test_a_conductor_that_carries_too_little_fails_both_ways():
    assert outcomes(overload(breaker(), Load(capacity_a=19.0))) == {"rated": "fails", "trips": "fails"}
    assert outcomes(overload(breaker(), Load(capacity_a=40.0, design_a=24.0)))["design"] == "fails"


def test_a_late_thermal_element_needs_a_larger_conductor():
    late = device(line("slow", [(1.5, 7200), (1.6, 3600), (5, 8), (5, 0.06)]), rated_current_a=20.0, characteristic="B")
    answer = overload(late, Load(capacity_a=21.0))
    assert answer.least_capacity.value == pytest.approx(32 / 1.45)
    assert outcomes(answer) == {"rated": "meets", "trips": "fails"}


@pytest.mark.parametrize(
    ("made", "time_h", "multiple"),
    [
        (breaker(63.0), 1, None),
        (breaker(80.0), 2, None),
        (fuse(rated_a=4.0), 1, 2.1),
        (fuse(rated_a=10.0), 1, 1.9),
        (fuse(rated_a=16.0), 1, 1.6),
        (fuse(rated_a=63.0), 1, 1.6),
        (fuse(rated_a=80.0), 2, 1.6),
        (fuse(rated_a=200.0), 3, 1.6),
        (fuse(rated_a=500.0), 4, 1.6),
    ],
)
def test_conventional_times_by_rating(made, time_h, multiple):
    # IEC 60898-1 table 7 in a breaker's instruction sheet; IEC 60269 in a note on gG times and a national adoption.
    answer = overload(made, Load(capacity_a=1000.0))
    assert answer.conventional_time_s == 3600.0 * time_h
    if multiple is not None:
        by_standard = overload(fuse("pre_arcing", rated_a=made.nameplate.rated_current_a), Load(capacity_a=1000.0))
        assert by_standard.trips.value == pytest.approx(multiple * made.nameplate.rated_current_a)
        assert (by_standard.trips.status, by_standard.trips.basis) == ("at_most", "standard")


def test_the_band_answers_before_the_standard_does():
    answer = overload(fuse(), Load(capacity_a=104.0))
    assert (answer.trips.value, answer.trips.basis) == (pytest.approx(150.0), "sheet")
    assert outcomes(answer) == {"rated": "meets", "trips": "meets"}


def test_the_interval_of_the_band_may_leave_it_undecided():
    answer = overload(breaker(sd=0.02), Load(capacity_a=20.0))
    assert outcomes(answer)["trips"] == "undecided"


@pytest.mark.parametrize(
    ("made", "said"),
    [
        (fuse(characteristic="aM"), "gives no overload protection"),
        (rcd(), "residual current only"),
        (device(key="isolator", kind="switch", rated_current_a=63.0), "not a protective device"),
        (moulded_case().at(ir=1.0, tr=8, ii=5), None),
    ],
)
def test_what_gives_no_overload_protection_says_why(made, said):
    answer = overload(made, Load(capacity_a=300.0))
    assert bool(answer.refusal) == (said is not None)
    if said is not None:
        assert said in answer.refusal
        assert set(outcomes(answer).values()) == {"not covered"}


def test_an_adjustable_breaker_counts_what_it_is_set_to():
    answer = overload(moulded_case().at(ir=0.8, tr=8, ii=5), Load(capacity_a=210.0))
    assert answer.set_a == pytest.approx(200.0)
    assert answer.trips.value == pytest.approx(240.0)
    assert outcomes(answer) == {"rated": "meets", "trips": "meets"}
    with pytest.raises(DeviceError, match="settings"):
        overload(moulded_case(), Load(capacity_a=210.0))


def test_a_relay_needs_its_conventional_time_said():
    relay = device(line("slow", [(1.2, 7200), (7.2, 10)], base="xIn"), kind="relay", rated_current_a=10.0)
    assert "no conventional time" in overload(relay, Load(capacity_a=15.0)).trips.reason
    assert overload(relay, Load(capacity_a=15.0, conventional_time_s=7200.0)).trips.value == pytest.approx(12.0)


def test_a_b32_from_its_own_slow_edge():
    assert overload(b32(), Load(capacity_a=32.0)).trips.value == pytest.approx(1.45 * 32)


def test_numbers_that_cannot_be_are_refused():
    with pytest.raises(InputError, match="capacity_a"):
        Load(capacity_a=0.0)


def test_a_late_fuse_is_not_taken_by_its_standard():
    late = device(
        line("slow", [(180, 7200), (1000, 0.4)], base="A", meaning="pre_arcing"),
        kind="fuse",
        characteristic="gG",
        rated_current_a=100.0,
    )
    answer = overload(late, Load(capacity_a=200.0))
    assert answer.trips.status == "not_covered"
    assert "beyond 1.6 In" in answer.trips.reason
