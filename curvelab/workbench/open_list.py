"""What still stands between a sheet and the library, most harmful first, each with the answers that settle it."""

from collections.abc import Iterator

from curvelab.errors import AxesError, CurvelabError
from curvelab.records.finding import Finding
from curvelab.records.reading import Reading
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import Worksheet
from curvelab.workbench.open_devices import of_devices, of_finding
from curvelab.workbench.open_entry import Answer, Kind, OpenEntry, about, accepting
from curvelab.workbench.open_lines import UNNAMED, line_at, of_unnamed

ORDER: tuple[Kind, ...] = ("axis", "edge", "crossing", "gap", "device", "finding", "other")
"""What is told first: a wrong axis makes every number wrong, a wrong edge a band, and so on."""

KINDS: dict[str, Kind] = {
    "area-edge": "edge",
    "no-curves": "edge",
    "trace-doubt": "crossing",
    "gap": "gap",
    "several-plots": "axis",
    "axes-from-marks": "axis",
    "grid-disagrees": "axis",
    "grid-doubtful": "axis",
    "grid-snapped": "axis",
    "mark-outlying": "axis",
    "page-bent": "axis",
    "unit-assumed": "axis",
    "unit-doubtful": "axis",
    "values-doubtful": "axis",
    "line-unexplained": "edge",
    "line-no-curve": "edge",
    "label-doubtful": "device",
    "device-unknown": "device",
    "characteristic-unknown": "device",
    "unknown-characteristic": "device",
    "unknown-standard": "device",
}
"""Code of a warning -> what it is about; others are about something else."""

PLAIN = {
    "no-curves": "No line was found: click the lines of the curve on the sheet",
    "trace-doubt": "The line could go on two ways here",
    "gap": "The line was not seen here; no value is given across the gap",
    "line-unexplained": "What looks like a line here was not read: click it if it is one",
    "line-no-curve": "A line here is no curve whose times fall: click it again if it is one",
    "device-unknown": "Whose line this is cannot be read from the sheet",
    "characteristic-unknown": "No characteristic could be read on the sheet",
    "area-edge": "No line is there, so the edge of a filled area was followed: is that meant?",
}
"""Sentences for a person at the page where a warning speaks of the worksheet."""

OF_LINES = ("edge", "crossing", "gap")
ASKED_OTHERWISE = (*UNNAMED, "rating-unknown")
"""Codes of warnings whose question the list asks in a form of its own."""
ADDED_BY_A_CLICK = ("no-curves", "line-unexplained", "line-no-curve")
SAME_PLACE = 5.0
"""Places this close, in the sheet's unit, are the same."""


def open_entries(worksheet: Worksheet, reading: Reading | None, error: CurvelabError | None) -> list[OpenEntry]:
    """Everything that is not settled, most harmful first; of a failed reading the failure alone.

    Parameters
    ----------
    worksheet : Worksheet
        What was said.
    reading : Reading or None
        Its worksheet holds what was read too.
    error : CurvelabError or None
        Why there is no newer reading.
    """
    if error is not None:
        return [_failure(error)]
    if reading is None:
        return []
    found = [
        *_of_warnings(reading),
        *of_unnamed(reading),
        *of_devices(worksheet, reading),
        *(of_finding(each) for each in reading.findings if _is_open(each)),
    ]
    left = [each for each in found if not any(_settles(acceptance, each) for acceptance in worksheet.accepted)]
    return sorted(left, key=lambda each: ORDER.index(each.kind))


def _settles(acceptance: Acceptance, entry: OpenEntry) -> bool:
    if acceptance.code != entry.code:
        return False
    if acceptance.place is None or entry.at is None:
        return True
    return max(abs(one - other) for one, other in zip(acceptance.place, entry.at, strict=True)) <= SAME_PLACE


def _failure(error: CurvelabError) -> OpenEntry:
    return OpenEntry(
        code="failed",
        text=str(error),
        kind="axis" if isinstance(error, AxesError) else "other",
        answers=(Answer(text="Undo the last step", change={"kind": "undo"}),),
    )


def _is_open(finding: Finding) -> bool:
    return finding.outcome in ("fails", "undecided") and not finding.advisory


def _of_warnings(reading: Reading) -> Iterator[OpenEntry]:
    for warning in reading.warnings:
        if warning.accepted is None and warning.code not in ASKED_OTHERWISE:
            yield _of_warning(warning, reading)


def _of_warning(warning: ReadingWarning, reading: Reading) -> OpenEntry:
    kind = KINDS.get(warning.code, "other")
    known = kind in OF_LINES and warning.code not in ADDED_BY_A_CLICK
    curve = line_at(warning, reading) if known else None
    return OpenEntry(
        code=warning.code,
        text=PLAIN.get(warning.code, warning.text),
        kind=kind,
        at=warning.at,
        box=about(warning.at),
        curve=curve,
        answers=(*_own_answers(warning, reading, curve), accepting(warning.code, warning.at)),
    )


def _own_answers(warning: ReadingWarning, reading: Reading, curve: int | None) -> Iterator[Answer]:
    """What settles a warning beside accepting it."""
    if warning.code == "trace-doubt":
        yield Answer(text="Click where it goes on", change={"kind": "passes", "curve": curve}, asks="place")
    elif warning.code == "gap":
        yield Answer(text="Click where it passes", change={"kind": "passes", "curve": curve}, asks="place")
    elif warning.code in ADDED_BY_A_CLICK:
        yield Answer(text="Click a line", change={"kind": "passes", "curve": None}, asks="place")
    elif warning.code == "several-plots" and reading.axes is not None:
        yield Answer(text="This plot is meant", change={"kind": "plot", "plot": reading.axes.plot})
