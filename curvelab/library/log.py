"""The append-only log of what happened to which revision: each entry's hash covers the entry and the hash before it."""

import hashlib
import json
import sqlite3
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import UTC, datetime
from typing import Any

from curvelab.library.rows import Row

BEGINNING = hashlib.sha256(b"curvelab library log").digest()
"""What stands for the hash before the first entry."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Entry:
    """One entry.

    ``content`` and ``evidence`` are the hashes in hex of the revision and of the reading that led to it, ``origin`` is
    the entry it was imported from.
    """

    seq: int
    at: str
    name: str
    action: str
    device_key: str
    revision: int
    content: str
    evidence: str | None
    state: str
    reason: str
    origin: str | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Broken:
    """An entry whose hash does not agree with what it and all entries before it say."""

    seq: int
    device_key: str
    revision: int


def now() -> str:
    """The present moment: ISO 8601, UTC, to the millisecond."""
    return datetime.now(UTC).isoformat(timespec="milliseconds")


class Chain:
    """Continues the log inside one transaction, which holds the write lock so that none other can."""

    def __init__(self, connection: sqlite3.Connection) -> None:
        row = connection.execute("SELECT seq, sha256 FROM log ORDER BY seq DESC LIMIT 1").fetchone()
        self._seq: int = row[0] if row else 0
        self._sha256: bytes = row[1] if row else BEGINNING

    def next(self, revision_id: int, **said: Any) -> Row:
        """The row of the next entry; ``said`` is what `Entry` has beside its number."""
        entry = Entry(seq=self._seq + 1, **said)
        self._seq, self._sha256 = entry.seq, _sha256(self._sha256, entry)
        told = (entry.at, entry.name, entry.action, revision_id, entry.state, entry.reason, entry.origin)
        return (entry.seq, *told, self._sha256)


def entries(connection: sqlite3.Connection, key: str | None = None) -> Iterator[Entry]:
    """All entries in order, or those of one device."""
    for row in _rows(connection, key):
        yield _entry(row)


def head(connection: sqlite3.Connection) -> str:
    """The hash of the last entry in hex: written down elsewhere, it shows whether anything before it was changed."""
    row = connection.execute("SELECT sha256 FROM log ORDER BY seq DESC LIMIT 1").fetchone()
    return (row[0] if row else BEGINNING).hex()


def broken_entries(connection: sqlite3.Connection) -> Iterator[Broken]:
    """Entries that were changed, taken out or put in; each break is told once, the chain is followed on from there."""
    previous, expected = BEGINNING, 1
    for row in _rows(connection, None):
        entry = _entry(row)
        if entry.seq != expected or _sha256(previous, entry) != row[-1]:
            yield Broken(seq=entry.seq, device_key=entry.device_key, revision=entry.revision)
        previous, expected = row[-1], entry.seq + 1


def _rows(connection: sqlite3.Connection, key: str | None) -> sqlite3.Cursor:
    of_key = "" if key is None else "WHERE device_key = ?"
    return connection.execute(
        f"""
        SELECT log.seq, log.at, log.name, log.action, device.device_key, revision.number, revision.content_sha256,
            reading.evidence_sha256, log.state, log.reason, log.origin, log.sha256
        FROM log
        JOIN revision ON revision.revision_id = log.revision_id
        LEFT JOIN reading ON reading.reading_id = revision.reading_id
        JOIN device ON device.device_id = revision.device_id
        {of_key} ORDER BY log.seq
        """,
        () if key is None else (key,),
    )


def _entry(row: tuple[Any, ...]) -> Entry:
    seq, at, name, action, key, number, content, evidence, state, reason, origin, _ = row
    return Entry(
        seq=seq,
        at=at,
        name=name,
        action=action,
        device_key=key,
        revision=number,
        content=content.hex(),
        evidence=evidence and evidence.hex(),
        state=state,
        reason=reason,
        origin=origin,
    )


def _sha256(previous: bytes, entry: Entry) -> bytes:
    text = json.dumps({name: getattr(entry, name) for name in Entry.__slots__}, sort_keys=True, separators=(",", ":"))
    return hashlib.sha256(previous + text.encode("ascii")).digest()
