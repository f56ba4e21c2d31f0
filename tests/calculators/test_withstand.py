"""Withstand: energies over a whole span of fault currents, the least cross-section and verdicts, worked by hand."""

import math
from dataclasses import replace

import numpy as np
import pytest

from curvelab.calculators.conductors import conductor_of, next_size_mm2
from curvelab.calculators.energy import Way
from curvelab.calculators.facts import rows_of
from curvelab.calculators.spans import places_of, spans_of
from curvelab.calculators.withstand import Faults, withstand
from curvelab.errors import InputError
from curvelab.records.curve import Conditions, typed_part
from curvelab.records.device import Breaking
from tests.devices.made import device, line, moulded_case, rcd

PVC = conductor_of("copper", "pvc70")


def inverse(*further, meaning="operating", kind="fuse", sd=None, **fields):
    """A line of 40 000 A2s throughout: from 4 s at 100 A to 4 ms at 3162 A."""
    points = [(100.0, 4.0), (10**3.5, 0.004)]
    return device(line("slow", points, base="A", meaning=meaning, sd=sd), *further, key="feeder", kind=kind, **fields)


def let_through(points, meaning="operating", **fields):
    return line("slow", points, base="A", quantity="let_through", meaning=meaning, **fields)


def test_4_mm2_of_copper_in_pvc_withstands_211_600_a2s():
    answer = withstand(inverse(), PVC, Faults(least_a=150, greatest_a=500), 4.0)
    assert answer.withstands_a2s == 211_600.0
    assert [each.outcome for each in answer.findings] == ["meets"]
    assert answer.energy.value == pytest.approx(40_000.0)
    assert answer.least_area.value == pytest.approx(200 / 115)
    assert answer.next_size_mm2 == 2.5


def test_an_area_that_is_too_small_fails_and_one_at_the_limit_is_at_the_limit():
    faults = Faults(least_a=150, greatest_a=500)
    assert withstand(inverse(), PVC, faults, 1.5).findings[0].outcome == "fails"
    assert withstand(inverse(), PVC, faults, 200 / 115).findings[0].outcome == "at limit"
    assert withstand(inverse(sd=0.03), PVC, faults, 200 / 115).findings[0].outcome == "undecided"


def test_below_a_tenth_of_a_second_only_a_let_through_sheet_tells():
    # 0.1 s is reached at 632 A: 40 000 A2s / 0.1 s = 632^2.
    answer = withstand(inverse(), PVC, Faults(least_a=150, greatest_a=3000), 4.0)
    assert [each.way for each in answer.stresses] == [Way.TIMES, Way.TOO_SHORT]
    assert answer.stresses[0].to_a == pytest.approx(632.456, abs=1e-3)
    assert [each.outcome for each in answer.findings] == ["meets", "not covered"]
    assert (answer.energy.status, answer.next_size_mm2) == ("at_least", None)
    assert "let-through sheet" in answer.findings[1].note


def test_a_let_through_sheet_carries_on_where_the_times_end():
    made = inverse(let_through([(500, 38_000), (6000, 90_000)]))
    answer = withstand(made, PVC, Faults(least_a=150, greatest_a=6000), 4.0)
    assert [each.way for each in answer.stresses] == [Way.TIMES, Way.LET_THROUGH]
    assert answer.energy.value == pytest.approx(90_000.0)
    assert answer.stresses[1].worst_a == pytest.approx(6000.0)
    assert answer.next_size_mm2 == 4.0


def test_nothing_is_carried_on_beyond_a_let_through_sheet():
    made = inverse(let_through([(500, 38_000), (6000, 90_000)]))
    answer = withstand(made, PVC, Faults(least_a=150, greatest_a=9000), 4.0)
    assert [each.way for each in answer.stresses][-1] == Way.NOT_COVERED
    assert answer.stresses[-1].from_a == pytest.approx(6000.0)


