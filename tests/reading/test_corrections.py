"""Corrections: each a pure step from one worksheet to the next that reads back as it was written."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from curvelab.errors import InputError, WorksheetError
from curvelab.reading.correct_axes import MoveMark, RemoveMark, SetAxis, SetMark
from curvelab.reading.correct_devices import FillDevice, RemoveDevice, SetDevice
from curvelab.reading.correct_lines import Avoid, Passes, RemoveCurve, SetCurve
from curvelab.reading.correct_sheet import Accept, ChoosePage, ChoosePlot
from curvelab.reading.corrections import Correction
from curvelab.records.worksheet import Worksheet
from curvelab.worksheets.read import parse_worksheet

TEXT = """
format = 1

[sheet]
file = "sheet.png"
page = 2

[axes.current]
unit = "A"
marks = [{ at = [10, 900], value = 10 }, { at = [800, 900], value = 1000 }]

[axes.time]
unit = "s"

[[curves]]
edge = "fast"
device = "weir-b16"
through = [[100, 100], [300, 400]]

[[curves]]
edge = "slow"
device = "weir-b16"
through = [[200, 100]]
avoid = [[0, 0, 5, 5]]

[[curves]]
edge = "mean"
device = "weir-b16"
element = "instantaneous"
points = [[80, 0.02], [160, 0.01]]
source = "handbook"

[[devices]]
key = "weir-b16"
kind = "mcb"

