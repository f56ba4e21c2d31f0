"""The open form of a library, one JSON object a line: what `exported` writes, `curvelab.library.united` takes.

database/README.md describes it. Everything comes before what refers to it, so that a file of any size is read line by
line. Ids are those of the file alone; content is known by its hash.
"""

import base64
import json
import sqlite3
from collections.abc import Iterable, Iterator
from dataclasses import asdict
from typing import Any

import numpy as np

import curvelab
from curvelab.library.evidence import EVIDENCE
from curvelab.library.load import missing_device, read_curve, read_nameplate, rows_of
from curvelab.library.log import entries
from curvelab.records.arrays import Floats
from curvelab.records.curve import Curve

FORMAT = "curvelab-library"
VERSION = 1

Line = dict[str, Any]
Connection = sqlite3.Connection


def text_of(line: Line) -> str:
    """One line of the file; numbers are written so that they come back exactly."""
    return json.dumps(line, ensure_ascii=False, allow_nan=False, separators=(",", ":")) + "\n"


def exported(connection: Connection, keys: Iterable[str] | None = None) -> Iterator[Line]:
    """The lines of a whole library, or of some devices with everything that led to them.

    Raises
    ------
    NotFoundError
        No device has one of the keys.
    """
    yield {"format": FORMAT, "version": VERSION, "program_version": curvelab.__version__}
    chosen = _all_keys(connection) if keys is None else list(keys)
    out = _Export(connection)
    for key in chosen:
        yield from out.device(key)
    of: list[str | None] = [None] if keys is None else [*chosen]
    for key_or_all in of:
        for entry in entries(connection, key_or_all):
            yield {"log": asdict(entry)}


def _all_keys(connection: Connection) -> list[str]:
    return [key for (key,) in connection.execute("SELECT device_key FROM device ORDER BY device_id").fetchall()]


class _Export:
    """Numbers what has been written, so that what is shared is written once and the same content is the same file."""

    def __init__(self, connection: Connection) -> None:
        self._connection = connection
        self._curves: dict[int, int] = {}
        self._readings: dict[int | None, int | None] = {None: None}
        self._sources: set[str] = set()

    def device(self, key: str) -> Iterator[Line]:
        """A device with all its revisions, after the curves and readings it refers to."""
        rows = rows_of(
            self._connection,
            "SELECT device.kind, revision.* FROM device JOIN revision USING (device_id)"
            " WHERE device_key = ? ORDER BY number",
            key,
        )
        if not rows:
            raise missing_device(self._connection, key, None)
        revisions = []
        for row in rows:
            lines = self._connection.execute(
                "SELECT curve_id, reading_id FROM revision_curve WHERE revision_id = ? ORDER BY seq",
                (row["revision_id"],),
            ).fetchall()
            for curve_id in (curve_id for curve_id, _ in lines):
                yield from self._curve(curve_id)
            for reading_id in (row["reading_id"], *(reading_id for _, reading_id in lines)):
                yield from self._reading(reading_id)
            revisions.append(self._revision(row, lines))
        yield {"device": {"key": key, "kind": rows[0]["kind"], "revisions": revisions}}

    def _revision(self, row: dict[str, Any], lines: list[tuple[int, int | None]]) -> Line:
        plate = asdict(read_nameplate(self._connection, row["revision_id"]))
        said = {name: row[name] for name in ("number", "state", "created_at", "author", "reason", "program_version")}
        return {
            **said,
            "content_sha256": row["content_sha256"].hex(),
            "reading": self._readings[row["reading_id"]],
            "nameplate": {name: value for name, value in plate.items() if value not in (None, ()) and name != "key"},
            "curves": [{"curve": self._curves[curve], "reading": self._readings[reading]} for curve, reading in lines],
        }

    def _curve(self, curve_id: int) -> Iterator[Line]:
        if curve_id not in self._curves:
            self._curves[curve_id] = len(self._curves) + 1
            yield {"curve": {"id": self._curves[curve_id], **curve_json(read_curve(self._connection, curve_id))}}

    def _reading(self, reading_id: int | None) -> Iterator[Line]:
        if reading_id in self._readings:
            return
        self._readings[reading_id] = len(self._readings)
        (row,) = rows_of(
            self._connection,
            "SELECT reading.*, sha256, page, plot, file FROM reading LEFT JOIN sheet USING (sheet_id)"
            " WHERE reading_id = ?",
            reading_id,
        )
        if row["sha256"] is not None:
            yield from self._source(row["sha256"])
        tables = {}
        for table, order in EVIDENCE.items():
            found = rows_of(
                self._connection, f"SELECT * FROM {table} WHERE reading_id = ? ORDER BY {order}", reading_id
            )
            tables[table] = [{name: value for name, value in one.items() if name != "reading_id"} for one in found]
        for one in tables["read_curve"]:
            yield from self._curve(one["curve_id"])
            one["curve_id"] = self._curves[one["curve_id"]]
        sheet = {name: row.pop(name) for name in ("sha256", "page", "plot", "file")}
        own = {name: value.hex() if isinstance(value, bytes) else value for name, value in row.items()}
        del own["reading_id"], own["sheet_id"]
        yield {
            "reading": {
                "id": self._readings[reading_id],
                **own,
                "sheet": sheet if sheet["sha256"] else None,
                "tables": tables,
            }
        }

    def _source(self, sha256: str) -> Iterator[Line]:
        if sha256 in self._sources:
            return
        self._sources.add(sha256)
        row = self._connection.execute("SELECT bytes FROM source WHERE sha256 = ?", (sha256,)).fetchone()
        if row:
            yield {"source": {"sha256": sha256, "bytes": base64.b64encode(row[0]).decode("ascii")}}


def curve_json(curve: Curve) -> Line:
    """A curve with its points; null for what is not known."""
    sheet = curve.sheet
    return {
        "element": curve.element,
        "edge": curve.edge,
        "meaning": curve.meaning,
        "quantity": curve.quantity,
        "base": curve.base,
        "conditions": {name: value for name, value in asdict(curve.conditions).items() if value is not None},
        "at": dict(curve.at),
        "leaves_top": curve.leaves_top,
        "basis": curve.basis,
        "source": curve.source,
        "sheet": sheet and asdict(sheet),
        "time_setting": curve.time_setting,
        "time_setting_at": curve.time_setting_at,
        "parts": [
            {
                name: _numbers(getattr(part, name))
                for name in ("current", "value", "sd_current", "sd_value", "sd_common")
            }
            for part in curve.parts
        ],
    }


def _numbers(values: Floats) -> list[float | None]:
    return [None if np.isnan(value) else value for value in values.tolist()]
