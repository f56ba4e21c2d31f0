"""Reads back what led to a stored revision, so that it can be drawn and read again."""

import json
import math
import sqlite3
from collections.abc import Mapping
from dataclasses import replace
from typing import Any

import numpy as np

from curvelab.library.axes_load import axes_from_json
from curvelab.library.fit_load import read_fits
from curvelab.library.load import missing_device, read_curve, rows_of
from curvelab.records.axes import GridLine
from curvelab.records.device import Tolerance
from curvelab.records.evidence import Evidence, StoredReading
from curvelab.records.finding import Finding
from curvelab.records.fit import CurveFit
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.sheet import Sheet
from curvelab.records.trace import Gap, Trace
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import Document, SheetEntry, Worksheet

Connection = sqlite3.Connection
Values = Mapping[str, Any]


def read_evidence(connection: Connection, key: str, number: int | None) -> Evidence:
    """What led to one revision of a device, the current one where ``number`` is None.

    Raises
    ------
    NotFoundError
        No such key or revision.
    """
    chosen = "is_current = 1" if number is None else "revision = ?"
    asked = (key,) if number is None else (key, number)
    found = rows_of(connection, f"SELECT * FROM device_index WHERE device_key = ? AND {chosen}", *asked)
    if not found:
        raise missing_device(connection, key, number)
    (row,) = found
    return Evidence(
        key=row["device_key"],
        revision=row["revision"],
        state=row["state"],
        at=row["created_at"],
        author=row["author"],
        reason=row["reason"],
        program_version=row["program_version"],
        readings=tuple(
            read_reading(connection, reading_id) for reading_id in _reading_ids(connection, key, row["revision"])
        ),
    )


def read_reading(connection: Connection, reading_id: int) -> StoredReading:
    """One reading as it was stored."""
    (row,) = rows_of(
        connection,
        """
        SELECT reading.*, sheet.sha256, sheet.page, sheet.plot, sheet.file, source.bytes
        FROM reading LEFT JOIN sheet USING (sheet_id) LEFT JOIN source USING (sha256) WHERE reading_id = ?
        """,
        reading_id,
    )
    document = Document(**{name: row[name] for name in ("title", "issue", "date", "maker", "note")})
    entry = SheetEntry(file=row["file"], page=row["page"], plot=row["plot"], sha256=row["sha256"])
    worksheet = Worksheet(document=document, sheet=entry if row["sha256"] else None, text=row["worksheet"])
    return StoredReading(
        reading=Reading(
            worksheet=worksheet,
            sheet=_sheet(row),
            axes=row["axes"] and axes_from_json(row["axes"], _grid(connection, reading_id)),
            curves=_curves(connection, reading_id),
            devices=(),
            findings=_findings(connection, reading_id),
            warnings=_warnings(connection, reading_id),
            program_version=row["program_version"],
        ),
        source=row["bytes"],
    )


def _reading_ids(connection: Connection, key: str, number: int) -> list[int]:
    """Of the revision itself and of the curves that carried forward into it, in the order they were stored."""
    rows = connection.execute(
        """
        WITH chosen AS (
            SELECT revision_id, reading_id FROM revision JOIN device USING (device_id)
            WHERE device_key = ? AND number = ?
        )
        SELECT reading_id FROM chosen WHERE reading_id IS NOT NULL
        UNION
        SELECT revision_curve.reading_id FROM chosen JOIN revision_curve USING (revision_id)
        WHERE revision_curve.reading_id IS NOT NULL
        ORDER BY 1
        """,
        (key, number),
    )
    return [reading_id for (reading_id,) in rows]


def _sheet(row: Values) -> Sheet | None:
    """The sheet without its pixels; None for typed points and for readings whose sheet's size was not kept."""
    if row["sha256"] is None or row["sheet_width"] is None:
        return None
    return Sheet(
        file=row["file"],
        sha256=row["sha256"],
        page=row["page"],
        pages=row["sheet_pages"],
        width=row["sheet_width"],
        height=row["sheet_height"],
        unit=row["sheet_unit"],
        pixels=None,
    )


def _grid(connection: Connection, reading_id: int) -> tuple[GridLine, ...]:
    points = _blocks(
        connection, "SELECT line_seq, x, y FROM grid_point WHERE reading_id = ? ORDER BY line_seq, seq", reading_id
    )
    return tuple(
        GridLine(
            axis=row["axis"],
            value=row["value"],
            points=points[row["seq"]],
            sd=row["sd"],
            width=row["width"],
            darkness=row["darkness"],
        )
        for row in rows_of(connection, "SELECT * FROM grid_line WHERE reading_id = ? ORDER BY seq", reading_id)
    )


