"""Trip times and currents with the reason wherever there is no number, let-through beside them, and what is said."""

import pytest

from curvelab.calculators.trip import trip_currents, trip_times
from curvelab.devices.device import Device
from curvelab.records.device import Breaking, DeviceRecord
from tests.devices.made import b32, device, line, rcd


def limiting():
    return device(
        line("slow", [(1.45, 3000), (5, 8), (5, 0.06), (50, 0.02)]),
        line("slow", [(100, 300), (10_000, 30_000)], base="A", quantity="let_through"),
        line("slow", [(100, 150), (10_000, 5000)], base="A", quantity="peak"),
        key="b10",
        rated_current_a=10.0,
    )


def test_each_edge_answers_with_its_status_and_one_that_does_not_says_why():
    answer = trip_times(b32(breaking=()), [160.0, 5000.0])
    at_160, at_5000 = answer.answers
    assert at_160.edges["slow"].value == pytest.approx(8.0)
    assert (at_160.is_answered, at_160.reasons) == (True, ())
    assert not at_5000.is_answered
    assert "slow edge of 'riverside-b32' is drawn from 46.4 A" in at_5000.edges["slow"].reason
    assert "1.6 kA" in at_5000.edges["slow"].reason


def test_let_through_and_cut_off_stand_beside_the_times():
    (answer,) = trip_times(limiting(), [200.0]).answers
    assert answer.edges["slow"].value == pytest.approx(0.031, abs=5e-4)
    assert answer.let_through["slow"].value == pytest.approx(600.0)
    assert answer.peak["slow"].value == pytest.approx(150 * 2 ** (1.5229 / 2), rel=1e-3)
    assert trip_times(b32(), [200.0]).answers[0].let_through is None


def test_times_decide_whether_it_is_answered_and_let_through_where_there_are_none():
    assert trip_times(limiting(), [20.0]).answers[0].is_answered
    sheet = device(line("slow", [(100, 300), (10_000, 30_000)], base="A", quantity="let_through"))
    assert [each.is_answered for each in trip_times(sheet, [50.0, 500.0]).answers] == [False, True]


def test_an_rcd_sees_no_current_that_comes_back_through_it():
    (answer,) = trip_times(rcd(), [500.0], "line_to_neutral").answers
    assert answer.edges["slow"].status == "not_seen"
    assert "residual current only" in answer.edges["slow"].reason
    bare = device(kind="rcd", rated_residual_current_a=0.03)
    assert trip_times(bare, [500.0], "line_to_neutral").answers[0].edges["slow"].status == "not_seen"
    assert trip_currents(rcd(), [0.4], "line_to_neutral").answers[0].edges["trips"].status == "not_seen"
    assert trip_times(rcd(), [0.15]).answers[0].edges["slow"].value == pytest.approx(0.04)


def test_above_the_breaking_capacity_says_which():
    (answer,) = trip_times(b32(), [7000.0]).answers
    assert answer.edges["slow"].status == "above_breaking"
    assert "Icn 6 kA at 230 V" in answer.edges["slow"].reason


def test_currents_for_times_both_ways():
    (answer,) = trip_currents(b32(), [0.4]).answers
    assert (answer.edges["trips"].value, answer.edges["holds"].value) == (160.0, 96.0)


def test_pre_arcing_times_are_said_to_be_no_more_than_that():
    fuse = device(line("slow", [(100, 10), (1000, 0.1)], base="A", meaning="pre_arcing"), kind="fuse")
    assert "pre-arcing" in trip_times(fuse, [200.0]).notes[0]
    assert "pre-arcing" in trip_currents(fuse, [1.0]).notes[0]
    assert trip_times(b32(), [200.0]).notes == ()


def test_a_back_up_fuse_below_its_least_breaking_current_is_warned_of():
    fuse = device(
        line("slow", [(100, 100), (1000, 0.1)], base="A", meaning="operating"),
        kind="fuse",
        characteristic="aM",
        breaking=(Breaking(quantity="Imin", value_a=630.0),),
    )
    answer = trip_times(fuse, [500.0, 700.0])
    assert answer.notes == ("At 500 A it may melt and not break.",)
    assert [caution.code for caution in answer.cautions] == [
        "least-breaking-current",
        "no-overload-protection",
        "qualified-person",
    ]


def test_a_revision_that_is_not_released_is_said_so():
    record = b32().record
    draft = Device(DeviceRecord(nameplate=record.nameplate, curves=record.curves, revision=3, state="checked"))
    released = Device(DeviceRecord(nameplate=record.nameplate, curves=record.curves, revision=4, state="released"))
    assert "Revision 3 of riverside-b32 is not released (checked)." in [
        each.text for each in trip_times(draft, [50.0]).cautions
    ]
    assert "not-released" not in [each.code for each in trip_times(released, [50.0]).cautions]
    assert "re-closing" in [each.code for each in trip_times(released, [50.0]).cautions]


def test_a_switch_has_nothing_to_ask():
    answer = trip_times(device(key="isolator", kind="switch"), [100.0])
    assert not answer.answers[0].is_answered
