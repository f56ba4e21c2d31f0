"""A device checked: each rule with a band that just meets, just fails and straddles, and what bounds may decide."""

from dataclasses import replace

import pytest

from curvelab.records.curve import Conditions
from curvelab.records.device import Nameplate, Setting
from curvelab.standards.check import check
from curvelab.standards.rules import load_rules
from curvelab.standards.scope import unchecked
from tests.devices.made import B_SLOW, COLD, HOT, b32, device, line, moulded_case
from tests.standards.devices import passing

RULES = load_rules()
DECIDING = [rule for rule in RULES if rule.asked.waveform is None]
"""Rules of a waveform that no curve can be drawn for wait."""


def name(rule):
    return f"{rule.standard} {rule.id}"


def checked(rule, factor, sd=None, **fields):
    """The finding of a device whose edge passes the rule's current at ``factor`` times its limit."""
    (finding,) = [each for each in check(passing(rule, factor, sd, **fields), [rule]) if each.rule == rule.id]
    return finding


@pytest.mark.parametrize("rule", DECIDING, ids=name)
def test_a_band_just_inside_meets_just_outside_fails_and_across_is_undecided(rule):
    hold = rule.requirement == "hold"
    inside, outside = (1.02, 0.98) if hold else (0.98, 1.02)
    meets, fails, across = checked(rule, inside, 0.002), checked(rule, outside, 0.002), checked(rule, outside, 0.02)
    assert (meets.outcome, fails.outcome, across.outcome) == ("meets", "fails", "undecided")
    assert meets.margin > 0 > fails.margin
    assert meets.interval[0] < meets.value < meets.interval[1]
    assert across.interval[0] < across.limit < across.interval[1]
    assert across.note
    assert meets.permitted == ("at_least" if hold else "at_most")
    assert meets.advisory == rule.advisory


@pytest.mark.parametrize("rule", DECIDING, ids=name)
def test_a_narrow_band_on_the_limit_is_at_the_limit_with_its_margin(rule):
    finding = checked(rule, 1.001, 0.001)
    if rule.current_from != rule.current:
        # Elsewhere in the range of currents the printed impedance stands for it is as sure to fail.
        assert finding.outcome in ("undecided", "at limit")
        return
    assert finding.outcome == "at limit"
    assert "+0.1 %" in finding.note


@pytest.mark.parametrize("rule", [rule for rule in DECIDING if rule.edge != "mean"], ids=name)
def test_a_mean_line_without_tolerance_is_undecided(rule):
    inside = 2.0 if rule.requirement == "hold" else 0.5
    assert checked(rule, inside, 0.001, edge="mean").outcome == "undecided"


@pytest.mark.parametrize("rule", RULES, ids=name)
def test_a_missing_line_meets_nothing(rule):
    other = "slow" if rule.edge == "fast" else "fast"
    assert checked(rule, 2.0 if rule.requirement == "hold" else 0.5, 0.001, edge=other).outcome == "not covered"


@pytest.mark.parametrize("rule", [rule for rule in RULES if rule.asked.waveform], ids=name)
def test_a_rule_for_a_waveform_no_curve_is_drawn_for_waits(rule):
    finding = checked(rule, 2.0 if rule.requirement == "hold" else 0.5, 0.001)
    assert finding.outcome == "not covered"
    assert rule.asked.waveform in finding.note


HOT_TRIP = next(rule for rule in RULES if rule.asked.start == "hot" and rule.requirement == "trip")
COLD_HOLD = next(rule for rule in RULES if rule.asked.start == "cold" and rule.requirement == "hold")


def test_a_hot_trip_test_on_a_cold_slow_edge_may_be_met_never_failed():
    assert checked(HOT_TRIP, 0.9, 0.002, conditions=COLD).outcome == "meets"
    assert checked(HOT_TRIP, 1.5, 0.002, conditions=COLD).outcome == "undecided"


def test_a_cold_hold_test_on_a_hot_fast_edge_may_be_met_never_failed():
    assert checked(COLD_HOLD, 1.1, 0.002, conditions=HOT).outcome == "meets"
    assert checked(COLD_HOLD, 0.5, 0.002, conditions=HOT).outcome == "undecided"


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


@pytest.mark.parametrize("plate", [{"kind": "fuse", "characteristic": "aR"}, {"kind": "mcb", "characteristic": "K"}])
def test_nothing_is_checked_of_devices_no_table_knows_and_it_is_said(plate):
    made = device(line("slow", B_SLOW), rated_current_a=16.0, **plate)
    assert check(made) == ()
    assert f"characteristic {plate['characteristic']}" in unchecked(made.nameplate)
    assert "nothing is met" in unchecked(made.nameplate)


def test_an_isolating_switch_has_no_trip_requirement_and_carries_its_rating():
    isolator = device(kind="switch", key="quay-isolator", rated_current_a=63.0, standard="IEC 60947-3")
    assert check(isolator) == ()
    words = unchecked(isolator.nameplate)
    assert "not a protective device" in words
    assert "carries 63 A" in words