def test_in_a_gap_of_the_let_through_line_its_next_value_bounds_it():
    gapped = let_through([(500, 38_000), (900, 50_000)])
    gapped = replace(gapped, parts=(*gapped.parts, typed_part([1100, 6000], [55_000, 90_000])))
    answer = withstand(inverse(gapped), PVC, Faults(least_a=700, greatest_a=5000), 4.0)
    assert [each.way for each in answer.stresses] == [Way.LET_THROUGH, Way.GAP, Way.LET_THROUGH]
    gap = answer.stresses[1].energy
    assert (gap.status, gap.value) == ("at_most", pytest.approx(55_000.0))
    assert [each.outcome for each in answer.findings] == ["meets"] * 3
    # Less than that may pass there: too small a conductor is not sure to fail in the gap.
    small = withstand(inverse(gapped), PVC, Faults(least_a=1000, greatest_a=1000), 2.0)
    assert small.findings[0].outcome == "undecided"


def test_virtual_times_are_energies():
    points = [(600.0, 0.1), (6000.0, 0.001)]
    virtual = line("slow", points, base="A", meaning="operating", conditions=Conditions(time_kind="virtual"))
    answer = withstand(inverse(virtual), PVC, Faults(least_a=150, greatest_a=6000), 4.0)
    assert [each.way for each in answer.stresses] == [Way.TIMES, Way.LET_THROUGH]
    assert answer.energy.value == pytest.approx(40_000.0)
    assert answer.stresses[1].energy.value == pytest.approx(36_000.0)


def test_a_pre_arcing_line_never_stands_for_operating():
    answer = withstand(inverse(meaning="pre_arcing"), PVC, Faults(least_a=150, greatest_a=500), 4.0)
    assert [each.outcome for each in answer.findings] == ["not covered"]
    assert "pre-arcing" in answer.stresses[0].energy.reason
    melting = inverse(let_through([(500, 38_000), (6000, 90_000)], meaning="pre_arcing"))
    assert withstand(melting, PVC, Faults(least_a=700, greatest_a=900)).energy.status == "not_covered"


def test_longer_than_five_seconds_is_a_matter_of_overload_protection():
    slow = device(line("slow", [(100.0, 100.0), (1000.0, 1.0)], base="A", meaning="operating"), kind="fuse")
    answer = withstand(slow, PVC, Faults(least_a=200, greatest_a=900), 16.0)
    assert [each.way for each in answer.stresses] == [Way.TOO_LONG, Way.TIMES]
    # 5 s at 1000 / sqrt(5) A.
    assert answer.stresses[0].to_a == pytest.approx(1000 / math.sqrt(5), rel=1e-6)
    assert "overload" in answer.findings[0].note


def test_above_the_breaking_capacity_nothing_is_withstood():
    breaking = (Breaking(quantity="Icn", value_a=2000.0),)
    made = inverse(let_through([(500, 38_000), (6000, 90_000)]), breaking=breaking)
    answer = withstand(made, PVC, Faults(least_a=700, greatest_a=5000), 4.0)
    assert [each.way for each in answer.stresses] == [Way.LET_THROUGH, Way.ABOVE_BREAKING]
    assert answer.stresses[0].to_a == pytest.approx(2000.0, rel=1e-6)


def test_the_largest_energy_may_lie_inside_the_span():
    # A step: just below 300 A it takes 1 s, above 0.2 s; the largest energy lies just below the step.
    stepped = device(line("slow", [(100, 4), (300, 1), (300, 0.2), (600, 0.2)], base="A"), rated_current_a=50.0)
    answer = withstand(stepped, PVC, Faults(least_a=120, greatest_a=500))
    assert answer.energy.value == pytest.approx(90_000.0, rel=1e-6)
    assert answer.stresses[0].worst_a == pytest.approx(300.0, rel=1e-6)


def test_one_fault_current_alone():
    answer = withstand(inverse(), PVC, Faults(least_a=200, greatest_a=200), 4.0)
    assert answer.findings[0].outcome == "meets"


