from dataclasses import replace

import pytest
from hypothesis import HealthCheck, given
from hypothesis import settings as limits
from hypothesis import strategies as st

from curvelab.errors import WorksheetError
from curvelab.worksheets.read import parse_worksheet
from curvelab.worksheets.toml import inline
from curvelab.worksheets.write import worksheet_text
from tests.worksheets.examples import BREAKER, SWITCH, TYPED
from tests.worksheets.strategies import worksheets


def without_text(worksheet):
    return replace(worksheet, text="")


@limits(max_examples=150, deadline=None, suppress_health_check=list(HealthCheck))
@given(worksheets())
def test_any_worksheet_reads_back_as_itself(worksheet):
    assert without_text(parse_worksheet(worksheet_text(worksheet))) == worksheet


@pytest.mark.parametrize("text", [BREAKER, TYPED, SWITCH])
def test_a_typed_worksheet_reads_back_and_settles_at_once(text):
    first = parse_worksheet(text)
    written = worksheet_text(first)
    assert without_text(parse_worksheet(written)) == without_text(first)
    assert worksheet_text(parse_worksheet(written)) == written


def test_a_comment_says_where_a_mark_came_from_and_the_mark_reads_back_as_given():
    worksheet = parse_worksheet(BREAKER)
    found = tuple(replace(mark, origin="label", residual=0.1) for mark in worksheet.current.marks)
    text = worksheet_text(replace(worksheet, current=replace(worksheet.current, marks=found)))
    assert text.count("# from the label read there") == 2
    assert parse_worksheet(text).current == worksheet.current


def test_every_key_that_is_written_is_one_a_reader_knows_in_the_contracts_order():
    lines = worksheet_text(parse_worksheet(BREAKER)).splitlines()
    assert lines[0] == "format = 1"
    headings = [line for line in lines if line.startswith("[")]
    assert headings[:4] == ["[document]", "[sheet]", "[axes.current]", "[axes.time]"]
    assert "value = 10.0" not in "\n".join(lines)


def test_long_lists_are_broken_into_lines():
    points = tuple((float(at), 1000.0 / at) for at in range(1, 200))
    worksheet = parse_worksheet(TYPED)
    text = worksheet_text(replace(worksheet, curves=(replace(worksheet.curves[0], points=points),)))
    assert max(map(len, text.splitlines())) <= 120
    assert parse_worksheet(text).curves[0].points == points


@limits(max_examples=300, deadline=None)
@given(st.floats(allow_nan=False, allow_infinity=False))
def test_numbers_are_written_exactly(number):
    text = f"format = 1\n[[accepted]]\ncode = 'a'\nplace = {inline((number, 0.0))}"
    assert parse_worksheet(text).accepted[0].place == (number, 0.0)


@limits(max_examples=300, deadline=None)
@given(st.text())
def test_any_text_gives_a_worksheet_or_one_line(text):
    with pytest.raises(WorksheetError) as refused:
        parse_worksheet(text)
    assert len(str(refused.value).splitlines()) == 1
