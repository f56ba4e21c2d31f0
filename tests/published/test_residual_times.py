"""Published break times of residual current devices: a device exactly as slow as allowed, and one that is slower.

IEC 61008-1 Table 1, seen in a data sheet of an RCCB that reproduces it, in installers' articles and in tester manuals.
"""

import pytest

from curvelab.standards.check import check
from tests.devices.made import device, line

GENERAL = {1: 0.3, 2: 0.15, 5: 0.04}
SELECTIVE = {1: (0.13, 0.5), 2: (0.06, 0.2), 5: (0.05, 0.15)}
"""Multiple of the rated residual current -> greatest break time in s; for type S least non-actuating and greatest."""


def outcomes(edge: str, times, delay: str, factor: float = 1.0, residual_a: float = 0.3):
    points = [(multiple, factor * time) for multiple, time in times.items()]
    made = line(edge, points, base="xIdn", element="residual")
    rcd = device(
        made,
        kind="rcd",
        standard="IEC 61008-1",
        rated_current_a=40.0,
        rated_residual_current_a=residual_a,
        residual_delay=delay,
    )
    return {each.rule: each.outcome for each in check(rcd) if each.base == "xIdn"}


@pytest.mark.parametrize(("factor", "outcome"), [(1.0, "at limit"), (0.98, "meets"), (1.02, "fails")])
def test_a_general_device_breaks_in_0_3_0_15_and_0_04_s(factor, outcome):
    found = outcomes("slow", GENERAL, "general", factor)
    assert [found[f"general-{multiple}"] for multiple in GENERAL] == [outcome] * 3


@pytest.mark.parametrize(("factor", "outcome"), [(1.0, "at limit"), (0.98, "meets"), (1.02, "fails")])
def test_a_selective_device_breaks_in_0_5_0_2_and_0_15_s(factor, outcome):
    found = outcomes("slow", {multiple: times[1] for multiple, times in SELECTIVE.items()}, "S", factor)
    assert [found[f"s-upper-{multiple}"] for multiple in SELECTIVE] == [outcome] * 3
    assert not any(rule.startswith("general") for rule in found)


@pytest.mark.parametrize(("factor", "outcome"), [(1.0, "at limit"), (1.02, "meets"), (0.98, "fails")])
def test_a_selective_device_waits_0_13_0_06_and_0_05_s(factor, outcome):
    found = outcomes("fast", {multiple: times[0] for multiple, times in SELECTIVE.items()}, "S", factor)
    assert [found[f"s-lower-{multiple}"] for multiple in SELECTIVE] == [outcome] * 3


def test_up_to_30_ma_a_quarter_ampere_may_take_the_place_of_five_times():
    # The same data sheet: 0.25 A can be used instead of 5 IΔn; 5 x 10 mA are then bound by the time at twice alone.
    slow = {1: 0.3, 2: 0.15, 5: 0.1, 25: 0.035}
    found = check(
        device(
            line("slow", list(slow.items()), base="xIdn", element="residual"),
            kind="rcd",
            rated_current_a=40.0,
            rated_residual_current_a=0.01,
        )
    )
    by_rule = {each.rule: each for each in found}
    assert (by_rule["general-quarter"].outcome, by_rule["general-quarter"].advisory) == ("meets", False)
    assert (by_rule["general-5-small"].outcome, by_rule["general-5-small"].advisory) == ("fails", True)


def test_half_the_residual_current_has_to_be_held():
    for low, outcome in ((0.6, "meets"), (0.45, "fails")):
        fast = [(low, 10.0), (low, 0.09), (2, 0.045), (5, 0.018)]
        made = line("fast", fast, base="xIdn", element="residual", sd=0.001, leaves_top=True)
        rcd = device(made, kind="rcd", rated_residual_current_a=0.03)
        assert {each.rule: each.outcome for each in check(rcd)}["non-operating"] == outcome