def test_the_breaker_behind_a_relay_adds_its_time():
    relay = device(line("slow", [(100, 3), (1000, 0.3)], base="A", meaning="relay_output"), kind="relay")
    assert "relay" in withstand(relay, PVC, Faults(least_a=200, greatest_a=500)).energy.reason
    with_breaker = withstand(relay, PVC, Faults(least_a=1000, greatest_a=1000, breaker_time_s=0.1))
    assert with_breaker.energy.value == pytest.approx(1000**2 * 0.4)


def test_a_residual_current_device_limits_no_short_circuit():
    answer = withstand(rcd(), PVC, Faults(least_a=200, greatest_a=500), 4.0)
    assert "residual current only" in answer.stresses[0].energy.reason
    assert answer.findings[0].outcome == "not covered"


def test_an_adjustable_breaker_at_its_settings():
    answer = withstand(moulded_case().at(ir=1.0, tr=8, ii=10), PVC, Faults(least_a=600, greatest_a=2900), 95.0)
    # I2t elements keep I2t: 8 s at 6 x 250 A, shown from where it takes 5 s on.
    assert answer.energy.value == pytest.approx(8 * 1500**2, rel=1e-6)
    assert answer.findings[-1].outcome == "meets"


@pytest.mark.parametrize(
    ("words", "area_mm2", "k"),
    [
        (("copper", "pvc70"), 300.0, 115),
        (("copper", "pvc70"), 301.0, 103),
        (("copper", "xlpe90"), 25.0, 143),
        (("aluminium", "pvc70"), 16.0, 76),
        (("copper", "pvc70", "separate"), 16.0, 143),
        (("steel", "pvc70", "armour"), 50.0, 51),
        (("steel", "xlpe90", "conduit"), 50.0, 58),
    ],
)
def test_factors_by_material_insulation_use_and_area(words, area_mm2, k):
    # BS 7671 tables 43.1 and 54.2 to 54.5, in an installer's pocket guide; aluminium lines from memory.
    assert conductor_of(*words).factor(area_mm2).k == k


@pytest.mark.parametrize("row", rows_of("conductors", "factors"), ids=lambda row: f"{row['material']}-{row['k']:g}")
def test_every_factor_follows_from_its_temperatures(row):
    # k = K sqrt(ln((tf + b) / (ti + b))), IEC 60364-5-54 annex A (constants from memory): to the printed integer.
    constant, beta = {"copper": (226, 234.5), "aluminium": (148, 228), "lead": (41, 230), "steel": (78, 202)}[
        row["material"]
    ]
    computed = constant * math.sqrt(math.log((row["final_c"] + beta) / (row["initial_c"] + beta)))
    assert abs(computed - row["k"]) < 0.61


def test_the_least_area_changes_its_factor_above_300_mm2():
    assert PVC.least_mm2((115 * 300) ** 2) == pytest.approx(300.0)
    assert PVC.least_mm2((115 * 310) ** 2) == pytest.approx(115 * 310 / 103)
    assert PVC.least_mm2((115 * 300.5) ** 2) == pytest.approx(115 * 300.5 / 103)


def test_standard_sizes():
    assert [next_size_mm2(area) for area in (0.3, 4.0, 4.01, 2000.0)] == [1.0, 4.0, 6.0, None]


def test_words_and_numbers_that_cannot_be_are_refused():
    with pytest.raises(InputError, match="copper pvc70"):
        conductor_of("gold", "pvc70")
    with pytest.raises(InputError, match="MIN and MAX"):
        Faults(least_a=500, greatest_a=100)
    with pytest.raises(InputError, match="cross-section"):
        withstand(inverse(), PVC, Faults(least_a=100, greatest_a=200), -4.0)


def test_spans_are_found_where_a_code_changes_between_and_at_bends():
    def code_at(current):
        return np.searchsorted([150.0, 200.0, 777.7], current, side="right").astype(np.int8)

    spans = spans_of(code_at, places_of(np.array([50.0, 200.0]), 100.0, 1000.0))
    assert [span.code for span in spans] == [0, 1, 2, 3]
    assert [span.to_a for span in spans] == pytest.approx([150.0, 200.0, 777.7, 1000.0], rel=1e-8)
    assert spans[1].to_a == 200.0
