"""Discrimination of devices in series: by time, energy and current, of residual devices, and across a transformer."""

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest

from curvelab.calculators.discrimination import discrimination
from curvelab.calculators.facts import rows_of
from curvelab.calculators.in_series import Series, State
from curvelab.calculators.transformer import transformer_of
from curvelab.devices.device import Device
from curvelab.devices.tolerance import edges_of_mean
from curvelab.errors import DeviceError, InputError
from curvelab.records.curve import Conditions, typed_part
from curvelab.records.device import Breaking, DeviceRecord, Tolerance
from tests.devices.made import device, line, moulded_case

ICN = (Breaking(quantity="Icn", value_a=10_000.0, voltage_v=230.0),)


def energy(edge, points, meaning, sd=None):
    return line(edge, points, base="A", quantity="let_through", meaning=meaning, sd=sd)


def breaker(*further, sd=None, key="c16", rated_a=16.0, **fields):
    """Type C with a slow edge that steps at 10 In to 50 ms, and a let-through sheet where one is given."""
    return device(
        line("fast", [(1.13, 9000), (5, 2), (5, 0.01), (500, 0.008)], sd=sd),
        line("slow", [(1.45, 3500), (10, 3), (10, 0.05), (500, 0.02)], sd=sd),
        *further,
        key=key,
        rated_current_a=rated_a,
        breaking=ICN,
        **fields,
    )


def fuse(*further, sd=None, scale=1.0):
    """gG 100 A: mean pre-arcing t = 0.1 s (1000 A / I)^4, tolerance 10 % in current."""
    mean = line("mean", [(500, 1.6), (1200, 0.1 / 1.2**4)], base="A", meaning="pre_arcing", sd=sd)
    tolerance = Tolerance(current=(-0.1 * scale, 0.1 * scale))
    edges = [edge for each in (mean, *further) for edge in edges_of_mean(each, tolerance)]
    return device(*edges, key="gg100", kind="fuse", characteristic="gG", rated_current_a=100.0)


LET_THROUGH = energy("slow", [(100, 300), (10_000, 30_000)], "clearing")
PRE_ARCING = energy("mean", [(1000, 12_000), (80_000, 12_000)], "pre_arcing")


def only(answer):
    (case,) = answer.cases
    return case


def states(case):
    return [State(span.code).name for span in case.spans]


def test_a_fuse_over_a_breaker_by_energy():
    # 12 000 A2s at 0.9 of the current is 9 720 A2s; 3 A2s an ampere reach that at 3240 A.
    case = only(discrimination(fuse(PRE_ARCING), breaker(LET_THROUGH)))
    assert case.holding.up_to.value == pytest.approx(3240.0, rel=1e-7)
    assert case.holding.beyond == State.FAILS_BY_ENERGY
    assert states(case) == ["NOT_COVERED", "HOLDS_BY_TIME", "HOLDS_BY_ENERGY", "FAILS_BY_ENERGY"]
    # Up to 900 A the fuse surely waits 0.1 s: 0.1 (900 / I)^4 s on its fast edge.
    assert case.spans[1].to_a == pytest.approx(900.0, rel=1e-6)


def test_energies_alone_tell_where_no_times_are_drawn():
    upstream = device(*edges_of_mean(PRE_ARCING, Tolerance(current=(-0.1, 0.1))), key="up", kind="fuse")
    case = only(discrimination(upstream, device(LET_THROUGH, key="down")))
    assert case.holding.up_to.value == pytest.approx(3240.0, rel=1e-7)


def test_without_energies_it_is_undetermined_below_a_tenth_of_a_second():
    case = only(discrimination(fuse(), breaker()))
    assert case.holding.up_to.value == pytest.approx(900.0, rel=1e-6)
    assert case.holding.beyond == State.UNDETERMINED


def test_virtual_pre_arcing_times_are_energies():
    points = [(1000, 12e-3), (10_000, 12e-5)]
    virtual = line("mean", points, base="A", meaning="pre_arcing", conditions=Conditions(time_kind="virtual"))
    case = only(discrimination(fuse(virtual), breaker(LET_THROUGH)))
    assert case.holding.up_to.value == pytest.approx(3240.0, rel=1e-6)


def test_a_let_through_line_of_an_upstream_breaker_is_not_what_it_bears():
    upstream = moulded_case().at(ir=1.0, tr=8, ii=5)
    curves = (*upstream.record.curves, energy("fast", [(500, 1e6), (36_000, 1e7)], "clearing"))
    made = Device(DeviceRecord(nameplate=upstream.nameplate, curves=curves)).at(ir=1.0, tr=8, ii=5)
    assert only(discrimination(made, breaker(LET_THROUGH))).holding.beyond == State.UNDETERMINED
    unlatching = replace(curves[-1], meaning="unlatching")
    bearing = Device(DeviceRecord(nameplate=upstream.nameplate, curves=(*curves[:-1], unlatching)))
    case = only(discrimination(bearing.at(ir=1.0, tr=8, ii=5), breaker(LET_THROUGH)))
    assert case.holding.up_to.value == pytest.approx(10_000.0)


