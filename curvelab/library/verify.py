"""Checks a library from the file up to the log: nothing in it may have changed since it was stored."""

import hashlib
import re
import sqlite3
from collections.abc import Iterator
from dataclasses import dataclass

from curvelab.library.current import CURRENT, extent_rows
from curvelab.library.evidence import stored_evidence_sha256
from curvelab.library.extent import extents_of
from curvelab.library.load import read_hashed
from curvelab.library.log import broken_entries, head
from curvelab.library.watch import Watch
from curvelab.paths import shipped
from curvelab.records.device import DeviceRecord

Problems = Iterator[str]

REPORTED_EVERY = 500
"""Revisions between two reports of how far it is."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Verdict:
    """What was found: how much was looked at, every problem as one sentence, and the log's last hash."""

    revisions: int
    entries: int
    problems: tuple[str, ...]
    log_sha256: str

    @property
    def is_sound(self) -> bool:
        """Whether no problem was found."""
        return not self.problems


def verify(connection: sqlite3.Connection, watch: Watch) -> Verdict:
    """Check the file's structure, references, schema, the hashes of all content, the log, and what searching asks.

    A file whose structure is damaged is not looked at further.
    """
    damaged = tuple(_structure(connection))
    if damaged:
        return Verdict(revisions=0, entries=0, problems=damaged, log_sha256="")
    problems = [*_references(connection), *_schema(connection), *_revisions(connection, watch)]
    problems += [*_readings(connection), *_sources(connection), *_log(connection), *_current(connection)]
    (revisions,) = connection.execute("SELECT count(*) FROM revision").fetchone()
    (entries,) = connection.execute("SELECT count(*) FROM log").fetchone()
    return Verdict(revisions=revisions, entries=entries, problems=tuple(problems), log_sha256=head(connection))


def _structure(connection: sqlite3.Connection) -> Problems:
    try:
        rows = connection.execute("PRAGMA integrity_check(20)").fetchall()
    except (sqlite3.DatabaseError, UnicodeDecodeError) as error:
        rows = [(str(error),)]
    yield from (f"The file is damaged: {' '.join(text.split())}" for (text,) in rows if text != "ok")


def _references(connection: sqlite3.Connection) -> Problems:
    for table, row, target, _ in connection.execute("PRAGMA foreign_key_check"):
        yield f"Row {row} of {table} refers to a row of {target} that is not there"


def _schema(connection: sqlite3.Connection) -> Problems:
    """Tables, views and triggers are those of this program's schema."""
    written = sqlite3.connect(":memory:")
    written.executescript((shipped("database") / "schema.sql").read_text(encoding="utf-8"))
    wanted, found = schema_of(written), schema_of(connection)
    written.close()
    for name in sorted(wanted.keys() | found.keys()):
        if name not in found:
            yield f"The {' '.join(name)} is missing"
        elif name not in wanted:
            yield f"The {' '.join(name)} does not belong to a library"
        elif wanted[name] != found[name]:
            yield f"The {' '.join(name)} is not the one of this schema"


def schema_of(connection: sqlite3.Connection) -> dict[tuple[str, str], str]:
    """(Type, name) -> definition, however it is laid out."""
    rows = connection.execute(
        "SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL AND name NOT GLOB 'sqlite_*'"
    )
    return {(kind, name): re.sub(r"\s*([,()])\s*", r"\1", " ".join(sql.split())) for kind, name, sql in rows}


def _revisions(connection: sqlite3.Connection, watch: Watch) -> Problems:
    """Every revision and curve still has the hash it was stored with; of current ones the extent agrees."""
    rows = connection.execute(
        """
        SELECT revision.revision_id, coalesce(device.device_key, '?'), revision.number, revision.state,
            revision.content_sha256, current_device.device_id
        FROM revision
        LEFT JOIN device ON device.device_id = revision.device_id
        LEFT JOIN current_device ON current_device.revision_id = revision.revision_id
        ORDER BY revision.revision_id
        """
    ).fetchall()
    for done, (revision_id, key, number, state, sha256, device_id) in enumerate(rows):
        if done % REPORTED_EVERY == 0:
            watch("Verifying", done / len(rows))
        try:
            record, content = read_hashed(connection, revision_id, number, state)
        except (ValueError, TypeError, KeyError, IndexError) as error:
            yield f"{key}@{number} cannot be read: {error}"
            continue
        if content != sha256:
            yield f"{key}@{number} is not what was stored: its content and its hash differ"
        elif device_id is not None and not _extent_agrees(connection, device_id, record):
            yield f"{key}@{number}: what the search over bands knows of it is not what its curves say"


def _extent_agrees(connection: sqlite3.Connection, device_id: int, record: DeviceRecord) -> bool:
    found = connection.execute(
        "SELECT * FROM band_extent WHERE device_id = ? AND step >= 0 ORDER BY step", (device_id,)
    ).fetchall()
    (extent,) = extents_of([record])
    return found == (list(extent_rows(device_id, extent)) if extent else [])


def _readings(connection: sqlite3.Connection) -> Problems:
    for (reading_id,) in connection.execute("SELECT reading_id FROM reading ORDER BY reading_id").fetchall():
        stored, now = stored_evidence_sha256(connection, reading_id)
        if stored is not None and stored != now:
            yield f"Reading {reading_id} is not what was stored: its rows and its hash differ"


def _sources(connection: sqlite3.Connection) -> Problems:
    for sha256, content in connection.execute("SELECT sha256, bytes FROM source"):
        if hashlib.sha256(content).hexdigest() != sha256:
            yield f"The bytes of the sheet {sha256[:12]}... are not what was stored"


def _log(connection: sqlite3.Connection) -> Problems:
    for entry in broken_entries(connection):
        yield (
            f"Entry {entry.seq} of the log ({entry.device_key}@{entry.revision}), or what it refers to, was changed"
            " afterwards, or an entry before it is missing"
        )
    last = "SELECT state FROM log WHERE log.revision_id = revision.revision_id ORDER BY seq DESC LIMIT 1"
    for key, number, state, logged in connection.execute(
        f"SELECT device_key, number, state, ({last}) AS logged FROM revision JOIN device USING (device_id)"
        " WHERE state IS NOT logged"
    ):
        yield f"{key}@{number} is {state}, but the log says {logged or 'nothing of it'}"


def _current(connection: sqlite3.Connection) -> Problems:
    """The search knows the current revision of every device, and no other."""
    newest = f"SELECT revision_id FROM revision WHERE revision.device_id = device.device_id AND {CURRENT}"
    for (key,) in connection.execute(
        f"""
        SELECT device.device_key FROM device LEFT JOIN current_device USING (device_id)
        WHERE current_device.revision_id IS NOT ({newest})
        """
    ):
        yield f"The search knows another revision of {key} than the current one"
