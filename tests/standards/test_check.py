"""A device checked: each rule with a band that just meets, just fails and straddles, and what bounds may decide."""

import pytest

from curvelab.records.curve import Conditions
from curvelab.records.device import Nameplate, Setting
from curvelab.standards.check import check
from curvelab.standards.rules import Rule, load_rules
from tests.devices.made import B_SLOW, HOT, b32, device, line

RULES = load_rules()


def rated_for(rule: Rule) -> float:
    return min(rule.up_to_a, max(16.0, 2 * rule.above_a))


def checked(rule: Rule, factor: float, sd: float | None, start=None, edge=None):
    """The finding of a device whose edge passes the rule's current at ``factor`` times its limit."""
    time = factor * rule.limit_s
    points = [(rule.multiple / 1.1, 1.1 * time), (rule.multiple * 1.1, time / 1.1)]
    edge = edge or ("fast" if rule.requirement == "hold" else "slow")
    made = device(
        line(edge, points, sd=sd, conditions=Conditions(start=start or rule.start)),
        characteristic=rule.characteristics[0],
        rated_current_a=rated_for(rule),
    )
    (finding,) = [finding for finding in check(made) if finding.rule == rule.id]
    return finding


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.id)
def test_a_band_just_inside_meets_just_outside_fails_and_across_is_undecided(rule):
    inside, outside = (1.02, 0.98) if rule.requirement == "hold" else (0.98, 1.02)
    meets, fails, across = checked(rule, inside, 0.002), checked(rule, outside, 0.002), checked(rule, outside, 0.02)
    assert (meets.outcome, fails.outcome, across.outcome) == ("meets", "fails", "undecided")
    assert meets.value == pytest.approx(inside * rule.limit_s)
    assert meets.interval[0] < meets.value < meets.interval[1]
    assert across.interval[0] < rule.limit_s < across.interval[1]
    assert across.note
    assert (meets.limit, meets.unit, meets.current, meets.base) == (rule.limit_s, "s", rule.multiple, rule.base)
    assert meets.advisory == rule.advisory


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.id)
def test_a_narrow_band_on_the_limit_is_at_the_limit_with_its_margin(rule):
    finding = checked(rule, 1.001, 0.001)
    assert finding.outcome == "at limit"
    assert "+0.1 %" in finding.note


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.id)
def test_a_mean_line_without_tolerance_is_undecided(rule):
    inside = 2.0 if rule.requirement == "hold" else 0.5
    assert checked(rule, inside, 0.001, edge="mean").outcome == "undecided"


HOT_TRIP = next(rule for rule in RULES if rule.start == "hot" and rule.requirement == "trip")
COLD_HOLD = next(rule for rule in RULES if rule.start == "cold" and rule.requirement == "hold")


def test_a_hot_trip_test_on_a_cold_slow_edge_may_be_met_never_failed():
    assert checked(HOT_TRIP, 0.9, 0.002, start="cold").outcome == "meets"
    assert checked(HOT_TRIP, 1.5, 0.002, start="cold").outcome == "undecided"


def test_a_cold_hold_test_on_a_hot_fast_edge_may_be_met_never_failed():
    assert checked(COLD_HOLD, 1.1, 0.002, start="hot").outcome == "meets"
    assert checked(COLD_HOLD, 0.5, 0.002, start="hot").outcome == "undecided"


def by_rule(made, rule):
    return next(finding for finding in check(made) if finding.rule == rule)


def test_leaving_the_top_at_the_hold_time_meets_the_hold_test():
    fast = line("fast", [(1.3, 3600), (3.5, 1)], sd=0.01, leaves_top=True)
    finding = by_rule(device(fast, characteristic="B", rated_current_a=16.0), "a-le63")
    assert (finding.outcome, finding.value) == ("meets", 3600.0)
    short = line("fast", [(1.3, 1000), (3.5, 1)], sd=0.01, leaves_top=True)
    assert by_rule(device(short, characteristic="B", rated_current_a=16.0), "a-le63").outcome == "undecided"