def test_an_adjustable_breaker_holds_by_current_up_to_its_instantaneous_pick_up():
    # Ii = 5 x 250 A = 1250 A, and 20 % below that 1000 A.
    answer = discrimination(moulded_case().at(ir=1.0, tr=8, ii=5), breaker())
    assert only(answer).holding.up_to.value == 1000.0
    assert only(answer).holding.beyond == State.UNDETERMINED
    assert any("energy data" in note for note in answer.notes)


def test_a_short_time_delay_holds_by_time_far_above():
    delayed = device(
        line("fast", [(1000, 0.2), (40_000, 0.2)], base="A", element="delayed"),
        line("slow", [(1000, 0.3), (40_000, 0.3)], base="A", element="delayed"),
        key="acb",
        kind="acb",
        rated_current_a=1000.0,
    )
    case = only(discrimination(delayed, breaker()))
    assert case.holding.up_to.status == "at_least"
    assert case.holding.up_to.value == pytest.approx(10_000.0)


def test_an_upstream_line_not_drawn_to_the_left_waits_at_least_as_long_as_its_first_time():
    # The fuse's fast edge begins at 450 A with 1.6 s; the breaker clears in 50 ms from 160 A on.
    assert only(discrimination(fuse(), breaker())).holding.from_a == pytest.approx(160.0, rel=1e-6)


def test_a_pre_arcing_line_downstream_never_clears():
    case = only(discrimination(moulded_case().at(ir=1.0, tr=8, ii=5), fuse()))
    assert case.holding.from_a is None
    assert set(states(case)) == {"NOT_COVERED"}


def test_bands_that_meet_do_not_hold():
    small = breaker(key="c20", rated_a=20.0)
    case = only(discrimination(small, breaker()))
    assert "FAILS_BY_TIME" in states(case)
    # 3500 s (23.2 A / I)^a of the one meets 9000 s (22.6 A / I)^b of the other; a and b from their next points.
    a, b = np.log(3500 / 3) / np.log(10 / 1.45), np.log(9000 / 2) / np.log(5 / 1.13)
    meet = (9000 * 22.6**b / (3500 * 23.2**a)) ** (1 / (b - a))
    assert case.holding.fails_from_a == pytest.approx(meet, rel=1e-9)


def test_the_interval_of_the_last_current_holds_it_and_follows_the_sheets():
    widths = []
    for sd in (0.01, 0.001):
        upstream = fuse(energy("mean", [(500, 12_000), (80_000, 12_000)], "pre_arcing", sd=sd), sd=sd)
        let_through = energy("slow", [(100, 300), (10_000, 30_000)], "clearing", sd=sd)
        low, high = only(discrimination(upstream, breaker(let_through, sd=sd))).holding.up_to.interval
        assert low < 3240 < high
        widths.append(np.log(high / low))
    # Worst against worst: 1.96 sd of both energies; the level line moves by its sd / sqrt(2) along its normal.
    assert widths[0] / widths[1] == pytest.approx(10.0, rel=0.05)
    assert only(discrimination(fuse(PRE_ARCING), breaker(LET_THROUGH))).holding.up_to.interval is None


def test_the_interval_of_an_end_where_only_energies_could_tell():
    low, high = only(discrimination(fuse(sd=0.01), breaker(sd=0.01))).holding.up_to.interval
    assert 850 < low < 900 < high < 950


def test_a_gap_of_the_let_through_line_is_bounded_by_its_next_value():
    gapped = replace(
        LET_THROUGH, parts=(typed_part([100, 1500], [300, 4500]), typed_part([2000, 10_000], [6000, 30_000]))
    )
    assert only(discrimination(fuse(PRE_ARCING), breaker(gapped))).holding.up_to.value == pytest.approx(3240.0)
    over = replace(
        LET_THROUGH, parts=(typed_part([100, 3000], [300, 9000]), typed_part([3500, 10_000], [10_500, 30_000]))
    )
    case = only(discrimination(fuse(PRE_ARCING), breaker(over)))
    assert case.holding.up_to.value == pytest.approx(3000.0)
    assert case.holding.beyond == State.UNDETERMINED


@pytest.mark.parametrize(
    ("up_to_a", "outcome"), [(3000, "meets"), (3240, "at limit"), (5000, "fails"), (900, "meets"), (20_000, "fails")]
)
def test_a_current_wanted(up_to_a, outcome):
    (finding,) = discrimination(fuse(PRE_ARCING), breaker(LET_THROUGH), up_to_a).findings
    assert finding.outcome == outcome


