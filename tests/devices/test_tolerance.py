"""A mean line with its stated tolerance becomes a fast and a slow edge."""

import numpy as np
import pytest

from curvelab.devices.device import Device
from curvelab.devices.tolerance import edges_of_mean
from curvelab.errors import DeviceError
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord, Nameplate, Tolerance
from tests.devices.made import line

FUSE = [(500.0, 0.1 * 2.0**4), (1200.0, 0.1 / 1.2**4)]


def asked(mean: Curve, tolerance: Tolerance) -> Device:
    curves = (mean, *edges_of_mean(mean, tolerance))
    return Device(DeviceRecord(nameplate=Nameplate(key="gg-100", kind="fuse", rated_current_a=100.0), curves=curves))


def test_ten_per_cent_in_current_about_a_fourth_power():
    # Worked by hand: t = 0.1 (1000 / I)^4 s; at 1000 A 0.1 x 0.9^4 = 0.06561 s and 0.1 x 1.1^4 = 0.14641 s.
    fuse = asked(line("mean", FUSE, base="A", meaning="pre_arcing"), Tolerance(current=(-0.10, 0.10)))
    times = fuse.trip_time(1000.0)
    assert (times.fast.value, times.slow.value) == (pytest.approx(0.06561, rel=1e-9), pytest.approx(0.14641, rel=1e-9))
    assert (times.fast.basis, times.mean.basis) == ("declared", "sheet")
    currents = fuse.trip_current(0.1)
    assert currents.holds.value == pytest.approx(900.0, rel=1e-12)
    assert currents.trips.value == pytest.approx(1100.0, rel=1e-12)
    assert currents.mean.value == pytest.approx(1000.0, rel=1e-12)


def test_tolerance_in_time_and_in_seconds_shift_the_time():
    mean = line("mean", FUSE, base="A", sd=0.01)
    fast, slow = edges_of_mean(mean, Tolerance(time=(-0.2, 0.3), time_s=(-0.01, 0.02)))
    device = asked(mean, Tolerance(time=(-0.2, 0.3), time_s=(-0.01, 0.02)))
    for current in (500.0, 730.0, 1200.0):
        expected = 0.1 * (1000 / current) ** 4
        times = device.trip_time(current)
        assert times.fast.value == pytest.approx(0.8 * expected - 0.01, rel=2e-3)
        assert times.slow.value == pytest.approx(1.3 * expected + 0.02, rel=2e-3)
    # The same seconds of error are more of a shorter time, less of a longer.
    assert fast.parts[0].sd_value[-1] > 0.01 > slow.parts[0].sd_value[-1]


def test_without_limits_there_are_no_edges():
    assert edges_of_mean(line("mean", FUSE, base="A"), Tolerance()) == ()


def test_a_line_that_leaves_the_top_still_does():
    fast, slow = edges_of_mean(line("mean", FUSE, base="A", leaves_top=True), Tolerance(time=(-0.1, 0.1)))
    assert fast.leaves_top
    assert slow.leaves_top


@pytest.mark.parametrize(
    ("tolerance", "message"),
    [
        (Tolerance(current=(0.1, 0.2)), "tolerance_current"),
        (Tolerance(time=(0.1, -0.1)), "tolerance_time"),
        (Tolerance(current=(-1.0, 0.1)), "takes away everything"),
        (Tolerance(time_s=(-0.2, 0.2)), "zero or below"),
    ],
)
def test_a_tolerance_that_cannot_be_is_refused(tolerance, message):
    with pytest.raises(DeviceError, match=message):
        edges_of_mean(line("mean", FUSE, base="A"), tolerance)


def test_the_band_always_lies_about_the_mean():
    rng = np.random.default_rng(5)
    for _ in range(20):
        current = np.sort(rng.uniform(10, 1000, 8))
        time = np.sort(rng.uniform(0.05, 500, 8))[::-1]
        limits = rng.uniform(0, 0.3, 4)
        device = asked(
            line("mean", list(zip(current, time, strict=True)), base="A"),
            Tolerance(current=(-limits[0], limits[1]), time=(-limits[2], limits[3])),
        )
        answer = (
            device.trip_time(np.geomspace(current[0] * 1.31, current[-1] * 0.69, 50))
            if current[-1] > 2 * current[0]
            else None
        )
        if answer is not None:
            inside = (answer.fast.status == "value") & (answer.slow.status == "value")
            assert (answer.fast.value <= answer.mean.value)[inside].all()
            assert (answer.mean.value <= answer.slow.value)[inside].all()
