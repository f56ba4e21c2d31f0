"""The shipped demo sheets: drawn by the generator, readable as worksheets, and inside their standards."""

import json
import tomllib
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest

from demo_curves.drawing.files import pixels_of
from demo_curves.drawing.layout import lay_out
from demo_curves.drawing.truth import CurveTruth
from demo_curves.generate import SHEETS, plain_files, sheet_files
from demo_curves.scenario import breakers, fuses, others, residual
from demo_curves.scenario.parts import DemoSheet

DEMO = Path(__file__).parents[2] / "demo_curves"


def curve_of(sheet: DemoSheet, name: str) -> CurveTruth:
    return lay_out(sheet.design).truth.plots[0].curve(name)


def time_at(curve: CurveTruth, current: float) -> float:
    """Time at a current away from steps, straight in log-log; NaN where the line is not printed."""
    log_time = np.interp(np.log10(current), np.log10(curve.current), np.log10(curve.value), left=np.nan, right=np.nan)
    return float(10.0**log_time)


def current_at(curve: CurveTruth, time: float) -> float:
    return float(10.0 ** np.interp(-np.log10(time), -np.log10(curve.value), np.log10(curve.current)))


def test_a_sheet_drawn_again_is_the_one_shipped() -> None:
    for path, contents in sheet_files(residual.rcbo_residual()).items():
        shipped = (DEMO / path).read_bytes()
        if path.endswith(".png"):
            difference = np.abs(pixels_of(contents).astype(int) - pixels_of(shipped).astype(int))
            assert np.mean(difference > 8) < 1e-3
        elif path.endswith(".toml"):
            assert contents == shipped
        elif path.endswith(".json"):
            again, kept = (json.loads(text)["plots"][0] for text in (contents, shipped))
            assert np.allclose(again["matrix_px"], kept["matrix_px"], rtol=1e-12)
            for new, old in zip(again["curves"], kept["curves"], strict=True):
                assert np.allclose(new["value"], old["value"], rtol=1e-6)
    for path, contents in plain_files().items():
        assert contents == (DEMO / path).read_bytes()


def test_every_sheet_of_the_scenario_is_shipped_with_its_worksheets() -> None:
    for make in SHEETS:
        sheet = make()
        assert (DEMO / "sheets" / f"{sheet.name}.png").is_file()
        assert (DEMO / "sheets" / "vector" / f"{sheet.name}.pdf").is_file()
        if sheet.scan is not None:
            assert len(list((DEMO / "sheets" / "scans").glob(f"{sheet.name}.*"))) == 2


def test_worksheets_name_at_least_twenty_devices_and_files_that_exist() -> None:
    keys = set()
    for path in sorted((DEMO / "sheets").rglob("*.toml")):
        worksheet = tomllib.loads(path.read_text(encoding="utf-8"))
        if "sheet" in worksheet:
            assert (path.parent / worksheet["sheet"]["file"]).is_file()
        for device in worksheet["devices"]:
            ratings = device.get("ratings", [device.get("rated_current_a")])
            keys |= {device["key"].replace("{rating}", str(rating)) for rating in ratings}
    assert len(keys) >= 40


def test_the_sheets_are_light_enough_to_ship() -> None:
    assert sum(path.stat().st_size for path in (DEMO / "sheets").rglob("*") if path.is_file()) < 6_000_000


@pytest.mark.parametrize(
    ("sheet", "prefix", "holds", "trips"),
    [
        (breakers.band_b, "", 3.0, 5.0),
        (breakers.bands_c_and_d, "C ", 5.0, 10.0),
        (breakers.bands_c_and_d, "D ", 10.0, 20.0),
    ],
)
def test_breakers_lie_inside_iec_60898_1(sheet, prefix: str, holds: float, trips: float) -> None:
    """IEC 60898-1 time-current operating characteristics, tests a to e, up to 32 A."""
    fast, slow = curve_of(sheet(), f"{prefix}fast"), curve_of(sheet(), f"{prefix}slow")
    assert fast.current.min() > 1.13
    assert time_at(slow, 1.45) < 3600.0
    assert time_at(fast, 2.55) > 1.0
    assert time_at(slow, 2.55) < 60.0
    assert time_at(fast, holds) > 0.1
    assert time_at(slow, trips) < 0.1


def test_two_breakers_are_outside_on_purpose() -> None:
    assert np.isnan(time_at(curve_of(breakers.late_breaker(), "slow"), 1.45))
    assert current_at(curve_of(breakers.loose_magnetic_breaker(), "fast"), 0.1) == pytest.approx(4 * 20.0)
    assert current_at(curve_of(breakers.loose_magnetic_breaker(), "slow"), 0.2) == pytest.approx(8 * 20.0)


@pytest.mark.parametrize("rating", sorted(fuses.GATES))
def test_fuse_lines_lie_inside_the_gates_with_their_tolerance(rating: int) -> None:
    """IEC 60269 gG gates (currents from memory), I2t limits and conventional currents, ±10 % in current."""
    ten_s, five_s, tenth_low, tenth_high, energy_low, energy_high = fuses.GATES[rating]
    curve = curve_of(fuses.family(), f"{rating}")
    assert current_at(curve, 10.0) * 0.9 > ten_s
    assert current_at(curve, 5.0) * 1.1 < five_s
    assert current_at(curve, 0.1) * 0.9 > tenth_low
    assert current_at(curve, 0.1) * 1.1 < tenth_high
    energy = current_at(curve, 0.01) ** 2 * 0.01
    assert energy * 0.81 > energy_low
    assert energy * 1.21 < energy_high
    conventional_s = 3600.0 * (1 if rating <= 63 else 2 if rating <= 160 else 3)
    assert current_at(curve, conventional_s) * 0.9 > 1.25 * rating
    assert current_at(curve, conventional_s) * 1.1 < 1.6 * rating


def test_fuse_lines_do_not_cross() -> None:
    plot = lay_out(fuses.family().design).truth.plots[0]
    lines = [plot.curve(f"{rating}") for rating in sorted(fuses.GATES)]
    times = np.geomspace(0.002, 9000, 60)
    for smaller, larger in pairwise(lines):
        assert all(current_at(larger, time) > 1.05 * current_at(smaller, time) for time in times)


def test_the_relay_follows_iec_60255_151() -> None:
    """Very inverse: 13.5 / (M - 1) times tms; at 10 times the setting and tms 0.5 that is 0.75 s."""
    assert time_at(curve_of(others.relay(), "tms 0.5"), 10.0) == pytest.approx(0.75, rel=1e-4)


def test_residual_devices_lie_inside_iec_61008_1() -> None:
    """IEC 61008-1 Table 1: longest break times, and shortest non-actuating times of type S (2 IΔn from memory)."""
    for name, scale, longest in (("general", 0.03, (0.3, 0.15, 0.04)), ("delayed", 1.0, (0.5, 0.2, 0.15))):
        slow = curve_of(getattr(residual, name)(), "slow")
        for multiple, limit in zip((1.0, 2.0, 5.0), longest, strict=True):
            assert time_at(slow, multiple * scale) < limit
    fast = curve_of(residual.delayed(), "fast")
    for multiple, limit in zip((1.0, 2.0, 5.0), (0.13, 0.06, 0.05), strict=True):
        assert time_at(fast, multiple) > limit
    assert fast.current.min() > 0.5