def _curves(connection: Connection, reading_id: int) -> tuple[ReadCurve, ...]:
    points = _blocks(
        connection,
        "SELECT curve_seq, x, y, sd, current, value, sd_current, sd_value FROM read_point"
        " WHERE reading_id = ? ORDER BY curve_seq, seq",
        reading_id,
    )
    gaps: dict[int, list[Gap]] = {}
    for number, _, *at in connection.execute(
        "SELECT curve_seq, seq, start_x, start_y, end_x, end_y FROM read_gap WHERE reading_id = ? ORDER BY 1, 2",
        (reading_id,),
    ):
        gaps.setdefault(number, []).append(Gap(start=(at[0], at[1]), end=(at[2], at[3])))
    fits = read_fits(connection, reading_id)
    rows = rows_of(connection, "SELECT * FROM read_curve WHERE reading_id = ? ORDER BY seq", reading_id)
    read = (_read_curve(connection, row, points[row["seq"]], tuple(gaps.get(row["seq"], ()))) for row in rows)
    return tuple(_with_fit(one, fits.get(row["seq"])) for row, one in zip(rows, read, strict=True))


def _with_fit(read: ReadCurve, fit: CurveFit | None) -> ReadCurve:
    """The line with its model, whose tabulated form is the curve's."""
    return read if fit is None else replace(read, fit=replace(fit, parts=read.curve.parts))


def _read_curve(connection: Connection, row: Values, points: Any, gaps: tuple[Gap, ...]) -> ReadCurve:
    stated = json.loads(row["tolerance"]) if row["tolerance"] else None
    return ReadCurve(
        trace=None if row["origin"] == "typed" else _trace(row, points, gaps),
        current=points[:, 3],
        value=points[:, 4],
        sd_current=points[:, 5],
        sd_value=points[:, 6],
        curve=read_curve(connection, row["curve_id"]),
        devices=tuple(json.loads(row["devices"])),
        tolerance=stated and Tolerance(**{name: limits and tuple(limits) for name, limits in stated.items()}),
        label=row["label"],
    )


def _trace(row: Values, points: Any, gaps: tuple[Gap, ...]) -> Trace:
    colour = row["colour"]
    return Trace(
        places=points[:, :2],
        sd=points[:, 2],
        correlation_length=row["correlation_length"],
        gaps=gaps,
        ends_at_frame=(bool(row["starts_at_frame"]), bool(row["ends_at_frame"])),
        colour=colour and (int(colour[1:3], 16), int(colour[3:5], 16), int(colour[5:7], 16)),
        width=row["width"],
        boundary=bool(row["is_boundary"]),
        origin=row["origin"],
        confidence=row["confidence"],
    )


def _findings(connection: Connection, reading_id: int) -> tuple[Finding, ...]:
    rows = rows_of(connection, "SELECT * FROM finding WHERE reading_id = ? ORDER BY seq", reading_id)
    same = (
        "standard",
        "clause",
        "requirement",
        "unit",
        "value",
        "outcome",
        "source",
        "rule",
        "current",
        "base",
        "note",
    )
    return tuple(
        Finding(
            device=row["device_key"],
            limit=row["limit_value"],
            interval=None if row["lower"] is None or row["upper"] is None else (row["lower"], row["upper"]),
            advisory=bool(row["is_advisory"]),
            permitted=row["permitted"],
            time_s=row["time_s"],
            **{name: row[name] for name in same},
        )
        for row in rows
    )


def _warnings(connection: Connection, reading_id: int) -> tuple[ReadingWarning, ...]:
    rows = rows_of(connection, "SELECT * FROM reading_warning WHERE reading_id = ? ORDER BY seq", reading_id)
    return tuple(
        ReadingWarning(
            code=row["code"],
            text=row["text"],
            at=None if row["x"] is None else (row["x"], row["y"]),
            accepted=Acceptance(code=row["code"], reason=row["accepted_reason"], name=row["accepted_name"])
            if row["is_accepted"]
            else None,
        )
        for row in rows
    )


def _blocks(connection: Connection, sql: str, reading_id: int) -> dict[int, Any]:
    """Rows gathered by their first column: number -> array of the others, NULL as NaN."""
    gathered: dict[int, list[tuple[float, ...]]] = {}
    for number, *values in connection.execute(sql, (reading_id,)):
        gathered.setdefault(number, []).append(tuple(math.nan if value is None else value for value in values))
    return {number: np.array(rows) for number, rows in gathered.items()}
