"""What is plausible beyond a standard, on bands made to be so and not to be so."""

import pytest

from curvelab.standards.family import doubts_about_family
from curvelab.standards.plausible import doubts_about
from curvelab.standards.review import review
from tests.devices.made import b32, device, line

FAST = [(1.2, 1000.0), (3.0, 10.0), (10.0, 0.5)]
SLOW = [(1.2, 4000.0), (3.0, 40.0), (10.0, 2.0)]


def outcomes(*curves, **plate):
    return {finding.clause: finding.outcome for finding in doubts_about(device(*curves, **plate))}


def test_every_finding_is_advisory_and_names_no_standard():
    findings = doubts_about(b32(sd=0.01))
    assert {finding.standard for finding in findings} == {"plausibility"}
    assert all(finding.advisory for finding in findings)
    assert {finding.clause for finding in findings} == {"edges in order", "instantaneous ratio"}
    assert {finding.outcome for finding in findings} == {"meets"}


def test_edges_that_cross_are_out_of_order():
    crossing = [(1.2, 4000.0), (3.0, 8.0), (10.0, 2.0)]
    assert outcomes(line("fast", FAST, sd=0.001), line("slow", SLOW, sd=0.001))["edges in order"] == "meets"
    (finding,) = doubts_about(device(line("fast", FAST, sd=0.001), line("slow", crossing, sd=0.001)))
    assert (finding.outcome, finding.value) == ("fails", pytest.approx(0.8))
    assert "At 3 xIn" in finding.note
    wide = device(line("fast", FAST, sd=0.2), line("slow", crossing, sd=0.2))
    assert doubts_about(wide)[0].outcome == "undecided"


def test_a_mean_line_lies_between_its_edges():
    def mean(factor):
        return line("mean", [(current, factor * time) for current, time in FAST], sd=0.001)

    edges = line("fast", FAST, sd=0.001), line("slow", SLOW, sd=0.001)
    assert outcomes(*edges, mean(2.0))["mean line inside"] == "meets"
    assert outcomes(*edges, mean(0.9))["mean line inside"] == "fails"
    assert outcomes(*edges, mean(4.5))["mean line inside"] == "fails"


def test_a_fuse_ends_in_the_adiabatic_slope():
    def fuse(exponent):
        points = [(100.0, 10.0), (1000.0, 0.1), (1000.0 * 100 ** (1 / exponent), 0.001)]
        return outcomes(line("fast", points, sd=0.001, meaning="pre_arcing", base="A"), kind="fuse")

    # Melting without loss of heat takes a constant I2t: time falls as the square of the current.
    assert fuse(2.0) == {"adiabatic end": "meets"}
    assert fuse(3.0) == {"adiabatic end": "meets"}
    assert fuse(1.5) == {"adiabatic end": "fails"}


def test_a_fuse_line_that_ends_early_says_nothing_of_the_adiabatic_end():
    early = line("fast", [(100.0, 100.0), (400.0, 1.0)], meaning="pre_arcing", base="A")
    assert outcomes(early, kind="fuse") == {}


def test_instantaneous_currents_that_lie_far_apart_are_doubted():
    def magnetic(low, high):
        fast = line("fast", [(2.0, 5.0), (low, 2.0), (low, 0.01)], sd=0.001)
        slow = line("slow", [(2.0, 50.0), (high, 5.0), (high, 0.05)], sd=0.001)
        return outcomes(fast, slow, rated_current_a=16.0)["instantaneous ratio"]

    assert (magnetic(5, 10), magnetic(4, 10)) == ("meets", "fails")


def rated(rating, currents, times=(100.0, 1.0, 0.01)):
    points = list(zip(currents, times, strict=True))
    made = line("fast", points, sd=0.001, meaning="pre_arcing", base="A")
    return device(made, key=f"fuse-{rating}", kind="fuse", characteristic="gG", rated_current_a=float(rating))


def family(*members):
    return {(finding.device, finding.clause): finding.outcome for finding in doubts_about_family(members)}


def test_a_family_in_order_and_evenly_spaced_is_plausible():
    smaller, larger = rated(16, (32, 80, 200)), rated(20, (40, 100, 250))
    assert family(larger, smaller) == {("fuse-20", "rating order"): "meets", ("fuse-20", "rating spacing"): "meets"}


def test_ratings_that_cross_or_lie_too_far_apart_are_doubted():
    smaller = rated(16, (32, 80, 200))
    assert family(smaller, rated(20, (40, 100, 190)))[("fuse-20", "rating order")] == "fails"
    assert family(smaller, rated(20, (70, 180, 450)))[("fuse-20", "rating spacing")] == "fails"


def test_devices_of_other_kinds_are_no_family():
    other = device(line("fast", [(32, 100), (200, 0.01)], base="A"), kind="mcb", rated_current_a=20.0)
    assert family(rated(16, (32, 80, 200)), other) == {}


def test_a_review_holds_standards_plausibility_and_family():
    found = {
        finding.standard for finding in review([b32(sd=0.01), rated(16, (32, 80, 200)), rated(20, (40, 100, 250))])
    }
    assert found == {"IEC 60898-1", "IEC 60269", "plausibility"}
