"""What is open about lines: which limit they are and what ends there."""

from collections.abc import Iterator

import numpy as np

from curvelab.records.curve import Edge
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import CurveEntry
from curvelab.workbench.entries import entries_of
from curvelab.workbench.open_entry import Answer, OpenEntry, Place, about, accepting

EDGES: tuple[Edge, ...] = ("fast", "slow", "mean")
EDGE_WORDS = {"fast": "The fast edge", "slow": "The slow edge", "mean": "One mean line"}
MEANING_WORDS = {
    "pre_arcing": "pre-arcing (melting)",
    "operating": "operating (melting and arcing)",
    "unlatching": "unlatching",
    "relay_output": "relay output",
    "clearing": "clearing",
}
MEANINGS_OF: dict[str | None, tuple[str, ...]] = {
    "fuse": ("pre_arcing", "operating"),
    "relay": ("relay_output",),
    None: ("clearing", "operating"),
}
"""Kind of device -> what probably ends at its lines."""
UNNAMED = ("edge-unknown", "meaning-unknown")


def of_unnamed(reading: Reading) -> Iterator[OpenEntry]:
    """One entry for each line of which the edge, the meaning or both are not known."""
    for index, read in zip(entries_of(reading), reading.curves, strict=True):
        entry = reading.worksheet.curves[index] if index is not None else None
        if index is None or entry is None or (entry.edge is not None and read.curve.meaning is not None):
            continue
        at = first_place(read)
        code = "edge-unknown" if entry.edge is None else "meaning-unknown"
        asked = "What is this line, and what ends at it?" if entry.edge is None else "What ends at this line?"
        yield OpenEntry(
            code=code,
            text=asked,
            kind="edge",
            at=at,
            box=about(at),
            curve=index,
            answers=(*_namings(reading, index), accepting(code, at)) if entry.edge else tuple(_namings(reading, index)),
        )


def first_place(read: ReadCurve) -> Place | None:
    """Where a line begins on the sheet."""
    return (float(read.trace.places[0, 0]), float(read.trace.places[0, 1])) if read.trace else None


def _namings(reading: Reading, index: int) -> Iterator[Answer]:
    """What a line may be: each answer says edge and meaning at once."""
    entry = reading.worksheet.curves[index]
    edges = (entry.edge,) if entry.edge else _edges_left(entry, reading)
    meanings = (entry.meaning,) if entry.meaning else MEANINGS_OF.get(_kind(entry, reading), ("clearing",))
    for edge in edges:
        for meaning in meanings:
            fields = {"edge": edge, "meaning": meaning}
            change = {"kind": "set-curve", "curve": index, "fields": fields}
            yield Answer(text=f"{EDGE_WORDS[edge]}, {MEANING_WORDS[meaning]}", change=change)


def _edges_left(entry: CurveEntry, reading: Reading) -> tuple[Edge, ...]:
    """The edges that no other line of its element is."""
    others = (each for each in reading.worksheet.curves if each is not entry)
    taken = {each.edge for each in others if _element(each) == _element(entry)}
    return tuple(edge for edge in EDGES if edge not in taken) or EDGES


def _element(entry: CurveEntry) -> tuple[object, ...]:
    return (entry.element or "whole", entry.devices, entry.conditions, tuple(sorted(entry.at.items())))


def _kind(entry: CurveEntry, reading: Reading) -> str | None:
    """The kind of the line's device, where there is only one it can be."""
    devices = [each.nameplate for each in reading.worksheet.devices]
    kinds = {plate.kind for plate in devices if not entry.devices or plate.key in entry.devices}
    return kinds.pop() if len(kinds) == 1 else None


def line_at(warning: ReadingWarning, reading: Reading) -> int | None:
    """The entry of the line that comes closest to a warning's place."""
    if warning.at is None:
        return None
    nearest: tuple[float, int | None] | None = None
    for index, read in zip(entries_of(reading), reading.curves, strict=True):
        if read.trace is not None and len(read.trace.places):
            away = float(np.hypot(*(read.trace.places - warning.at).T).min())
            if nearest is None or away < nearest[0]:
                nearest = (away, index)
    return nearest[1] if nearest else None