def outcomes_of(made):
    return {finding.rule: finding.outcome for finding in check(made)}


def test_an_adjustable_breaker_is_checked_at_the_settings_its_curves_are_drawn_for():
    findings = check(moulded_case())
    assert {finding.rule for finding in findings} == {
        *("overload-hold-gt63", "overload-trip-gt63", "instantaneous-hold", "instantaneous-trip"),
    }
    assert all("set to ir = 1, tr = 8, ii = 10" in finding.requirement for finding in findings)
    at_once = check(moulded_case().at(ir=0.4, tr=4, ii="off"))
    assert {finding.rule for finding in at_once} == {"overload-hold-gt63", "overload-trip-gt63"}
    # Times scale with tr: 3000 s at 1.2 Ir drawn at tr = 8 is half that at 4, well within 2 h.
    trip = next(finding for finding in at_once if finding.rule == "overload-trip-gt63")
    assert (trip.outcome, trip.value < 1500) == ("meets", True)


def test_an_element_that_is_not_drawn_makes_nothing_hold():
    thermal = {"element": "overload", "conditions": COLD}
    fast = line("fast", [(1.13, 7000), (12, 0.5)], sd=0.01, **thermal)
    slow = line("slow", [(1.4, 3000), (2.55, 50), (12, 2)], sd=0.01, **thermal)
    overload = device(fast, slow, **C16)
    outcomes = outcomes_of(overload)
    assert outcomes["a-le63"] == outcomes["d-hold-C"] == "not covered"
    assert outcomes["b-le63"] == outcomes["c-upper-le32"] == "meets"
    # Its slow edge lasts 2 s at 10 In, and yet the instantaneous element may be in time.
    assert outcomes["e-C"] == "not covered"
    early = device(line("fast", [(1.13, 100), (12, 0.01)], sd=0.01, **thermal), **C16)
    assert outcomes_of(early)["a-le63"] == "fails"


C16 = {"characteristic": "C", "rated_current_a": 16.0}


def test_a_fuse_that_is_off_has_melted_and_one_that_melted_is_not_yet_off():
    def fuse(edge, points, meaning):
        made = line(edge, points, base="A", meaning=meaning, sd=0.005)
        return outcomes_of(device(made, kind="fuse", characteristic="gG", standard="BS 88-2", rated_current_a=32.0))

    # Ia at 0.4 s is 219.6 to 221.8 A, the gate at 0.1 s 350 A, as the tables say.
    operating = fuse("slow", [(150, 1.0), (350, 0.05), (700, 0.006)], "operating")
    assert operating["gate-0.1s-upper-32"] == "meets"
    assert operating["disconnects-0.4s-32"] == "meets"
    late = fuse("slow", [(150, 2.0), (350, 0.2), (700, 0.02)], "operating")
    assert late["gate-0.1s-upper-32"] == "undecided"
    melting = fuse("slow", [(150, 1.0), (350, 0.05), (700, 0.006)], "pre_arcing")
    assert melting["disconnects-0.4s-32"] == "undecided"
    never_off = fuse("slow", [(150, 5.0), (350, 0.05), (700, 0.006)], "pre_arcing")
    assert never_off["disconnects-0.4s-32"] == "fails"


def test_a_hot_test_on_a_cold_line_that_leaves_the_top_is_undecided_not_silent():
    slow = line("slow", [(1.6, 10_000), (5, 8)], sd=0.01, leaves_top=True)
    assert outcomes_of(device(slow, characteristic="B", rated_current_a=16.0))["b-le63"] == "undecided"
    short = line("slow", [(1.6, 8_000), (5, 8)], sd=0.01)
    assert outcomes_of(device(short, characteristic="B", rated_current_a=16.0))["b-le63"] == "undecided"
    hot = line("slow", [(1.6, 10_000), (5, 8)], sd=0.01, leaves_top=True, conditions=HOT)
    assert outcomes_of(device(hot, characteristic="B", rated_current_a=16.0))["b-le63"] == "fails"


def test_a_virtual_time_counts_for_gates_and_energies_only():
    virtual = Conditions(time_kind="virtual", start="cold")
    made = line("fast", [(150, 10), (300, 0.2), (500, 0.01)], base="A", meaning="pre_arcing", conditions=virtual)
    outcomes = outcomes_of(device(made, kind="fuse", characteristic="gG", rated_current_a=32.0))
    # 500 A for 0.01 s are 2500 A2s, above the 1800 A2s the table asks for.
    assert outcomes["i2t-lower-32"] == "meets"
    assert outcomes["gate-0.1s-lower-32"] == "meets"
    assert outcomes["non-fusing-1h"] == "not covered"


def test_a_finding_says_what_was_required_and_by_whom():
    finding = by_rule(b32(conditions=HOT), "b-le63")
    assert finding.requirement == "1.45 xIn from hot: trips in less than 1 h"
    assert (finding.device, finding.standard, finding.clause) == ("riverside-b32", "IEC 60898-1", "Table 7, test b")
    assert "IEC 60898-1" in finding.source
    assert Nameplate(key="x", kind="mcb").standard is None


