"""What led to a stored revision: every reading as it was, and the bytes of its sheet."""

from dataclasses import dataclass

from curvelab.records.reading import Reading


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class StoredReading:
    """One reading as it was stored.

    ``reading`` has neither devices nor the sheet's pixels and strokes; its worksheet has the text as it was written,
    the document and the sheet's entry. ``source`` is the bytes of the sheet's file, None where they were not kept.
    """

    reading: Reading
    source: bytes | None


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Evidence:
    """Who stored a revision, when, why and with which version, and the readings its curves come from."""

    key: str
    revision: int
    state: str
    at: str
    author: str
    reason: str
    program_version: str
    readings: tuple[StoredReading, ...]
