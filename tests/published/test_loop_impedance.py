"""Published loop impedances recomputed from typed bands through the device's own answers."""

import tomllib
from decimal import ROUND_HALF_UP, Decimal
from pathlib import Path

import pytest

from tests.devices.made import device, line

TABLE = tomllib.loads((Path(__file__).parent / "bs_7671_table_41_3.toml").read_text(encoding="utf-8"))


def breaker(characteristic: str, rated_a: float, multiple: float):
    lower = {"B": 3.0, "C": 5.0, "D": 10.0}[characteristic]
    return device(
        line("fast", [(1.13, 7000), (lower, 2), (lower, 0.01), (50, 0.005)]),
        line("slow", [(1.45, 3000), (multiple, 4), (multiple, 0.05), (50, 0.02)]),
        characteristic=characteristic,
        rated_current_a=rated_a,
    )


def loop_ohm(characteristic: str, rated_a: float, multiple: float) -> float:
    made = breaker(characteristic, rated_a, multiple)
    return TABLE["factor"] * TABLE["voltage_v"] / made.trip_current(TABLE["time_s"]).trips.value


def test_the_table_has_all_its_rows():
    assert len(TABLE["rows"]) == 37


@pytest.mark.parametrize("row", TABLE["rows"], ids=lambda row: f"{row['characteristic']}{row['rated_a']}")
def test_each_printed_loop_impedance_is_recomputed_to_the_digit(row):
    exact = loop_ohm(row["characteristic"], row["rated_a"], row["multiple"])
    printed = Decimal(repr(exact)).quantize(Decimal("0.01"), rounding=ROUND_HALF_UP)
    assert printed == Decimal(str(row["zs_ohm"])).quantize(Decimal("0.01"))


def test_b32_is_1_3656_ohm():
    # 0.95 x 230 V / (5 x 32 A), worked by hand.
    assert loop_ohm("B", 32.0, 5.0) == 218.5 / 160.0 == 1.365625