[[accepted]]
code = "gap"
"""


@pytest.fixture
def worksheet() -> Worksheet:
    return parse_worksheet(TEXT)


def test_a_place_is_put_where_the_line_passes_it(worksheet: Worksheet) -> None:
    """Times fall with current: along the line, x and y both grow."""
    for at, place in (((150, 220), 1), ((50, 60), 0), ((500, 700), 2)):
        through = Passes(curve=0, at=at).made(worksheet).curves[0].through
        assert through.index(at) == place
    assert len(Passes(curve=0, at=(100, 100)).made(worksheet).curves[0].through) == 2, "the same place is said once"


def test_on_rising_curves_the_order_runs_upwards() -> None:
    rising = parse_worksheet(TEXT.replace('[axes.time]\nunit = "s"', '[axes.let_through]\nunit = "A2s"'))
    through = Passes(curve=1, at=(300, 50)).made(rising).curves[1].through
    assert through == ((200, 100), (300, 50))


def test_a_new_line_leaves_open_which_it_is(worksheet: Worksheet) -> None:
    entry = Passes(at=(5, 6)).made(worksheet).curves[-1]
    assert (entry.through, entry.edge, entry.meaning) == (((5, 6),), None, None)


def test_what_is_left_out_is_left_out_of_every_traced_line(worksheet: Worksheet) -> None:
    box = (10.0, 10.0, 20.0, 30.0)
    curves = Avoid(box=box).made(worksheet).curves
    assert [curve.avoid for curve in curves] == [(box,), ((0, 0, 5, 5), box), ()]
    assert [curve.avoid for curve in Avoid(box=box, curve=0).made(worksheet).curves][1] == ((0, 0, 5, 5),)


def test_fields_are_set_and_taken_out(worksheet: Worksheet) -> None:
    curve = SetCurve(curve=0, fields={"meaning": "clearing", "start": "cold", "edge": "mean"}).made(worksheet).curves[0]
    assert (curve.meaning, curve.conditions.start, curve.edge) == ("clearing", "cold", "mean")
    assert SetCurve(curve=1, fields={"avoid": None}).made(worksheet).curves[1].avoid == ()
    axis = SetAxis(axis="value", fields={"scale": "log", "unit": "ms"}).made(worksheet).value
    assert axis is not None
    assert (axis.scale, axis.unit) == ("log", "ms")


@pytest.mark.parametrize(
    ("said", "value", "unit"),
    [("2 kA", 2.0, "kA"), ("30", 30.0, None), (5.5, 5.5, None), ("1e3A", 1000.0, "A"), (" 1.5 kA ", 1.5, "kA")],
)
def test_a_mark_may_say_its_unit(worksheet: Worksheet, said: float | str, value: float, unit: str | None) -> None:
    marked = SetMark(axis="current", at=(400, 900), value=said).made(worksheet)
    assert marked.current is not None
    assert (marked.current.marks[-1].value, marked.current.marks[-1].unit) == (value, unit)


def test_marks_are_moved_said_anew_and_struck_out(worksheet: Worksheet) -> None:
    moved = MoveMark(axis="current", index=1, at=(790, 901), value="2 kA").made(worksheet).current
    assert moved is not None
    assert (moved.marks[1].at, moved.marks[1].value, moved.marks[1].unit) == ((790, 901), 2, "kA")
    left = RemoveMark(axis="current", index=0).made(worksheet).current
    assert left is not None
    assert [mark.value for mark in left.marks] == [1000]


def test_curves_follow_a_device_to_its_new_key(worksheet: Worksheet) -> None:
    renamed = SetDevice(device=0, fields={"key": "weir-b20", "rated_current_a": 20}).made(worksheet)
    assert {key for curve in renamed.curves for key in curve.devices} == {"weir-b20"}
    assert renamed.devices[0].nameplate.rated_current_a == 20


def test_blanks_take_numbers_with_units_and_texts(worksheet: Worksheet) -> None:
    filled = FillDevice(device=0, name="rated_residual_current_a", value="30 mA").made(worksheet)
    assert filled.devices[0].nameplate.rated_residual_current_a == pytest.approx(0.03)
    filled = FillDevice(device=0, name="standard", value="IEC 60898-1").made(worksheet)
    assert filled.devices[0].nameplate.standard == "IEC 60898-1"


def test_another_plot_or_page_begins_anew(worksheet: Worksheet) -> None:
    for choice in (ChoosePlot(plot=2), ChoosePage(page=3)):
        begun = choice.made(worksheet)
        assert begun.sheet is not None
        assert (begun.curves, begun.current, begun.accepted) == ((), None, ())
        assert begun.devices == worksheet.devices
    assert ChoosePlot(plot=2).made(worksheet).sheet.plot == 2  # type: ignore[union-attr]
    assert ChoosePage(page=3).made(worksheet).sheet.page == 3  # type: ignore[union-attr]


def test_an_acceptance_has_a_reason_and_a_name(worksheet: Worksheet) -> None:
    accepted = Accept(code="trace-doubt", at=(3, 4), reason="dashes", name="Ida Brook").made(worksheet).accepted
    assert (accepted[-1].code, accepted[-1].place, accepted[-1].name) == ("trace-doubt", (3, 4), "Ida Brook")
    for reason, name in (("", "Ida"), ("why", " ")):
        with pytest.raises(InputError):
            Accept(code="gap", reason=reason, name=name).made(worksheet)


@pytest.mark.parametrize(
    "wrong",
    [
        Passes(curve=3, at=(1, 1)),
        Passes(curve=2, at=(1, 1)),
        Passes(curve=-1, at=(1, 1)),
        Avoid(curve=9, box=(0, 0, 1, 1)),
        Avoid(box=(0, 0, 0, 1)),
        RemoveCurve(curve=3),
        RemoveDevice(device=1),
        RemoveDevice(device=0),
        SetCurve(curve=0, fields={"edge": "sideways"}),
        SetCurve(curve=0, fields={"colours": "#ff0000"}),
        SetCurve(fields={}),
        SetDevice(device=0, fields={"kind": None}),
        SetDevice(fields={"key": "a b", "kind": "mcb"}),
        SetDevice(device=7, fields={"key": "x"}),
        FillDevice(device=0, name="rated_current_a", value="many"),
        FillDevice(device=0, name="rated_current_a", value=-3.0),
        SetMark(axis="current", at=(1, 1), value=-1.0),
        SetMark(axis="current", at=(1, 1), value="3 furlongs"),
        SetMark(axis="peak", at=(1, 1), value=1.0),
        MoveMark(axis="current", index=2, at=(1, 1)),
        MoveMark(axis="time", index=0, at=(1, 1)),
        RemoveMark(axis="current", index=-1),
        ChoosePlot(plot=0),
        ChoosePage(page=-1),
    ],
)
def test_what_cannot_be_is_refused(worksheet: Worksheet, wrong: Correction) -> None:
    with pytest.raises(InputError):
        wrong.made(worksheet)


def test_only_a_sheet_has_pages() -> None:
    with pytest.raises(InputError):
        ChoosePage(page=2).made(parse_worksheet("format = 1"))


number = st.floats(-1e4, 1e4)
place = st.tuples(number, number)
corrections = st.one_of(
    st.builds(Passes, at=place, curve=st.sampled_from([None, 0, 1])),
    st.builds(Avoid, box=st.tuples(number, number, number, number), curve=st.sampled_from([None, 0])),
    st.builds(RemoveCurve, curve=st.integers(0, 3)),
    st.builds(SetMark, axis=st.sampled_from(["current", "value"]), at=place, value=st.floats(1e-6, 1e9)),
    st.builds(MoveMark, axis=st.just("current"), index=st.integers(0, 3), at=place),
    st.builds(Accept, code=st.text(min_size=1), at=st.none() | place, reason=st.text(min_size=1), name=st.just("Ida")),
    st.builds(FillDevice, device=st.just(0), name=st.sampled_from(["maker", "series"]), value=st.text()),
)


@settings(max_examples=60, deadline=None)
@given(steps=st.lists(corrections, max_size=6))
def test_every_step_reads_back_as_it_was_written(steps: list[Correction]) -> None:
    """Whatever is said, the text alone gives the same worksheet; steps that cannot be change nothing."""
    worksheet = parse_worksheet(TEXT)
    for step in steps:
        try:
            worksheet = step.made(worksheet)
        except (InputError, WorksheetError):
            continue
        assert parse_worksheet(worksheet.text) == worksheet
        assert step.words
