"""Reads stored revisions back into records, exactly as they were stored."""

import difflib
import json
import sqlite3
from collections.abc import Mapping
from dataclasses import dataclass, replace
from types import MappingProxyType
from typing import Any

import numpy as np

from curvelab.errors import LibraryError, NotFoundError
from curvelab.library.identity import NO_STATEMENT, curve_sha256, revision_sha256
from curvelab.records.arrays import Floats
from curvelab.records.curve import Conditions, Curve, Part, SheetKey
from curvelab.records.device import Breaking, Derating, DeviceRecord, Nameplate, Setting

PLATE_COLUMNS = (
    "characteristic",
    "standard",
    "standard_edition",
    "rated_current_a",
    "rated_residual_current_a",
    "residual_waveform",
    "residual_delay",
    "rated_voltage_v",
    "poles",
    "frequency_hz",
    "ambient_reference_c",
    "utilisation_category",
    "maker",
    "series",
    "catalogue",
)
CONDITION_COLUMNS = ("start", "time_kind", "supply", "voltage_v", "frequency_hz", "ambient_c", "poles_loaded")

Connection = sqlite3.Connection


@dataclass(frozen=True, kw_only=True, slots=True)
class HeldCurve:
    """A curve as a revision holds it, and the hashes of it and of its statement; ``curve`` may lack its points."""

    curve_id: int
    sha256: bytes
    reading_id: int | None
    statement: bytes
    curve: Curve


def read_device(connection: Connection, key: str, number: int | None) -> DeviceRecord:
    """One revision of a device, the current one where ``number`` is None.

    Raises
    ------
    NotFoundError
        No such key or revision, or every revision is withdrawn.
    LibraryError
        What is there is not what was stored: its content and its hash differ.
    """
    chosen = "is_current = 1" if number is None else "revision = ?"
    row = connection.execute(
        f"SELECT revision, state FROM device_index WHERE device_key = ? AND {chosen}",
        (key,) if number is None else (key, number),
    ).fetchone()
    if row is None:
        raise missing_device(connection, key, number)
    revision, state = row
    revision_id, sha256 = connection.execute(
        "SELECT revision_id, content_sha256 FROM revision JOIN device USING (device_id)"
        " WHERE device_key = ? AND number = ?",
        (key, revision),
    ).fetchone()
    record, found = read_hashed(connection, revision_id, revision, state)
    if found != sha256:
        raise LibraryError(
            f"{key}@{revision} is not what was stored: a number of it was changed or damaged",
            "",
            "Verify the library and restore it from a backup",
        )
    return record


def read_hashed(connection: Connection, revision_id: int, number: int, state: str) -> tuple[DeviceRecord, bytes]:
    """A revision, and the hash that its content has now."""
    held = with_points(connection, revision_id)
    record = DeviceRecord(
        nameplate=read_nameplate(connection, revision_id),
        curves=tuple(item.curve for item in held),
        revision=number,
        state=state,
    )
    said = [(curve_sha256(item.curve), item.statement) for item in held]
    return record, revision_sha256(record.nameplate, said or [(b"", _statement(connection, revision_id))])


def _statement(connection: Connection, revision_id: int) -> bytes:
    """The hash of what was said of a device without curves."""
    row = connection.execute(
        "SELECT statement_sha256 FROM revision JOIN reading USING (reading_id) WHERE revision_id = ?", (revision_id,)
    ).fetchone()
    return row[0] if row else NO_STATEMENT


def read_revision(connection: Connection, revision_id: int, number: int, state: str) -> DeviceRecord:
    """A revision as a record with all its points."""
    return DeviceRecord(
        nameplate=read_nameplate(connection, revision_id),
        curves=tuple(item.curve for item in with_points(connection, revision_id)),
        revision=number,
        state=state,
    )


def with_points(connection: Connection, revision_id: int) -> tuple[HeldCurve, ...]:
    """The curves of a revision in order, with their points."""
    held = read_held_curves(connection, revision_id)
    points = _read_points(connection, revision_id)
    return tuple(replace(item, curve=_with_parts(item.curve, points[item.curve_id])) for item in held)


def read_nameplate(connection: Connection, revision_id: int) -> Nameplate:
    """The nameplate of a revision."""
    row = rows_of(
        connection,
        f"SELECT device_key AS key, kind, {', '.join(PLATE_COLUMNS)} FROM revision JOIN device USING (device_id)"
        " WHERE revision_id = ?",
        revision_id,
    )[0]
    breaking = rows_of(
        connection,
        "SELECT quantity, value_a, voltage_v, supply, duration_s FROM breaking WHERE revision_id = ? ORDER BY seq",
        revision_id,
    )
    derating = rows_of(
        connection, "SELECT ambient_c, factor, element FROM derating WHERE revision_id = ? ORDER BY seq", revision_id
    )
    return Nameplate(
        **row,
        breaking=tuple(Breaking(**item) for item in breaking),
        settings=_read_settings(connection, revision_id),
        derating=tuple(Derating(**item) for item in derating),
    )


def read_held_curves(connection: Connection, revision_id: int) -> tuple[HeldCurve, ...]:
    """The curves of a revision in order, without their points."""
    rows = rows_of(
        connection,
        """
        SELECT curve.*, revision_curve.reading_id, coalesce(reading.statement_sha256, ?) AS statement_sha256,
            sheet.sha256 AS sheet_sha256, sheet.page, sheet.plot, sheet.file
        FROM revision_curve
        JOIN curve ON curve.curve_id = revision_curve.curve_id
        LEFT JOIN reading ON reading.reading_id = revision_curve.reading_id
        LEFT JOIN sheet ON sheet.sheet_id = curve.sheet_id
        WHERE revision_curve.revision_id = ?
        ORDER BY revision_curve.seq
        """,
        NO_STATEMENT,
        revision_id,
    )
    return tuple(
        HeldCurve(
            curve_id=row["curve_id"],
            sha256=row["content_sha256"],
            reading_id=row["reading_id"],
            statement=row["statement_sha256"],
            curve=_curve_without_points(row),
        )
        for row in rows
    )


