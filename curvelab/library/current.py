"""Keeps what searching asks: the current revision of each device, its words and the extent of its band.

All of it can be made anew from the revisions; it is written in the same transaction as what it follows from.
"""

import sqlite3
from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import numpy as np

from curvelab.library.extent import STEP_TIMES_S, Extent, extents_of, is_adjustable
from curvelab.library.load import read_revision
from curvelab.library.rows import Row
from curvelab.records.device import DeviceRecord

CURRENT = "state <> 'withdrawn' ORDER BY state = 'released' DESC, number DESC LIMIT 1"
"""What makes a revision the current one of its device, as in the view ``device_index``."""

_KNOWN: Mapping[int, DeviceRecord] = {}


@dataclass(frozen=True, kw_only=True, slots=True)
class _Current:
    """One device as it is found."""

    device_id: int
    revision_id: int
    record: DeviceRecord
    words: str

    @property
    def row(self) -> Row:
        plate, record = self.record.nameplate, self.record
        said = (plate.characteristic, plate.standard, plate.maker, plate.series)
        rated = (plate.rated_current_a, plate.rated_residual_current_a)
        known_by = (self.device_id, self.revision_id, plate.key, record.revision, record.state, plate.kind)
        return (*known_by, *said, *rated, self.words, is_adjustable(record))


def refresh(
    connection: sqlite3.Connection, device_ids: Iterable[int], known: Mapping[int, DeviceRecord] = _KNOWN
) -> None:
    """Bring devices up to date.

    Parameters
    ----------
    device_ids : iterable of int
    known : mapping
        Revision id -> its record with all points, where it is at hand; others are read.
    """
    device_ids = list(device_ids)
    _forget(connection, device_ids)
    found = [one for device_id in device_ids if (one := _current(connection, device_id, known))]
    extents = list(zip(found, extents_of([one.record for one in found]), strict=True))
    connection.executemany(
        f"INSERT INTO current_device VALUES ({', '.join('?' * 16)})",
        [(*one.row, *((extent.holds_from_a, extent.trips_to_a) if extent else (0.0, 0.0))) for one, extent in extents],
    )
    connection.executemany(
        "INSERT INTO device_text (rowid, words) VALUES (?, ?)", [(one.device_id, one.words) for one in found]
    )
    # In the order of the key, so that the tree grows at few places.
    rows = sorted(row for one, extent in extents if extent for row in extent_rows(one.device_id, extent))
    connection.executemany("INSERT INTO band_extent VALUES (?, ?, ?, ?, ?, ?)", rows)


def refresh_missing(connection: sqlite3.Connection) -> None:
    """Enter every device that is not there, as after a migration."""
    missing = connection.execute(
        "SELECT device_id FROM device WHERE device_id NOT IN (SELECT device_id FROM current_device)"
    )
    refresh(connection, [device_id for (device_id,) in missing.fetchall()])


def _forget(connection: sqlite3.Connection, device_ids: list[int]) -> None:
    for device_id in device_ids:
        row = connection.execute("SELECT words FROM current_device WHERE device_id = ?", (device_id,)).fetchone()
        if row is None:
            continue
        connection.execute(
            "INSERT INTO device_text (device_text, rowid, words) VALUES ('delete', ?, ?)", (device_id, row[0])
        )
        connection.executemany(
            "DELETE FROM band_extent WHERE step = ? AND device_id = ?",
            [(step, device_id) for step in range(STEP_TIMES_S.size)],
        )
        connection.execute("DELETE FROM current_device WHERE device_id = ?", (device_id,))


def _current(connection: sqlite3.Connection, device_id: int, known: Mapping[int, DeviceRecord]) -> _Current | None:
    row = connection.execute(
        f"SELECT revision_id, number, state FROM revision WHERE device_id = ? AND {CURRENT}", (device_id,)
    ).fetchone()
    if row is None:
        return None
    revision_id, number, state = row
    record = known.get(revision_id) or read_revision(connection, revision_id, number, state)
    words = _words(record, _documents(connection, revision_id))
    return _Current(device_id=device_id, revision_id=revision_id, record=record, words=words)


def _documents(connection: sqlite3.Connection, revision_id: int) -> list[str]:
    rows = connection.execute(
        """
        SELECT DISTINCT title, issue, note, reading.maker
        FROM revision_curve JOIN reading ON reading.reading_id = revision_curve.reading_id
        WHERE revision_curve.revision_id = ?
        """,
        (revision_id,),
    )
    return [text for row in rows for text in row]


def _words(record: DeviceRecord, documents: list[str]) -> str:
    """All that a person may look for, once each."""
    plate = record.nameplate
    named = (plate.key, plate.kind, plate.characteristic, plate.maker, plate.series, plate.catalogue)
    more = (plate.standard, plate.utilisation_category, plate.residual_waveform)
    rated = f"{plate.rated_current_a:g}A" if plate.rated_current_a is not None else None
    return " ".join(dict.fromkeys(text for text in (*named, *more, rated, *documents) if text))


def extent_rows(device_id: int, extent: Extent) -> Iterable[tuple[float, ...]]:
    """The rows of an extent, step by step."""
    columns = (extent.holds_surely, extent.holds_perhaps, extent.trips_surely, extent.trips_perhaps)
    return ((step, device_id, *values) for step, values in enumerate(np.stack(columns, axis=1).tolist()))
