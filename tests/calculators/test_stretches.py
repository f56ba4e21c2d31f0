"""Who clears first along the whole current axis, against edges whose crossings are known by hand."""

from itertools import pairwise

import pytest

from curvelab.calculators.compare import compare
from curvelab.calculators.stretches import stretches
from curvelab.devices.device import Device
from curvelab.devices.names import names_of
from curvelab.records.device import DeviceRecord
from tests.calculators.test_compare import flat, inverse
from tests.devices.made import b32, device, line


def told(found):
    return [(each.sooner, pytest.approx(each.from_a, rel=1e-6), pytest.approx(each.to_a, rel=1e-6)) for each in found]


def test_crossing_lines_part_the_axis_where_they_cross():
    # 1e4 / I^2 = 1 s at I = 100 A.
    found = stretches(inverse("up", 1e4), flat("down", 1.0))
    assert told(found) == [("down", 10.0, 100.0), ("up", 100.0, 10_000.0)]


def test_bands_that_overlap_are_undecided_between_their_contacts():
    # A band of 1 s to 4 s against 1e4 / I^2: the slow edge is met at 50 A, the fast edge at 100 A.
    band = device(
        line("fast", [(10.0, 1.0), (1e4, 1.0)], base="A"), line("slow", [(10.0, 4.0), (1e4, 4.0)], base="A"), key="down"
    )
    found = stretches(inverse("up", 1e4), band)
    assert told(found) == [("down", 10.0, 50.0), ("undecided", 50.0, 100.0), ("up", 100.0, 10_000.0)]


def test_the_interval_makes_the_undecided_stretch_wider():
    plain = stretches(inverse("up", 1e4), flat("down", 1.0))
    unsure = stretches(inverse("up", 1e4, sd=0.01), flat("down", 1.0, sd=0.01))
    assert [each.sooner for each in unsure] == ["down", "undecided", "up"]
    assert unsure[0].to_a < plain[0].to_a < unsure[1].to_a


def test_stretches_join_without_holes_and_agree_with_the_comparison():
    pair = [b32(), flat("other", 1.0)]
    found = stretches(*pair)
    assert all(one.to_a == next_.from_a for one, next_ in pairwise(found))
    middles = [(each.from_a * each.to_a) ** 0.5 for each in found]
    assert compare(pair, middles).pairs[0].sooner.tolist() == [each.sooner for each in found]


def test_revisions_of_one_device_have_names_of_their_own():
    made = flat("pump", 1.0)
    second, third = (
        Device(DeviceRecord(nameplate=made.nameplate, curves=made.record.curves, revision=number)) for number in (2, 3)
    )
    assert names_of([second.record, second.record]) == ("pump@2 (1)", "pump@2 (2)")
    assert compare([second, third, inverse("up", 1e4)]).devices == ("pump@2", "pump@3", "up")
    assert [each.sooner for each in stretches(second, third)] == ["undecided"]
