"""The station that traces every curve the worksheet guides."""

from dataclasses import dataclass
from functools import partial

from curvelab.errors import TraceError
from curvelab.reading.remember import Remember
from curvelab.reading.watch import Watch
from curvelab.records.axes import Axes
from curvelab.records.sheet import Sheet
from curvelab.records.trace import Trace
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import CurveEntry
from curvelab.trace.guided import Guide, trace_guided
from curvelab.trace.prepare import prepare


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Followed:
    """One entry of the worksheet with the trace it led to, and what is printed on the line."""

    entry: CurveEntry
    trace: Trace
    label: str = ""


def follow_curves(
    sheet: Sheet, axes: Axes, entries: tuple[CurveEntry, ...], watch: Watch, remember: Remember
) -> tuple[tuple[Followed, ...], tuple[ReadingWarning, ...]]:
    """Trace each guided entry on its own.

    Raises
    ------
    TraceError
        No line where an entry's guide says; the message names the entry.
    """

    def traced(guide: Guide) -> tuple[Trace, tuple[ReadingWarning, ...]]:
        prepared = remember("page", (sheet, axes), lambda: prepare(sheet, axes))
        return trace_guided(prepared, guide)

    followed = []
    warnings: list[ReadingWarning] = []
    for number, entry in enumerate(entries, start=1):
        watch("Tracing curves", (number - 1) / len(entries))
        guide = Guide(through=entry.through, colour=entry.colour, avoid=entry.avoid)
        try:
            trace, doubts = remember("trace", (sheet, axes, guide), partial(traced, guide))
        except TraceError as error:
            raise TraceError(f"[[curves]] {number}: {error.problem}", error.expected, error.fix) from error
        followed.append(Followed(entry=entry, trace=trace))
        warnings.extend(doubts)
    return tuple(followed), tuple(warnings)


def open_edges(followed: tuple[Followed, ...]) -> tuple[ReadingWarning, ...]:
    """Warnings of lines of which nobody said which limit they are."""
    return tuple(
        ReadingWarning(
            code="edge-unknown",
            text="Which limit this line is is not known, so it is a line of no device: set edge in its [[curves]]",
            at=(float(each.trace.places[0, 0]), float(each.trace.places[0, 1])),
        )
        for each in followed
        if each.entry.edge is None
    )
