"""What is said of the axes and cannot be used is refused in one line that says which mark and what to do."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.axes.entries import checked_axes
from curvelab.errors import AxesError
from curvelab.records.axes import Mark
from curvelab.records.worksheet import AxisEntry
from tests.axes.pages import image_sheet

BLANK = image_sheet(np.full((520, 640), 250, np.uint8))
CURRENT = AxisEntry(
    quantity="current", scale="log", unit="A", marks=(Mark(at=(80, 470), value=1), Mark(at=(560, 470), value=100))
)
TIME = AxisEntry(
    quantity="time", scale="log", unit="s", marks=(Mark(at=(80, 470), value=0.1), Mark(at=(80, 40), value=100))
)


def marks(*pairs: tuple[float, float, float]) -> tuple[Mark, ...]:
    return tuple(Mark(at=(x, y), value=value) for x, y, value in pairs)


@pytest.mark.parametrize(
    ("current", "words"),
    [
        (replace(CURRENT, marks=()), ("[axes.current] has 0 marks", "two marks", "marks = [")),
        (replace(CURRENT, marks=CURRENT.marks[:1]), ("has 1 mark.",)),
        (replace(CURRENT, marks=marks((80, 470, 1), (81, 40, 100))), ("coincide along x", "2 px apart", "(81, 40)")),
        (replace(CURRENT, marks=marks((80, 470, 1), (641, 470, 100))), ("(641, 470)", "off the page", "640 x 520 px")),
        (replace(CURRENT, marks=marks((80, 470, 1), (-1, 470, 100))), ("(-1, 470)", "off the page")),
        (replace(CURRENT, marks=marks((80, 470, 0), (560, 470, 100))), ("mark 0 at (80, 470)", "log axis", "greater")),
        (replace(CURRENT, marks=marks((80, 470, -5), (560, 470, 100))), ("mark -5", "log axis")),
        (replace(CURRENT, marks=marks((80, 470, 10), (560, 470, 10))), ("have the same value",)),
        (replace(CURRENT, marks=marks((80, 470, 1), (float("nan"), 470, 10))), ("not a number",)),
        (replace(CURRENT, unit="V"), ("Unit 'V' of [axes.current]", "kA")),
        (replace(CURRENT, unit="xIn", marks=(Mark(at=(80, 470), value=1, unit="A"), CURRENT.marks[1])), ("one base",)),
        (replace(CURRENT, factor=0.0), ("Factor 0",)),
        (replace(CURRENT, direction="y"), ("both run along y",)),
    ],
)
def test_what_cannot_be_used_is_refused(current: AxisEntry, words: tuple[str, ...]) -> None:
    with pytest.raises(AxesError) as caught:
        checked_axes(BLANK, current, replace(TIME, direction="y"))
    text = str(caught.value)
    assert "\n" not in text
    for word in words:
        assert word in text


def test_marks_in_another_unit_of_one_time_axis_may_be_equal_in_number() -> None:
    time = replace(TIME, marks=(Mark(at=(80, 470), value=10), Mark(at=(80, 200), value=10, unit="min")))
    (_, value), _ = checked_axes(BLANK, CURRENT, time)
    assert [value.value_of(mark) for mark in value.marks] == [10, 600]


def test_the_same_value_in_two_units_is_refused() -> None:
    time = replace(TIME, marks=(Mark(at=(80, 470), value=60), Mark(at=(80, 200), value=1, unit="min")))
    with pytest.raises(AxesError, match="same value"):
        checked_axes(BLANK, CURRENT, time)


def test_non_positive_values_are_welcome_on_a_linear_axis() -> None:
    current = replace(CURRENT, scale="linear", marks=marks((80, 470, 0), (560, 470, 100)))
    (axis, _), _ = checked_axes(BLANK, current, TIME)
    assert axis.scale == "linear"


def test_directions_follow_from_each_other() -> None:
    for first, second, expected in [
        (None, None, ("x", "y")),
        ("y", None, ("y", "x")),
        (None, "x", ("y", "x")),
        ("x", "y", ("x", "y")),
    ]:
        current = replace(CURRENT, direction=first, marks=marks((80, 470, 1), (560, 40, 100)))
        time = replace(TIME, direction=second, marks=marks((80, 470, 0.1), (560, 40, 100)))
        axes, _ = checked_axes(BLANK, current, time)
        assert (axes[0].direction, axes[1].direction) == expected


def test_a_unit_left_out_is_assumed_aloud() -> None:
    axes, warnings = checked_axes(BLANK, replace(CURRENT, unit=None), TIME)
    assert axes[0].unit == "A"
    assert [warning.code for warning in warnings] == ["unit-assumed"]
    assert "[axes.current]" in warnings[0].text
