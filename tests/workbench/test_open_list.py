"""The list of what is open: most harmful first, each entry settled by one of its answers."""

import numpy as np
import pytest
from starlette.testclient import TestClient

from curvelab.errors import AxesError, TraceError
from curvelab.records.curve import Curve, typed_part
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.trace import Trace
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import Worksheet
from curvelab.workbench.open_list import ORDER, open_entries
from curvelab.worksheets.read import parse_worksheet
from tests.workbench.served import changed, opened

TEXT = """
format = 1
[sheet]
file = "sheet.png"
[[curves]]
edge = "slow"
meaning = "clearing"
through = [[100, 100]]
[[curves]]
edge = "fast"
through = [[100, 100]]
[[devices]]
key = "weir-b16"
kind = "mcb"
standard = "IEC 60898-1"
"""


def line(meaning: str | None, x: float) -> ReadCurve:
    places = np.stack([np.full(50, x), np.linspace(100, 600, 50)], axis=1)
    trace = Trace(
        places=places,
        sd=np.full(50, 0.1),
        correlation_length=10.0,
        gaps=(),
        ends_at_frame=(True, True),
        colour=None,
        width=2.0,
        boundary=False,
        origin="guided",
        confidence=1.0,
    )
    current, value = np.array([1.0, 2.0]), np.array([10.0, 1.0])
    curve = Curve(element="whole", edge="slow", meaning=meaning, base="A", parts=(typed_part(current, value),))
    unknown = np.full(50, np.nan)
    return ReadCurve(
        trace=trace,
        current=unknown,
        value=unknown,
        sd_current=unknown,
        sd_value=unknown,
        curve=curve,
        devices=("weir-b16",),
    )


def reading(worksheet: Worksheet, *warnings: ReadingWarning) -> Reading:
    gap = ReadingWarning(code="gap", text="not seen between 16 A and 20 A", at=(100.0, 230.0))
    return Reading(
        worksheet=worksheet,
        sheet=None,
        axes=None,
        curves=(line("clearing", 100.0), line(None, 300.0)),
        devices=(),
        findings=(),
        warnings=(*warnings, gap),
        program_version="0",
    )


@pytest.fixture
def worksheet() -> Worksheet:
    return parse_worksheet(TEXT)


def test_the_most_harmful_stands_first(worksheet: Worksheet) -> None:
    doubts = (
        ReadingWarning(code="trace-doubt", text="two ways", at=(301.0, 400.0)),
        ReadingWarning(code="values-doubtful", text="1 000 or 7 000", at=(50.0, 700.0)),
        ReadingWarning(code="of-tomorrow", text="a code nobody knew"),
    )
    entries = open_entries(worksheet, reading(worksheet, *doubts), None)
    assert [entry.code for entry in entries] == [
        "values-doubtful",
        "meaning-unknown",
        "trace-doubt",
        "gap",
        "blank-rated-current-a-weir-b16",
        "of-tomorrow",
    ]
    kinds = [ORDER.index(entry.kind) for entry in entries]
    assert kinds == sorted(kinds)
    assert entries[2].curve == 1, "the line that comes closest"
    assert entries[3].curve == 0
    assert entries[3].at == (100.0, 230.0)
    assert len({entry.id for entry in entries}) == len(entries)


def test_every_entry_has_an_answer_and_every_answer_a_change(worksheet: Worksheet) -> None:
    for entry in open_entries(worksheet, reading(worksheet), None):
        assert entry.answers, entry.code
        assert all(answer.change for answer in entry.answers)


def test_what_is_accepted_is_settled_at_its_place_only() -> None:
    accepted = parse_worksheet(
        TEXT + '[[accepted]]\ncode = "gap"\nplace = [101, 231]\nreason = "label"\nname = "Ida"\n'
    )
    assert "gap" not in [entry.code for entry in open_entries(accepted, reading(accepted), None)]
    elsewhere = parse_worksheet(TEXT + '[[accepted]]\ncode = "gap"\nplace = [101, 431]\n')
    assert "gap" in [entry.code for entry in open_entries(elsewhere, reading(elsewhere), None)]


@pytest.mark.parametrize(("error", "kind"), [(AxesError("no grid"), "axis"), (TraceError("no line"), "other")])
def test_a_failure_stands_alone(worksheet: Worksheet, error: AxesError | TraceError, kind: str) -> None:
    (entry,) = open_entries(worksheet, reading(worksheet), error)
    assert (entry.code, entry.kind) == ("failed", kind)


def test_a_failing_check_is_accepted_with_a_reason_and_then_stored(client: TestClient) -> None:
    state = opened(client, "vector/mcb-loose-magnetic")
    assert not state["can_store"]
    while state["open"]:
        entry = state["open"][0]
        (answer,) = [each for each in entry["answers"] if each["asks"] == "reason"]
        state = changed(client, state, **answer["change"], reason="An invented sheet", name="Ida Brook")
        assert entry["id"] not in [each["id"] for each in state["open"]]
    assert state["can_store"]
    stored = client.post(f"/api/drafts/{state['id']}/store", json={"author": "Ida Brook"})
    assert stored.status_code == 200
