"""Published values drawn on a sheet, read back through the whole chain, and found inside the stated interval."""

from pathlib import Path

import numpy as np
import pytest

from curvelab.calculators.circumstances import Circumstances
from curvelab.calculators.disconnection import disconnection
from curvelab.devices.device import Device
from curvelab.reading.digitise import digitise
from demo_curves.drawing.design import AxisDesign, CurveDesign
from demo_curves.drawing.formulas import inverse_piece, relay_line, smooth_through, with_vertices
from tests.drawing.shapes import Subject
from tests.drawn import sheet_of

ROUNDING = 0.0005 / 2
"""The tabulated times are printed to a thousandth of a second."""

VERY_INVERSE = {2: 13.5, 5: 3.375, 10: 1.5}
"""IEC 60255-151 curve B at a time multiplier of 1, t = 13.5 / (M - 1) s; constants seen in relay manuals quoting it."""


def axis(quantity: str, unit: str, low: float, high: float, label: str) -> AxisDesign:
    return AxisDesign(quantity=quantity, unit=unit, low=low, high=high, label=label)


def breaker_b32() -> Subject:
    """A type B band whose slow edge steps at exactly 5 In."""
    fast = with_vertices(inverse_piece(1.15, 12.0, 2.0, 2e4, 3.2), [(3.2, 0.0005)])
    slow = with_vertices(inverse_piece(1.38, 80.0, 2.0, 2e4, 5.0), [(5.0, 0.05), (50.0, 0.02)])
    words = {"meaning": "clearing", "element": "whole"}
    return Subject(
        title="Tripping characteristic",
        current=axis("current", "xIn", 1.0, 30.0, "Multiple of rated current"),
        time=axis("time", "s", 0.001, 10000.0, "Time in s"),
        curves=(
            CurveDesign(name="fast", current=fast[0], value=fast[1], edge="fast", width_pt=1.1, **words),
            CurveDesign(name="slow", current=slow[0], value=slow[1], edge="slow", width_pt=1.1, **words),
        ),
        devices=({"key": "trial-b32", "kind": "mcb", "characteristic": "B", "rated_current_a": 32},),
    )


def fuse_bs88_32() -> Subject:
    """An operating band whose slow edge is at exactly 220 A in 0.4 s."""
    slow = smooth_through([(52.0, 1e4), (75.0, 100.0), (125.0, 5.0), (220.0, 0.4), (430.0, 0.03), (1100.0, 0.004)])
    words = {"meaning": "operating", "element": "whole"}
    return Subject(
        title="Operating times",
        current=axis("current", "A", 10.0, 1000.0, "Current in A"),
        time=axis("time", "s", 0.01, 1000.0, "Time in s"),
        curves=(CurveDesign(name="slow", current=slow[0], value=slow[1], edge="slow", width_pt=1.1, **words),),
        devices=(
            {"key": "trial-fuse", "kind": "fuse", "characteristic": "gG", "standard": "BS 88-2", "rated_current_a": 32},
        ),
    )


def relay_very_inverse() -> Subject:
    current, value = relay_line("IEC very inverse", 1.0, (1.2, 19.0))
    line = CurveDesign(
        name="tms 1",
        current=current,
        value=value,
        edge="mean",
        meaning="relay_output",
        element="whole",
        width_pt=1.1,
        at={"tms": 1.0},
    )
    device = {
        "key": "trial-relay",
        "kind": "relay",
        "characteristic": "IEC very inverse",
        "standard": "IEC 60255-151",
        "settings": {"ir": {"from": 50, "to": 500, "base": "A"}, "tms": {"from": 0.05, "to": 1.0}},
    }
    return Subject(
        title="Operating time",
        current=axis("current", "xIr", 1.0, 20.0, "Multiple of the setting"),
        time=axis("time", "s", 0.1, 100.0, "Time in s"),
        curves=(line,),
        devices=(device,),
    )


@pytest.mark.parametrize(("quality", "seed"), [("clean", 41), ("vector", 42), ("grey", 43), ("snapped", 44)])
def test_the_loop_impedance_of_b32_lies_inside_the_interval(quality: str, seed: int, tmp_path: Path) -> None:
    reading = digitise(sheet_of(breaker_b32(), seed, quality).written(tmp_path))
    answer = disconnection(Device(reading.devices[0]), Circumstances(voltage_v=230.0, practice="bs7671"))
    assert answer.greatest_loop.value is not None
    assert answer.greatest_loop.interval is not None
    low, high = answer.greatest_loop.interval
    # 0.95 x 230 V / (5 x 32 A) = 1.3656 ohm, printed as 1.37 in BS 7671:2018 Table 41.3
    assert low <= 0.95 * 230.0 / (5 * 32) <= high
    assert (high - low) / answer.greatest_loop.value < 0.01


@pytest.mark.parametrize(("quality", "seed"), [("clean", 61), ("vector", 62), ("grey", 63)])
def test_the_loop_impedance_of_a_fuse_lies_inside_the_interval(quality: str, seed: int, tmp_path: Path) -> None:
    reading = digitise(sheet_of(fuse_bs88_32(), seed, quality).written(tmp_path))
    trips = Device(reading.devices[0]).trip_current(0.4, meaning="operating").trips
    assert trips is not None
    # 0.95 x 230 V / 220 A = 0.9932 ohm, printed as 0.99 in BS 7671:2018 Table 41.2, BS 88-2 32 A, 0.4 s
    loop_ohm = 0.95 * 230.0 / 220.0
    # The drawn line is straight between its vertices, and up to 2e-4 off the smooth one.
    assert 0.95 * 230.0 / trips.upper * (1 - 2e-4) <= loop_ohm <= 0.95 * 230.0 / trips.lower * (1 + 2e-4)
    assert (trips.upper - trips.lower) / trips.value < 0.01
    # At the limit the printed impedance implies: never failed.
    outcomes = {finding.rule: finding.outcome for finding in reading.findings}
    assert outcomes["disconnects-0.4s-32"] in ("at limit", "undecided")


@pytest.mark.parametrize(("quality", "seed"), [("clean", 51), ("vector", 52), ("grey", 53)])
def test_tabulated_relay_times_lie_inside_the_interval(quality: str, seed: int, tmp_path: Path) -> None:
    reading = digitise(sheet_of(relay_very_inverse(), seed, quality).written(tmp_path))
    relay = Device(reading.devices[0]).at(tms=1.0, ir=100)
    mean = relay.trip_time(np.array(list(VERY_INVERSE), dtype=float), base="xIr").mean
    assert mean is not None
    printed = np.array(list(VERY_INVERSE.values()))
    # A sheet's straight lines between drawn vertices are up to 2e-4 off the formula itself.
    slack = ROUNDING + 2e-4 * printed
    assert np.all(mean.lower - slack <= printed)
    assert np.all(printed <= mean.upper + slack)