@pytest.mark.parametrize(("up_to_a", "outcome"), [(900, "meets"), (1500, "undecided")])
def test_a_current_wanted_where_only_energies_could_tell(up_to_a, outcome):
    (finding,) = discrimination(moulded_case().at(ir=1.0, tr=8, ii=5), breaker(), up_to_a).findings
    assert finding.outcome == outcome
    assert "energy data" in finding.note


def rcd(key, residual_a, fast_s, slow_s, delay=None):
    return device(
        line("fast", [(0.5, 1.5 * fast_s), (0.5, fast_s), (50, fast_s)], base="xIdn", element="residual"),
        line("slow", [(1, 2 * slow_s), (5, slow_s), (500, slow_s)], base="xIdn", element="residual"),
        key=key,
        kind="rcd",
        rated_current_a=63.0,
        rated_residual_current_a=residual_a,
        residual_delay=delay,
    )


def test_residual_devices_by_time_and_by_ratio():
    delayed, quick = rcd("rcd100s", 0.1, 0.13, 0.2, "S"), rcd("rcd30", 0.03, 0.01, 0.04)
    answer = discrimination(delayed, quick)
    case = only(answer)
    assert case.fault.name == "earth fault"
    assert case.holding.up_to.value == pytest.approx(5.0)
    (ratio,) = answer.findings
    assert (ratio.outcome, ratio.value, ratio.advisory) == ("meets", pytest.approx(3.3333, abs=1e-4), True)


def test_two_quick_residual_devices_do_not_hold_whatever_their_ratio():
    answer = discrimination(rcd("rcd300", 0.3, 0.01, 0.04), rcd("rcd30", 0.03, 0.01, 0.04))
    # Up to 0.5 x 300 mA the upstream one never trips.
    assert only(answer).holding.up_to.value == pytest.approx(0.15)
    assert only(answer).holding.beyond == State.FAILS_BY_TIME
    assert "not of the delayed type" in answer.findings[-1].note


def test_a_residual_device_over_an_overcurrent_device_fails_for_earth_faults():
    answer = discrimination(rcd("rcd30", 0.03, 0.01, 0.04), breaker())
    assert (only(answer).fault.name, only(answer).holding.from_a) == ("earth fault", None)
    assert any("residual current only" in note for note in answer.notes)


def test_an_overcurrent_device_over_a_residual_one_has_nothing_to_compare():
    answer = discrimination(breaker(), rcd("rcd30", 0.03, 0.01, 0.04))
    assert answer.cases == ()
    assert any("clears no fault between lines" in note for note in answer.notes)


def test_an_rcbo_upstream_is_two_cases():
    residual = line("fast", [(0.5, 0.2), (0.5, 0.02), (500, 0.01)], base="xIdn", element="residual")
    upstream = breaker(residual, key="rcbo63", rated_a=63.0, kind="rcbo", rated_residual_current_a=0.03)
    answer = discrimination(upstream, breaker())
    assert [case.fault.name for case in answer.cases] == ["short circuit", "earth fault"]
    assert answer.cases[0].holding.up_to.value == pytest.approx(315.0, rel=1e-6)
    assert answer.cases[1].holding.from_a is None


def test_across_a_transformer_each_fault_has_its_own_share():
    # 11 kV / 400 V: 900 A downstream are 32.7 A upstream in a three-phase fault; see the published factors below.
    upstream = device(
        line("fast", [(10, 40), (100, 0.4)], base="A", meaning="pre_arcing"),
        key="hv",
        kind="fuse",
        rated_current_a=25.0,
    )
    downstream = device(line("slow", [(100, 1.0), (5000, 1.0)], base="A"), key="lv", kind="acb", rated_current_a=630.0)
    answer = discrimination(upstream, downstream, transformer=transformer_of(27.5, "Dyn11"))
    ends = {case.fault.name: case.holding.up_to.value for case in answer.cases}
    # 40 s (10 / I)^2 = 1 s at 63.2 A of the upstream fuse.
    three_phase = 27.5 * 10 * 40**0.5
    assert ends["three-phase"] == pytest.approx(three_phase, rel=1e-6)
    assert ends["phase-to-phase"] == pytest.approx(three_phase * 3**0.5 / 2, rel=1e-6)
    assert ends["phase-to-earth"] == pytest.approx(three_phase * 3**0.5, rel=1e-6)


