"""What still stands between a sheet and the library, most harmful first, each with the answers that settle it."""

import hashlib
import json
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import Any, Literal

from curvelab.errors import AxesError, CurvelabError
from curvelab.records.finding import Finding
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.trace import Gap
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import Worksheet
from curvelab.units import written_between

Kind = Literal["axis", "gap", "edge", "crossing", "finding", "device", "other"]

HARM: dict[str, int] = {
    "failed": 0,
    "axis": 1,
    "edge": 2,
    "crossing": 3,
    "gap": 4,
    "device": 5,
    "finding": 6,
    "other": 7,
}
"""What is told first: a wrong axis makes every number wrong, a wrong edge a band, and so on."""

KINDS: dict[str, Kind] = {
    "area-edge": "edge",
    "meaning-unknown": "edge",
    "no-curves": "edge",
    "trace-doubt": "crossing",
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
    "unknown-characteristic": "device",
    "unknown-standard": "device",
}
SAME_PLACE = 5.0
AROUND = 60.0
"""Half the box about a single place, in the sheet's unit."""

MEANING_WORDS = {
    "pre_arcing": "pre-arcing (melting)",
    "operating": "operating (melting and arcing)",
    "unlatching": "unlatching",
    "relay_output": "relay output",
    "clearing": "clearing (total breaking)",
}
MEANINGS_OF = {
    "fuse": ("operating", "pre_arcing"),
    "relay": ("relay_output",),
    None: ("clearing", "operating"),
}
"""Kind of device -> what probably ends at its lines."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Answer:
    """One way to settle an entry: a change, and what it still asks of the person."""

    text: str
    change: dict[str, Any] | None = None
    asks: Literal["value", "reason", "place"] | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class OpenEntry:
    """One entry of the list."""

    code: str
    text: str
    kind: Kind
    at: tuple[float, float] | None = None
    box: tuple[float, float, float, float] | None = None
    curve: int | None = None
    answers: tuple[Answer, ...] = field(default=())

    @property
    def id(self) -> str:
        """The same for the same entry, whatever else changes."""
        told = json.dumps([self.code, self.text, self.at])
        return hashlib.sha256(told.encode()).hexdigest()[:12]


def open_entries(worksheet: Worksheet, reading: Reading | None, error: CurvelabError | None) -> list[OpenEntry]:
    """Everything that is not settled, most harmful first; of a failed reading the failure alone."""
    if error is not None:
        return [_failure(error)]
    if reading is None:
        return []
    accepted = worksheet.accepted
    found = [
        *(_of_warning(each, worksheet, reading) for each in reading.warnings if each.accepted is None),
        *_of_gaps(worksheet, reading),
        *_of_devices(worksheet),
        *(_of_finding(each) for each in reading.findings if _needs_word(each)),
    ]
    left = [each for each in found if not any(_settles(acceptance, each) for acceptance in accepted)]
    return sorted(left, key=lambda each: HARM[each.kind])


def _settles(acceptance: Acceptance, entry: OpenEntry) -> bool:
    if acceptance.code != entry.code:
        return False
    if acceptance.place is None or entry.at is None:
        return True
    away = max(abs(one - other) for one, other in zip(acceptance.place, entry.at, strict=True))
    return away <= SAME_PLACE


def _failure(error: CurvelabError) -> OpenEntry:
    kind: Kind = "axis" if isinstance(error, AxesError) else "other"
    return OpenEntry(
        code="failed", text=str(error), kind=kind, answers=(Answer(text="Undo the last step", change={"kind": "undo"}),)
    )


def _of_warning(warning: ReadingWarning, worksheet: Worksheet, reading: Reading) -> OpenEntry:
    curve = _curve_at(warning, worksheet, reading)
    return OpenEntry(
        code=warning.code,
        text=warning.text,
        kind=KINDS.get(warning.code, "other"),
        at=warning.at,
        box=_about(warning.at),
        curve=curve,
        answers=(*_own_answers(warning, worksheet, curve), _accepting(warning.code, warning.at)),
    )


def _own_answers(warning: ReadingWarning, worksheet: Worksheet, curve: int | None) -> Iterator[Answer]:
    """What settles a warning beside accepting it."""
    if warning.code == "meaning-unknown" and curve is not None:
        yield from _meanings(worksheet, curve)
    elif warning.code == "trace-doubt":
        yield Answer(text="Click where it goes on", change={"kind": "passes", "curve": curve}, asks="place")
    elif warning.code == "no-curves":
        yield Answer(text="Click a line", change={"kind": "passes", "curve": None}, asks="place")
    elif warning.code == "several-plots":
        number = worksheet.sheet.plot if worksheet.sheet else None
        yield Answer(text="This plot is meant", change={"kind": "plot", "plot": number or 1})


def _meanings(worksheet: Worksheet, curve: int) -> Iterator[Answer]:
    """The likeliest edge and meanings of a line that was only pointed at."""
    entry = worksheet.curves[curve]
    kinds = {each.nameplate.kind for each in worksheet.devices}
    kind = next(iter(kinds)) if len(kinds) == 1 else None
    for meaning in MEANINGS_OF.get(kind, ("clearing",)):
        fields = {"edge": entry.edge, "meaning": meaning}
        text = f"The {entry.edge} edge, {MEANING_WORDS[meaning]}"
        yield Answer(text=text, change={"kind": "set-curve", "curve": curve, "fields": fields})
    for edge in ("fast", "slow", "mean"):
        if edge != entry.edge:
            change = {"kind": "set-curve", "curve": curve, "fields": {"edge": edge}}
            yield Answer(text=f"It is the {edge} edge", change=change)


def _curve_at(warning: ReadingWarning, worksheet: Worksheet, reading: Reading) -> int | None:
    """The worksheet's entry of the line whose trace begins at, or comes closest to, the warning's place."""
    if warning.at is None or KINDS.get(warning.code) not in ("edge", "crossing"):
        return None
    traced = [index for index, entry in enumerate(worksheet.curves) if entry.through]
    best: tuple[float, int] | None = None
    for index, read in zip(traced, reading.curves, strict=False):
        if read.trace is None or (warning.code == "meaning-unknown" and read.curve.meaning is not None):
            continue
        away = min(_distances(read, warning.at))
        if best is None or away < best[0]:
            best = (away, index)
    return best[1] if best else None


def _distances(read: ReadCurve, place: tuple[float, float]) -> list[float]:
    assert read.trace is not None
    away = read.trace.places - place
    distances: list[float] = (away[:, 0] ** 2 + away[:, 1] ** 2).tolist()
    return distances


def _of_gaps(worksheet: Worksheet, reading: Reading) -> Iterator[OpenEntry]:
    traced = [index for index, entry in enumerate(worksheet.curves) if entry.through]
    entries: list[int | None] = [*traced] if worksheet.curves else [None] * len(reading.curves)
    for read, curve in zip(reading.curves, entries, strict=False):
        for gap in read.trace.gaps if read.trace else ():
            yield _of_gap(read, gap, curve)


def _of_gap(read: ReadCurve, gap: Gap, curve: int | None) -> OpenEntry:
    middle = (0.5 * (gap.start[0] + gap.end[0]), 0.5 * (gap.start[1] + gap.end[1]))
    low = [min(one, other) - AROUND / 2 for one, other in zip(gap.start, gap.end, strict=True)]
    high = [max(one, other) + AROUND / 2 for one, other in zip(gap.start, gap.end, strict=True)]
    return OpenEntry(
        code="gap",
        text=f"The {read.curve.edge} line was not seen here; no value is given across the gap",
        kind="gap",
        at=middle,
        box=(low[0], low[1], high[0], high[1]),
        curve=curve,
        answers=(
            Answer(text="Click where it passes", change={"kind": "passes", "curve": curve}, asks="place"),
            _accepting("gap", middle),
        ),
    )


def _of_devices(worksheet: Worksheet) -> Iterator[OpenEntry]:
    """Blanks of the nameplates without which a device cannot be stored or checked."""
    if not worksheet.devices:
        yield OpenEntry(code="no-device", text="Which device is it? Give its key and kind", kind="device")
    for number, entry in enumerate(worksheet.devices):
        plate, name = entry.nameplate, f"'{entry.nameplate.key}'"
        rated = plate.rated_current_a is not None or plate.rated_residual_current_a is not None or entry.ratings
        blanks = [("rated_current_a", "rated current")] if not rated and plate.kind not in ("relay", "switch") else []
        if plate.standard is None and plate.kind != "switch":
            blanks.append(("standard", "standard"))
        for key, words in blanks:
            change = {"kind": "set-device", "device": number, "fields": {key: None}}
            yield OpenEntry(
                code=f"blank-{key.replace('_', '-')}",
                text=f"The {words} of {name} is not given",
                kind="device",
                answers=(
                    Answer(text=f"Give the {words}", change=change, asks="value"),
                    _accepting(f"blank-{key.replace('_', '-')}", None),
                ),
            )


def _needs_word(finding: Finding) -> bool:
    return finding.outcome in ("fails", "undecided") and not finding.advisory


def _of_finding(finding: Finding) -> OpenEntry:
    code = f"finding-{finding.rule}-{finding.device}"
    read = "" if finding.value is None else f": read {written_between(finding.value, finding.interval, finding.unit)}"
    note = f". {finding.note}" if finding.note else ""
    told = f"{finding.requirement} {finding.outcome}{read}{note}"
    return OpenEntry(
        code=code,
        text=f"{finding.device}, {finding.standard} {finding.clause}: {told}",
        kind="finding",
        answers=(_accepting(code, None),),
    )


def _accepting(code: str, at: tuple[float, float] | None) -> Answer:
    change: dict[str, Any] = {"kind": "accept", "code": code}
    if at is not None:
        change["at"] = list(at)
    return Answer(text="Accept it, with a reason", change=change, asks="reason")


def _about(at: tuple[float, float] | None) -> tuple[float, float, float, float] | None:
    return None if at is None else (at[0] - AROUND, at[1] - AROUND, at[0] + AROUND, at[1] + AROUND)
