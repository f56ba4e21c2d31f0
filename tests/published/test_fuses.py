"""Published loop impedances and pre-arcing energies of fuses recomputed from typed lines through the answers."""

import tomllib
from decimal import ROUND_HALF_UP, Decimal
from pathlib import Path

import pytest

from curvelab.standards.check import check
from tests.devices.made import device, line

TABLE = tomllib.loads((Path(__file__).parent / "bs_7671_fuses.toml").read_text(encoding="utf-8"))

PRE_ARCING_I2T = {16: (300, 1000), 63: (9000, 27_000), 100: (27_000, 86_000), 630: (2_250_000, 7_500_000)}
"""Rated current -> least and greatest pre-arcing I2t in A2s at 0.01 s: IEC 60269-1 edition 4, table 7, in a national
adoption of the same text (1250 A: 13.7 and 47 million)."""


def fuse(standard: str, rated_a: float, current_a: float, time_s: float):
    points = [(current_a / 3, 30 * time_s), (current_a, time_s), (current_a * 3, time_s / 30)]
    operating = line("slow", points, base="A", meaning="operating")
    return device(operating, kind="fuse", standard=standard, rated_current_a=rated_a)


def named(row):
    return f"{row['standard']} {row['rated_a']:g} A {row['time_s']:g} s"


@pytest.mark.parametrize("row", TABLE["rows"], ids=named)
def test_each_printed_loop_impedance_is_recomputed_to_the_digit(row):
    made = fuse(row["standard"], float(row["rated_a"]), row["current_a"], row["time_s"])
    trips = made.trip_current(row["time_s"], meaning="operating").trips
    exact = TABLE["factor"] * TABLE["voltage_v"] / trips.value
    printed = Decimal(row["zs_ohm"])
    assert Decimal(repr(exact)).quantize(printed, rounding=ROUND_HALF_UP) == printed


@pytest.mark.parametrize("row", TABLE["rows"], ids=named)
def test_a_fuse_as_slow_as_the_tables_allow_is_not_failed_and_a_slower_one_is(row):
    def outcome(current_a):
        findings = check(fuse(row["standard"], float(row["rated_a"]), current_a, row["time_s"]))
        (found,) = [each for each in findings if each.rule == f"disconnects-{row['time_s']:g}s-{row['rated_a']:g}"]
        return found.outcome

    assert outcome(row["current_a"]) in ("at limit", "undecided")
    assert outcome(0.9 * row["current_a"]) == "meets"
    assert outcome(1.1 * row["current_a"]) == "fails"


def i2t_outcomes(rated_a: float, energy_a2s: float) -> dict[str, str]:
    current = (energy_a2s / 0.01) ** 0.5
    points = [(current / 4, 0.5), (current, 0.01), (current * 3, 0.001)]
    lines = (line(edge, points, base="A", meaning="pre_arcing", sd=0.0005) for edge in ("fast", "slow"))
    findings = check(device(*lines, kind="fuse", characteristic="gG", standard="IEC 60269", rated_current_a=rated_a))
    return {each.rule.rsplit("-", 1)[0]: each.outcome for each in findings if each.unit == "A2s"}


@pytest.mark.parametrize(("rated_a", "limits"), PRE_ARCING_I2T.items())
def test_pre_arcing_energies_at_and_about_the_published_limits(rated_a, limits):
    least, greatest = limits
    assert i2t_outcomes(rated_a, least) == {"i2t-lower": "at limit", "i2t-upper": "meets"}
    assert i2t_outcomes(rated_a, greatest) == {"i2t-lower": "meets", "i2t-upper": "at limit"}
    assert i2t_outcomes(rated_a, 0.95 * least) == {"i2t-lower": "fails", "i2t-upper": "meets"}
    assert i2t_outcomes(rated_a, 1.05 * greatest) == {"i2t-lower": "meets", "i2t-upper": "fails"}