def limb_currents(connection, fault):
    """Ampere-turns of each limb for 1 A in the faulted lines, with one turn a winding on the secondary side."""
    lines = {"phase-to-phase": np.array([1.0, -1.0, 0.0]), "phase-to-earth": np.array([1.0, 0.0, 0.0])}[fault]
    if connection[1] == "d":
        # Windings ab, bc, ca; equal impedances leave no circulating current.
        return np.array([lines[0] - lines[1], lines[1] - lines[2], lines[2] - lines[0]]) / 3
    if connection[1] == "z":
        return lines - np.roll(lines, -1)
    return lines


@pytest.mark.parametrize(
    "row", rows_of("transformers", "factors"), ids=lambda row: f"{row['connection']} {row['fault']}"
)
def test_transformer_factors_follow_from_ampere_turns(row):
    connection, fault = row["connection"].replace("N", ""), row["fault"]
    if fault == "three-phase":
        assert row["factor"] == 1
        return
    limbs = limb_currents(connection, fault)
    # Turns of a primary winding for one secondary turn, at equal line voltages.
    secondary = {"d": 1.0, "y": 3**0.5, "z": 3.0}[connection[1]]
    turns = secondary * (1.0 if connection[0] == "D" else 3**-0.5)
    windings = limbs / turns
    if connection[0] == "D":
        primary = windings - np.roll(windings, 1)
    else:
        primary = windings if row["connection"].startswith("YN") else windings - windings.mean()
    assert np.abs(primary).max() == pytest.approx(row["factor"], rel=1e-12)


def test_a_transformer_that_cannot_be_is_refused():
    with pytest.raises(InputError, match="Dyn"):
        transformer_of(27.5, "Xyz")
    with pytest.raises(InputError, match="ratio"):
        transformer_of(0.0, "Dyn")


def test_an_adjustable_device_is_asked_at_its_settings_and_a_current_must_be_positive():
    with pytest.raises(DeviceError, match="settings"):
        discrimination(moulded_case(), breaker())
    with pytest.raises(InputError, match="prospective"):
        discrimination(fuse(), breaker(), -1.0)


def random_band(rng, key, rated_a, kind):
    """A band that falls with a step, some of it with a gap, drawn from wherever to wherever."""
    current = rated_a * np.sort(rng.uniform(1.2, 60.0, 6))
    slow_s = np.sort(10 ** rng.uniform(-2, 3, 6))[::-1]
    fast_s = slow_s * rng.uniform(0.2, 0.9)
    current[3] = current[2]
    meaning = "operating" if kind == "fuse" else "clearing"
    lines = [
        line("fast", list(zip(current, fast_s, strict=True)), base="A", sd=0.01, meaning=meaning),
        line("slow", list(zip(current * 1.1, slow_s, strict=True)), base="A", sd=0.01, meaning=meaning),
    ]
    if rng.random() < 0.5:
        energies = [(current[1], 1e3 * rng.uniform(0.5, 2)), (current[-1] * 3, 1e5 * rng.uniform(0.5, 2))]
        lines.append(energy("slow", energies, meaning))
        lines.append(energy("fast", energies, "pre_arcing" if kind == "fuse" else "unlatching"))
    capacity = (Breaking(quantity="Icu", value_a=rated_a * rng.uniform(30, 200)),)
    return device(*lines, key=key, kind=kind, rated_current_a=rated_a, breaking=capacity)


@pytest.mark.parametrize("seed", range(15))
def test_every_current_of_a_span_has_its_state(seed):
    rng = np.random.default_rng([4711, seed])
    upstream = random_band(rng, "up", 63.0, rng.choice(["fuse", "mccb"]))
    downstream = random_band(rng, "down", 20.0, "mcb")
    case = only(discrimination(upstream, downstream))
    series = Series(upstream, downstream, case.fault)
    for span in case.spans:
        inside = np.exp(rng.uniform(np.log(span.from_a * (1 + 1e-7)), np.log(span.to_a * (1 - 1e-7)), 50))
        assert set(series.at(inside).states.tolist()) == {span.code}
    assert all(a.to_a == b.from_a for a, b in pairwise(case.spans))


@pytest.mark.parametrize("seed", range(10))
def test_it_never_holds_by_time_where_the_bands_overlap(seed):
    rng = np.random.default_rng([99, seed])
    upstream, downstream = random_band(rng, "up", 40.0, "mccb"), random_band(rng, "down", 32.0, "mcb")
    for span in only(discrimination(upstream, downstream)).spans:
        current = np.array([np.sqrt(span.from_a * span.to_a)])
        fast, slow = upstream.trip_time(current).fast, downstream.trip_time(current).slow
        both = (fast.status == "value") & (slow.status == "value")
        if both.all() and span.code == State.HOLDS_BY_TIME:
            assert fast.value > slow.value
            assert fast.value >= 0.1
        if both.all() and span.code == State.FAILS_BY_TIME:
            assert fast.value <= slow.value