def read_curve(connection: Connection, curve_id: int) -> Curve:
    """One curve with its points, whichever revisions have it."""
    (row,) = rows_of(
        connection,
        "SELECT curve.*, sheet.sha256 AS sheet_sha256, page, plot, file FROM curve LEFT JOIN sheet USING (sheet_id)"
        " WHERE curve_id = ?",
        curve_id,
    )
    points = connection.execute(
        "SELECT part, current, value, sd_current, sd_value, sd_common FROM point WHERE curve_id = ? ORDER BY part, seq",
        (curve_id,),
    ).fetchall()
    return _with_parts(_curve_without_points(row), np.array(points, dtype=np.float64))


def _curve_without_points(row: Mapping[str, Any]) -> Curve:
    sheet = row["sheet_sha256"] and SheetKey(
        sha256=row["sheet_sha256"], page=row["page"], plot=row["plot"], file=row["file"]
    )
    return Curve(
        element=row["element"],
        edge=row["edge"],
        meaning=row["meaning"],
        quantity=row["quantity"],
        base=row["base"],
        parts=(),
        conditions=Conditions(**{name: row[name] for name in CONDITION_COLUMNS}),
        at=MappingProxyType(json.loads(row["settings"])),
        leaves_top=bool(row["leaves_top"]),
        basis=row["basis"],
        source=row["source"],
        sheet=sheet,
        time_setting=row["time_setting"],
        time_setting_at=row["time_setting_at"],
    )


def _read_points(connection: Connection, revision_id: int) -> dict[int, Floats]:
    """Curve -> its points, shape (n, 6): part, current, value and the three uncertainties."""
    rows = connection.execute(
        """
        SELECT point.curve_id, part, current, value, sd_current, sd_value, sd_common
        FROM revision_curve JOIN point ON point.curve_id = revision_curve.curve_id
        WHERE revision_curve.revision_id = ?
        ORDER BY point.curve_id, part, point.seq
        """,
        (revision_id,),
    ).fetchall()
    table = np.array(rows, dtype=np.float64).reshape(-1, 7)
    starts = np.flatnonzero(np.diff(table[:, 0])) + 1
    return {int(block[0, 0]): block[:, 1:] for block in np.split(table, starts) if len(block)}


def _with_parts(curve: Curve, points: Floats) -> Curve:
    starts = np.flatnonzero(np.diff(points[:, 0])) + 1
    parts = tuple(
        Part(
            current=block[:, 1], value=block[:, 2], sd_current=block[:, 3], sd_value=block[:, 4], sd_common=block[:, 5]
        )
        for block in np.split(points, starts)
    )
    return replace(curve, parts=parts)


def _read_settings(connection: Connection, revision_id: int) -> tuple[Setting, ...]:
    steps: dict[str, list[float]] = {}
    for name, value in connection.execute(
        "SELECT name, step_value FROM setting_step WHERE revision_id = ? ORDER BY name, seq", (revision_id,)
    ):
        steps.setdefault(name, []).append(value)
    rows = rows_of(
        connection,
        "SELECT name, from_value, to_value, base, at_current, can_be_off FROM setting"
        " WHERE revision_id = ? ORDER BY seq",
        revision_id,
    )
    return tuple(
        Setting(
            name=row["name"],
            from_value=row["from_value"],
            to_value=row["to_value"],
            steps=tuple(steps.get(row["name"], ())),
            base=row["base"],
            at=row["at_current"],
            can_be_off=bool(row["can_be_off"]),
        )
        for row in rows
    )


def rows_of(connection: Connection, sql: str, *values: object) -> list[dict[str, Any]]:
    """What a statement selects, by the names of its columns."""
    cursor = connection.execute(sql, values)
    names = [column[0] for column in cursor.description]
    return [dict(zip(names, row, strict=True)) for row in cursor]


def missing_device(connection: Connection, key: str, number: int | None) -> NotFoundError:
    """What is said of a key or revision that is not there."""
    numbers = [
        row[0]
        for row in connection.execute(
            "SELECT number FROM revision JOIN device USING (device_id) WHERE device_key = ? ORDER BY number", (key,)
        )
    ]
    if not numbers:
        near = difflib.get_close_matches(key, _neighbours(connection, key), n=1)
        return NotFoundError(
            f"The library has no device '{key}'", "", f"Did you mean '{near[0]}'?" if near else "List what it has"
        )
    if number is None:
        return NotFoundError(
            f"Every revision of '{key}' is withdrawn", "", f"Ask for one by number, as in {key}@{numbers[-1]}"
        )
    return NotFoundError(f"'{key}' has no revision {number}", f"It has {', '.join(map(str, numbers))}")


def _neighbours(connection: Connection, key: str) -> list[str]:
    """Keys beside this one in alphabetical order: enough to spot a slip of the pen, whatever the library's size."""
    before = connection.execute(
        "SELECT device_key FROM device WHERE device_key < ? ORDER BY device_key DESC LIMIT 200", (key,)
    ).fetchall()
    after = connection.execute(
        "SELECT device_key FROM device WHERE device_key > ? ORDER BY device_key LIMIT 200", (key,)
    ).fetchall()
    return [name for (name,) in before + after]
