import numpy as np
import pytest

from curvelab.plots.shapes import between_outlines, halo_outlines
from curvelab.records.curve import COVERAGE_FACTOR, Curve, Part, typed_part

FLOOR = 1e-6


def curve(edge, *parts, quantity="time"):
    return Curve(element="whole", edge=edge, meaning="clearing", base="A", parts=parts, quantity=quantity)


def area(outline):
    """Of an outline in decades, by the shoelace formula."""
    x, y = np.log10(outline).T
    return abs(np.dot(x, np.roll(y, -1)) - np.dot(y, np.roll(x, -1))) / 2


def straight(start, end, sd):
    """A line of slope -1 with an uncertainty of ``sd`` along its normal."""
    current = np.geomspace(start, end, 30)
    known = np.full(30, sd * np.sqrt(2))
    return Part(current=current, value=100 / current, sd_current=known, sd_value=known, sd_common=known)


def test_the_area_between_steps_is_exact():
    fast = typed_part([1, 10, 10, 100], [100, 100, 1, 1])
    slow = typed_part([1, 20, 20, 100], [200, 200, 2, 2])
    (outline,) = between_outlines(curve("fast", fast), curve("slow", slow), FLOOR)
    two = np.log10(2)
    assert area(outline) == pytest.approx(two * 1 + two * 2 + two * (1 - two) + two * two, rel=1e-9)


def test_a_gap_cuts_the_area_and_a_missing_corner_does_not():
    whole = typed_part([1, 100], [1000, 10])
    for width, pieces in ((0.5, 2), (0.02, 1)):
        middle = 10.0
        halves = (
            typed_part([0.5, middle], [1000, 50]),
            typed_part([middle * 10**width, 90], [50 / 10**width, 5]),
        )
        outlines = list(between_outlines(curve("fast", *halves), curve("slow", whole), FLOOR))
        assert len(outlines) == pieces


def test_overlapping_gaps_of_both_edges_leave_nothing_between():
    fast = [typed_part([1, 3], [100, 30]), typed_part([30, 100], [3, 1])]
    slow = [typed_part([1, 5], [200, 40]), typed_part([12, 100], [16, 2])]
    outlines = list(between_outlines(curve("fast", *fast), curve("slow", *slow), FLOOR))
    assert len(outlines) == 2
    assert not any(((o[:, 0] > 6) & (o[:, 0] < 25) & (o[:, 1] > 4)).any() for o in outlines)


def test_where_the_fast_edge_leaves_by_the_floor_the_area_goes_on_along_it():
    fast = typed_part([1, 10, 10], [100, 10, 0.01])
    slow = typed_part([1, 20, 20, 500], [200, 20, 0.1, 0.05])
    (outline,) = between_outlines(curve("fast", fast), curve("slow", slow), 0.01)
    assert any(np.allclose(corner, (500, 0.01)) for corner in outline)


def test_rising_edges_of_let_through_are_filled_too():
    fast, slow = typed_part([1, 100], [1, 100]), typed_part([1, 100], [2, 200])
    edges = curve("fast", fast, quantity="let_through"), curve("slow", slow, quantity="let_through")
    (outline,) = between_outlines(*edges, FLOOR)
    assert area(outline) == pytest.approx(2 * np.log10(2), rel=1e-9)


def test_the_halo_has_its_true_width_along_the_normal():
    sd = 0.02
    (outline,) = halo_outlines(curve("slow", straight(1, 100, sd)))
    length = 2 * np.sqrt(2)
    width = 2 * COVERAGE_FACTOR * sd / np.log(10)
    assert area(outline) == pytest.approx(length * width, rel=1e-9)


def test_the_halo_of_a_vertical_stretch_is_its_uncertainty_in_current():
    nothing = np.full(2, np.nan)
    known = np.full(2, 0.03)
    step = Part(current=[10, 10], value=[1, 0.01], sd_current=known, sd_value=nothing, sd_common=known)
    (outline,) = halo_outlines(curve("slow", step))
    reach = np.exp(COVERAGE_FACTOR * 0.03)
    assert outline[:, 0] == pytest.approx([10 * reach, 10 * reach, 10 / reach, 10 / reach])


def test_nothing_known_means_no_halo():
    assert list(halo_outlines(curve("slow", typed_part([1, 10], [10, 1])))) == []