def test_a_line_that_ends_before_the_current_fails_where_times_never_rise():
    # The fast edge drops out of the plot at 4.2 In: at 5 In it is no longer than there.
    fast = line("fast", [(1.2, 5000), (4.2, 3), (4.2, 0.001)], sd=0.002)
    finding = by_rule(device(fast, characteristic="C", rated_current_a=16.0), "d-hold-C")
    assert (finding.outcome, finding.limit, finding.unit) == ("fails", 5.0, "xIn")
    assert finding.value == pytest.approx(4.2)
    # The slow edge is drawn from 3 In on and is below 60 s only at 4 In: at 2.55 In it is no shorter.
    slow = line("slow", [(3, 100), (5, 20)], sd=0.002)
    assert by_rule(device(slow, characteristic="C", rated_current_a=16.0), "c-upper-le32").outcome == "fails"
    # A slow edge that ends before the current is never taken to go on.
    short = line("slow", [(1.5, 3000), (2.0, 30)], sd=0.002)
    assert by_rule(device(short, characteristic="C", rated_current_a=16.0), "c-upper-le32").outcome == "not covered"


def test_in_a_gap_the_line_on_both_sides_decides():
    stepped = line("slow", [(2, 100), (4.7, 20), (4.7, 0.05)], sd=0.001)
    tail = line("slow", [(5.2, 0.045), (50, 0.02)], sd=0.001)
    slow = replace(stepped, parts=stepped.parts + tail.parts)
    finding = by_rule(device(slow, characteristic="B", rated_current_a=16.0), "e-B")
    assert (finding.outcome, finding.unit) == ("meets", "xIn")
    assert finding.value == pytest.approx(4.7)
    assert by_rule(device(stepped, characteristic="B", rated_current_a=16.0), "e-B").outcome == "not covered"


def test_each_combination_of_settings_that_is_drawn_is_checked_and_an_impossible_one_is_not():
    def drawn(tms):
        points = [(1.5, 27.0 * tms), (2, 13.5 * tms), (5, 3.375 * tms), (20, 0.71 * tms)]
        words = {"meaning": "relay_output", "base": "xIr", "at": {"tms": tms}}
        return line("mean", points, sd=0.001, time_setting="tms", time_setting_at=tms, **words)

    settings = (Setting(name="tms", from_value=0.05, to_value=1.0),)
    plate = {"kind": "relay", "characteristic": "IEC very inverse", "settings": settings}
    both = [finding for finding in check(device(drawn(0.1), drawn(1.0), **plate)) if "mean" in finding.rule]
    asked = {(finding.requirement.rsplit("(", 1)[1], finding.rule) for finding in both}
    assert len(asked) == len(both) == 2 * 8
    at_two = [finding for finding in both if finding.rule.endswith(("lower-2", "lower-5"))]
    assert {finding.outcome for finding in at_two} == {"meets"}
    beyond = check(device(drawn(3.0), **plate))
    assert all("set to tms = 1" in finding.requirement for finding in beyond)


def test_an_overcurrent_curve_of_an_rcbo_says_nothing_of_its_residual_element():
    slow = line("slow", [(1.4, 3000), (2.55, 50), (7, 5), (7, 0.05), (100, 0.02)], sd=0.01)
    plate = {"kind": "rcbo", "characteristic": "C", "rated_current_a": 16.0, "rated_residual_current_a": 0.03}
    outcomes = outcomes_of(device(slow, **plate))
    assert outcomes["e-C"] == "meets"
    assert {outcomes[rule] for rule in ("general-1", "general-2", "general-quarter")} == {"not covered"}


def test_a_short_time_element_may_trip_before_the_instantaneous_one_is_due():
    settings = (
        Setting(name="isd", from_value=2.0, to_value=10.0, base="xIn"),
        Setting(name="tsd", from_value=0.1, to_value=0.4),
        Setting(name="ii", from_value=2.0, to_value=12.0, base="xIn"),
    )
    delayed = [
        line(edge, [(1.0, 9), (1.0, time), (3, time)], base="xIsd", element="delayed", at={"tsd": 0.1}, sd=0.001)
        for edge, time in (("fast", 0.08), ("slow", 0.15))
    ]
    fast = line("fast", [(0.9, 5), (0.9, 0.01), (3, 0.01)], base="xIi", element="instantaneous", sd=0.001)
    made = device(*delayed, fast, kind="mccb", rated_current_a=100.0, settings=settings).at(isd=4, tsd=0.1, ii=10)
    outcomes = outcomes_of(made)
    # At 8 In the short-time element is off after 0.15 s, and the instantaneous one still holds below 9 In.
    assert outcomes["instantaneous-hold"] == "meets"
    assert outcomes["short-time-trip"] == "meets"
    assert outcomes["overload-hold-gt63"] == "not covered"
