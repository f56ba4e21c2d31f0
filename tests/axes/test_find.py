"""Axes read from vector pages with nothing given, and what is refused or doubted."""

from dataclasses import replace

import numpy as np
import pytest

from curvelab.axes.calibrate import calibrate
from curvelab.errors import AxesError
from curvelab.records.axes import Axes, Mark
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry
from tests.axes.printed import CURRENT, TIME, PrintedAxis, PrintedPlot, decades, log_axis, printed, word

CURRENT_ENTRY = AxisEntry(quantity="current")


def read(sheet: Sheet, plot: int | None = None) -> tuple[Axes, tuple[ReadingWarning, ...]]:
    """The axes with nothing given."""
    return calibrate(sheet, CURRENT_ENTRY, None, plot)


def assert_right(axes: Axes, plot: PrintedPlot, factors: tuple[float, float] = (1.0, 1.0)) -> None:
    """Both axes have every line's value within a millionth."""
    across, upwards = plot.across, plot.upwards
    places = np.array([[across.place(x), upwards.place(y)] for x in across.labels for y in upwards.labels])
    want = np.array([[x, y] for x in across.labels for y in upwards.labels]) * factors
    got = np.stack(axes.values(places), axis=1)
    assert np.abs(got / want - 1).max() < 1e-6


def test_a_usual_page_is_read_without_a_word() -> None:
    axes, warnings = read(printed(PrintedPlot()))
    assert warnings == ()
    assert axes.automatic
    assert (axes.current.unit, axes.value.unit, axes.value.quantity) == ("A", "s", "time")
    assert {mark.origin for mark in axes.current.marks} == {"vector"}
    assert_right(axes, PrintedPlot())


def test_what_was_read_gives_the_same_axes_as_marks() -> None:
    sheet = printed(PrintedPlot())
    axes, _ = read(sheet)
    entries = [
        AxisEntry(
            quantity=axis.quantity,
            scale=axis.scale,
            unit=axis.unit,
            factor=axis.factor,
            direction=axis.direction,
            marks=tuple(replace(mark, origin="given", residual=None) for mark in axis.marks),
        )
        for axis in (axes.current, axes.value)
    ]
    again, warnings = calibrate(sheet, entries[0], entries[1])
    assert warnings == ()
    assert not again.automatic
    np.testing.assert_allclose(again.map.projective, axes.map.projective, rtol=1e-12)
    assert again.frame == axes.frame


@pytest.mark.parametrize("mantissas", [(1, 2, 5), (1, 2, 3, 4, 5, 6, 8), (1, 1.5, 2, 2.5, 3, 4, 5, 6, 7, 8, 9)])
def test_other_papers(mantissas: tuple[float, ...]) -> None:
    plot = PrintedPlot(
        across=replace(CURRENT, lines=decades(10, 10000, mantissas)),
        upwards=replace(TIME, lines=decades(0.01, 1000, mantissas)),
    )
    axes, warnings = read(printed(plot))
    assert warnings == ()
    assert_right(axes, plot)


def test_frames_that_end_within_a_decade() -> None:
    plot = PrintedPlot(
        across=log_axis(15, 4000, 80.0, 380.0, "Prospective current (A)"),
        upwards=log_axis(0.004, 7000, 500.0, 60.0, "Operating time [s]"),
    )
    axes, warnings = read(printed(plot))
    assert warnings == ()
    assert_right(axes, plot)


def test_time_downwards_and_current_upwards() -> None:
    plot = PrintedPlot(
        across=log_axis(0.01, 1000, 80.0, 380.0, "Time in s"),
        upwards=log_axis(10, 10000, 60.0, 500.0, "Current in A"),
    )
    axes, warnings = read(printed(plot))
    assert warnings == ()
    assert (axes.current.direction, axes.value.direction) == ("y", "x")
    places = np.array([[plot.across.place(10), plot.upwards.place(100)]])
    np.testing.assert_allclose(np.stack(axes.values(places), axis=1), [[100, 10]], rtol=1e-6)


def test_units_factors_and_bases() -> None:
    plot = PrintedPlot(
        across=log_axis(1, 100, 80.0, 380.0, "Current in A x 10"),
        upwards=log_axis(10, 10000, 500.0, 60.0, "Time in ms"),
    )
    axes, warnings = read(printed(plot))
    assert warnings == ()
    assert (axes.current.unit, axes.current.factor, axes.value.unit) == ("A", 10.0, "ms")
    assert_right(axes, plot, (10.0, 1e-3))
    multiple = PrintedPlot(across=log_axis(1, 100, 80.0, 380.0, "Multiple of rated current In"))
    assert read(printed(multiple))[0].current.base == "xIn"


def test_minutes_and_hours_go_on_along_the_seconds() -> None:
    lines = (*decades(0.1, 60), 120, 300, 600, 1800, 3600, 7200)
    labels = {0.1: "0.1 s", 1: "1 s", 10: "10 s", 60: "1 min", 600: "10 min", 3600: "1 h", 7200: "2 h"}
    plot = PrintedPlot(upwards=PrintedAxis(
        low=0.1, high=7200, start=500.0, stop=60.0, lines=lines, labels=labels, title="Time in s"
    ))  # fmt: skip
    axes, _ = read(printed(plot))
    assert {mark.unit for mark in axes.value.marks} == {"s", "min", "h"}
    assert_right(axes, plot)


