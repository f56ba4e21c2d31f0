"""From what a worksheet says of a device to records; what cannot be is refused in one line."""

from dataclasses import replace

import pytest

from curvelab.devices.device import Device
from curvelab.devices.series import device_records
from curvelab.errors import DeviceError
from curvelab.records.device import Breaking, Derating, Nameplate, Setting, Tolerance
from curvelab.records.worksheet import DeviceEntry
from tests.devices.made import B_FAST, B_SLOW, line

PLATE = Nameplate(key="riverside-b32", kind="mcb", characteristic="B", standard="IEC 60898-1", rated_current_a=32.0)
BAND = line("fast", B_FAST), line("slow", B_SLOW)


def one(plate=PLATE, curves=BAND, tolerance=None):
    records, doubts = device_records(
        DeviceEntry(nameplate=plate, tolerance=tolerance), [plate.key], {plate.key: curves}
    )
    return records[0], doubts


def test_a_device_has_its_curves_and_no_doubts():
    record, doubts = one()
    assert record.nameplate is PLATE
    assert record.curves == BAND
    assert doubts == ()


def test_a_series_is_one_device_a_rating_with_the_same_band_in_its_base():
    template = replace(PLATE, key="riverside-b{rating}", rated_current_a=None)
    entry = DeviceEntry(nameplate=template, ratings=(6.0, 10.0, 16.0))
    keys = ["riverside-b6", "riverside-b10", "riverside-b16"]
    records, doubts = device_records(entry, keys, dict.fromkeys(keys, BAND))
    assert [record.nameplate.key for record in records] == keys
    assert all(record.curves == BAND for record in records)
    assert [Device(record).trip_current(0.4).trips.value for record in records] == [30.0, 50.0, 80.0]
    assert doubts == ()


def test_a_line_in_amperes_is_no_line_of_a_series():
    template = replace(PLATE, key="riverside-b{rating}", rated_current_a=None)
    entry = DeviceEntry(nameplate=template, ratings=(16.0, 32.0))
    keys = ["riverside-b16", "riverside-b32"]
    with pytest.raises(DeviceError, match="drawn in amperes, for ratings 16, 32 A alike"):
        device_records(entry, keys, dict.fromkeys(keys, (line("slow", B_SLOW, base="A"),)))
    residual = line("slow", [(0.03, 0.2), (0.3, 0.04)], base="A", element="residual")
    records, _ = device_records(entry, keys, dict.fromkeys(keys, (*BAND, residual)))
    assert len(records) == 2


def test_a_device_tolerance_turns_mean_lines_without_edges_into_bands():
    mean = line("mean", [(100, 10), (1000, 0.1)], base="A")
    record, _ = one(curves=(mean,), tolerance=Tolerance(current=(-0.1, 0.1)))
    assert [curve.edge for curve in record.curves] == ["mean", "fast", "slow"]
    slow = line("slow", [(120, 10), (1200, 0.1)], base="A")
    kept, _ = one(curves=(mean, slow), tolerance=Tolerance(current=(-0.1, 0.1)))
    assert [curve.edge for curve in kept.curves] == ["mean", "slow", "fast"]
    assert kept.curves[1] is slow


def test_a_pre_arcing_and_an_operating_line_stand_side_by_side():
    lines = [
        line("mean", [(100, time), (1000, time / 100)], base="A", meaning=meaning)
        for meaning, time in (("pre_arcing", 8.0), ("operating", 10.0))
    ]
    plate = replace(PLATE, kind="fuse", characteristic="gG")
    record, _ = one(plate, tuple(lines), Tolerance(time=(-0.1, 0.1)))
    assert len(record.curves) == 6
    times = Device(record).trip_time(100.0)
    assert (times.fast.value, times.fast.meaning) == (pytest.approx(7.2), "pre_arcing")
    assert (times.slow.value, times.slow.meaning) == (pytest.approx(11.0), "operating")


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"key": "a b"}, "not a device key"),
        ({"key": "x" * 65}, "not a device key"),
        ({"kind": "toaster"}, "kind 'toaster'"),
        ({"rated_current_a": 0.0}, "rated_current_a = 0"),
        ({"rated_residual_current_a": -0.03}, "rated_residual_current_a"),
        ({"breaking": (Breaking(quantity="Icn", value_a=0.0),)}, "Icn = 0"),
        ({"derating": (Derating(ambient_c=40.0, factor=0.0),)}, "derating"),
        ({"settings": (Setting(name="ir"),)}, "no range"),
        ({"settings": (Setting(name="ir", from_value=2.0, to_value=1.0),)}, "down to"),
        ({"settings": (Setting(name="ir", steps=(1.0, -2.0)),)}, "reaches -2"),
        ({"settings": (Setting(name="ir", steps=(1.0,), base="xIq"),)}, "xIq"),
    ],
)
def test_a_nameplate_that_cannot_be_is_refused_in_one_line(changes, message):
    with pytest.raises(DeviceError, match=message) as error:
        one(replace(PLATE, **changes))
    assert "\n" not in str(error.value)


@pytest.mark.parametrize(
    ("points", "message"),
    [
        ([(1, 10), (5, 0)], "not positive"),
        ([(5, 10), (1, 5)], "goes back in current"),
        ([(1, 10), (2, 5), (3, 6)], "longer time at 3 xIn"),
    ],
)
def test_points_that_are_no_curve_are_refused(points, message):
    with pytest.raises(DeviceError, match=message):
        one(curves=(line("slow", points),))


def test_two_lines_for_the_same_are_refused():
    with pytest.raises(DeviceError, match="two slow edges"):
        one(curves=(line("slow", B_SLOW), line("slow", B_FAST)))


def test_words_the_program_does_not_know_are_kept_and_doubted():
    record, doubts = one(replace(PLATE, characteristic="Q", standard="Works standard 7"))
    assert record.nameplate.characteristic == "Q"
    assert [doubt.code for doubt in doubts] == ["unknown-characteristic", "unknown-standard"]
    assert "'Q'" in doubts[0].text