def test_a_slow_edge_that_is_above_the_plot_fails_where_its_top_is_long_enough():
    slow = line("slow", [(3, 10_000), (4, 10)], leaves_top=True)
    finding = by_rule(device(slow, characteristic="B", rated_current_a=16.0), "c-upper-le32")
    assert finding.outcome == "fails"


def test_a_missing_line_meets_nothing():
    findings = check(device(line("slow", B_SLOW), characteristic="B", rated_current_a=16.0))
    outcomes = {finding.rule: finding.outcome for finding in findings}
    assert outcomes["a-le63"] == outcomes["c-lower"] == outcomes["d-hold-B"] == "not covered"
    assert outcomes["c-upper-le32"] == "meets"


def test_a_line_that_does_not_reach_is_not_covered():
    slow = line("slow", [(1.45, 3000), (2.0, 100)])
    assert by_rule(device(slow, characteristic="B", rated_current_a=16.0), "c-upper-le32").outcome == "not covered"


def test_a_step_at_the_test_current_is_at_the_limit_in_current():
    finding = by_rule(b32(), "e-B")
    assert (finding.outcome, finding.value, finding.limit, finding.unit) == ("at limit", 5.0, 5.0, "xIn")


def test_a_traced_step_near_the_test_current_is_judged_by_its_current():
    def stepped(multiple, sd):
        return device(
            line("slow", [(2, 100), (multiple, 8), (multiple, 0.05), (50, 0.02)], sd=sd),
            characteristic="B",
            rated_current_a=16.0,
        )

    assert by_rule(stepped(5.002, 0.0008), "e-B").outcome == "at limit"
    assert by_rule(stepped(5.002, 0.02), "e-B").outcome == "undecided"
    assert by_rule(stepped(4.9, 0.002), "e-B").outcome == "meets"
    assert by_rule(stepped(5.1, 0.002), "e-B").outcome == "fails"


def test_ninety_seconds_at_2_55_fails_at_small_ratings_and_meets_at_large_ones():
    slow = line("slow", [(2, 200), (2.55, 90), (4, 20)], sd=0.01)
    for rating, outcome in ((16.0, "fails"), (32.0, "fails"), (40.0, "meets"), (63.0, "meets")):
        made = device(slow, characteristic="B", rated_current_a=rating)
        (finding,) = [finding for finding in check(made) if finding.rule.startswith("c-upper")]
        assert finding.outcome == outcome


def test_a_magnetic_band_at_4_to_8_sold_as_c_is_caught():
    fast = line("fast", [(2.55, 6), (4, 3), (4, 0.012), (50, 0.005)], sd=0.003)
    slow = line("slow", [(2.55, 50), (8, 5), (8, 0.05), (50, 0.02)], sd=0.003)
    outcomes = {f.rule: f.outcome for f in check(device(fast, slow, characteristic="C", rated_current_a=16.0))}
    assert outcomes["d-hold-C"] == "fails"
    assert outcomes["e-C"] == "meets"


def test_nothing_is_checked_of_devices_no_table_knows():
    for plate in ({"kind": "fuse", "characteristic": "gG"}, {"kind": "mcb", "characteristic": "K"}, {"kind": "switch"}):
        assert check(device(line("slow", B_SLOW), rated_current_a=16.0, **plate)) == ()


def test_a_device_without_its_settings_has_nothing_to_check_yet():
    made = device(
        line("slow", B_SLOW),
        characteristic="B",
        rated_current_a=16.0,
        settings=(Setting(name="ir", from_value=0.5, to_value=1.0, base="xIn"),),
    )
    assert check(made) == ()


def test_a_finding_says_what_was_required_and_by_whom():
    finding = by_rule(b32(conditions=HOT), "b-le63")
    assert finding.requirement == "1.45 xIn from hot: trips in less than 1 h"
    assert (finding.device, finding.standard, finding.clause) == ("riverside-b32", "IEC 60898-1", "Table 7, test b")
    assert "IEC 60898-1" in finding.source
    assert Nameplate(key="x", kind="mcb").standard is None