def test_let_through_is_told_by_its_title() -> None:
    plot = PrintedPlot(upwards=log_axis(1e3, 1e6, 500.0, 60.0, "Let-through I²t in A²s"))
    axes, warnings = read(printed(plot))
    assert warnings == ()
    assert (axes.value.quantity, axes.value.unit) == ("let_through", "A2s")


def test_a_linear_axis() -> None:
    steps = tuple(float(value) for value in range(1, 11))
    labels = {value: f"{value:g}" for value in steps}
    linear = PrintedAxis(
        low=1, high=10, start=80.0, stop=380.0, lines=steps, labels=labels, title="Multiple of In", linear=True
    )  # fmt: skip
    plot = PrintedPlot(across=linear)
    axes, _ = read(printed(plot))
    assert (axes.current.scale, axes.value.scale) == ("linear", "log")
    assert_right(axes, plot)


def test_one_wrong_label_is_outvoted() -> None:
    wrong = replace(TIME, labels={**TIME.labels, 1.0: "100"})
    axes, _ = read(printed(PrintedPlot(upwards=wrong)))
    assert_right(axes, PrintedPlot())


def test_labels_that_contradict_are_refused() -> None:
    wrong = replace(CURRENT, labels={10: "10", 100: "1000", 1000: "3", 10000: "70"})
    with pytest.raises(AxesError, match=r"not sure|could not be read"):
        read(printed(PrintedPlot(across=wrong)))


@pytest.mark.parametrize("labels", [{}, {100.0: "100"}])
def test_too_few_labels_are_refused(labels: dict[float, str]) -> None:
    with pytest.raises(AxesError, match=r"numbers along x of \[axes.current\] could not be read"):
        read(printed(PrintedPlot(across=replace(CURRENT, labels=labels))))


@pytest.mark.parametrize("title", ["", "Multiple of the setting", "Abscissa"])
def test_an_unknown_unit_is_refused_and_one_given_is_used(title: str) -> None:
    sheet = printed(PrintedPlot(across=replace(CURRENT, title=title)))
    with pytest.raises(AxesError, match=r"unit of \[axes.current\] could not be read"):
        read(sheet)
    axes, warnings = calibrate(sheet, AxisEntry(quantity="current", unit="xIr"), None)
    assert warnings == ()
    assert axes.current.base == "xIr"


def test_a_page_without_a_plot_is_refused() -> None:
    with pytest.raises(AxesError, match="No plot was found"):
        read(printed(more=(word("Current in A", 100, 100),)))


def test_one_axis_may_be_given() -> None:
    marks = (Mark(at=(CURRENT.place(10), 500.0), value=10), Mark(at=(CURRENT.place(1000), 500.0), value=1000))
    bare = replace(CURRENT, labels={}, title="")
    entry = AxisEntry(quantity="current", unit="A", scale="log", marks=marks)
    axes, _ = calibrate(printed(PrintedPlot(across=bare)), entry, None)
    assert not axes.automatic
    assert_right(axes, PrintedPlot())


def two_plots() -> Sheet:
    """A small plot above a larger one."""
    small = PrintedPlot(upwards=log_axis(0.01, 1000, 250.0, 60.0, "Time in s"))
    return printed(small, PrintedPlot(upwards=log_axis(1, 1000, 720.0, 340.0, "Time in ms")), width=440.0, height=800.0)


def test_the_largest_of_two_plots_is_read_with_a_warning() -> None:
    axes, warnings = read(two_plots())
    assert [warning.code for warning in warnings] == ["several-plots"]
    assert (axes.plot, axes.value.unit) == (2, "ms")


def test_a_plot_may_be_asked_for() -> None:
    axes, warnings = read(two_plots(), plot=1)
    assert warnings == ()
    assert (axes.plot, axes.value.unit) == (1, "s")


def test_a_plot_that_is_not_there_is_refused_also_with_marks() -> None:
    with pytest.raises(AxesError, match="Plot 3 is not on this page, which has 2 plots"):
        read(two_plots(), plot=3)
    axes, _ = read(two_plots(), plot=1)
    entries = [
        AxisEntry(quantity=axis.quantity, unit=axis.unit, scale=axis.scale, direction=axis.direction, marks=axis.marks)
        for axis in (axes.current, axes.value)
    ]
    with pytest.raises(AxesError, match="which has 2 plots"):
        calibrate(two_plots(), entries[0], entries[1], 3)


def test_ticks_without_a_grid() -> None:
    plot = PrintedPlot(ticks=True)
    axes, _ = read(printed(plot))
    assert_right(axes, plot)


def test_marks_stand_on_ticks_however_numbers_are_set() -> None:
    """Numbers whose widths are guesses, as those of an SVG are, lie some units off their ticks."""
    plot = PrintedPlot(ticks=True)
    sheet = printed(plot)
    moved = tuple(
        replace(one, box=(one.box[0] + 2.5, one.box[1], one.box[2] + 2.5, one.box[3])) if one.height == 8.0 else one
        for one in sheet.words
    )
    axes, _ = read(replace(sheet, words=moved))
    assert_right(axes, plot)


def test_three_decade_lines_and_numbers_beside_them() -> None:
    lines = (10.0, 100.0, 1000.0)
    across = log_axis(10, 1000, 80.0, 380.0, "Current in A", lines=lines)
    plot = PrintedPlot(across=across)
    sheet = printed(plot)
    moved = tuple(
        replace(one, box=(one.box[0] + 2.0, one.box[1], one.box[2] + 2.0, one.box[3])) if one.height == 8.0 else one
        for one in sheet.words
    )
    axes, _ = read(replace(sheet, words=moved))
    assert_right(axes, plot)
