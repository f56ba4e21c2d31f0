"""What the revisions of an imported library refer to: its curves, readings and sheets, each once, by content."""

import sqlite3
from dataclasses import dataclass, replace
from typing import Any

from curvelab.library.device_rows import add_curve
from curvelab.library.evidence import EVIDENCE, LATER, evidence_sha256
from curvelab.library.exchange import Line
from curvelab.library.exchange_read import curve_of, source_of
from curvelab.library.identity import NO_STATEMENT, curve_sha256
from curvelab.library.rows import COLUMNS, Row, WaitingRows
from curvelab.library.sheet_files import keep_sheet_files
from curvelab.library.sound import refuse_unsound_curve
from curvelab.records.curve import Curve, SheetKey


@dataclass(kw_only=True, slots=True)
class _GivenReading:
    """A reading of the file; it is stored once a revision needs it."""

    statement: bytes
    sheet: SheetKey | None
    said: Row
    evidence: bytes | None
    rows: dict[str, list[Row]]
    reading_id: int | None = None


class UnitedParts:
    """Curves, readings and sheets of one import: ids of the file -> what is here."""

    def __init__(self, connection: sqlite3.Connection, rows: WaitingRows) -> None:
        self._connection = connection
        self._rows = rows
        self._ids: dict[tuple[object, ...], int] = {}
        self._curves: dict[int, tuple[int, bytes, Curve]] = {}
        self._readings: dict[int, _GivenReading] = {}
        self._sources: dict[str, bytes] = {}

    def take_source(self, said: Line) -> None:
        """The bytes of a sheet's file."""
        sha256, content = source_of(said)
        self._sources[sha256] = content

    def keep_sources(self) -> None:
        """Store the bytes of sheets that are here now."""
        keep_sheet_files(self._connection, self._sources)

    def take_curve(self, said: Line) -> None:
        """A curve with its points."""
        curve = curve_of(said)
        refuse_unsound_curve(f"curve {said['id']}", curve)
        sha256 = curve_sha256(curve)
        curve_id, is_new = self._id("curve", ("content_sha256",), (sha256,))
        if is_new:
            add_curve(self._rows, curve_id, curve, sha256, self._sheet_id(curve.sheet))
        self._curves[said["id"]] = (curve_id, sha256, replace(curve, parts=()))

    def take_reading(self, said: Line) -> None:
        """A reading; refused where its rows are not what its hash says."""
        columns = COLUMNS["reading"].split(", ")[3:-1]
        statement = bytes.fromhex(said["statement_sha256"])
        sheet = said["sheet"] and SheetKey(**said["sheet"])
        given = _GivenReading(
            statement=statement,
            sheet=sheet,
            said=tuple(said[name] for name in columns),
            evidence=said["evidence_sha256"] and bytes.fromhex(said["evidence_sha256"]),
            rows={table: self._rows_of(table, said) for table in EVIDENCE},
        )
        name = (sheet.sha256, sheet.page, sheet.plot) if sheet else ()
        hashes = {curve_id: sha256 for curve_id, sha256, _ in self._curves.values()}
        found = evidence_sha256((statement, *name, *given.said), given.rows, hashes)
        if given.evidence is not None and given.evidence != found:
            raise ValueError(f"the rows of reading {said['id']} are not what its hash says")
        self._readings[said["id"]] = given

    def curve(self, given_id: int) -> Curve:
        """A curve of the file without its points."""
        return self._curves[given_id][2]

    def sha256(self, given_id: int) -> bytes:
        """The content hash of a curve of the file."""
        return self._curves[given_id][1]

    def curve_id(self, given_id: int) -> int:
        """The id here of a curve of the file."""
        return self._curves[given_id][0]

    def statement(self, given_id: int | None) -> bytes:
        """The statement's hash of a reading of the file."""
        return NO_STATEMENT if given_id is None else self._readings[given_id].statement

    def reading(self, given_id: int | None) -> tuple[int | None, bytes | None]:
        """The id here of a reading of the file, and its hash; stored now if it is new."""
        if given_id is None:
            return None, None
        given = self._readings[given_id]
        if given.reading_id is None:
            given.reading_id = self._stored(given)
            given.rows.clear()
        return given.reading_id, given.evidence

    def _stored(self, given: _GivenReading) -> int:
        reading_id, is_new = self._rows.new_id("reading"), True
        if given.evidence is not None:
            reading_id, is_new = self._id("reading", ("evidence_sha256",), (given.evidence,))
        if is_new:
            told = (reading_id, given.statement, self._sheet_id(given.sheet), *given.said, given.evidence)
            self._rows.add("reading", [told])
            for table, rows in given.rows.items():
                self._rows.add(table, ((reading_id, *row) for row in rows))
        return reading_id

    def _rows_of(self, table: str, said: Line) -> list[Row]:
        """The rows of a table; a file written before there was the table has none."""
        given = said["tables"].get(table, ()) if table in LATER else said["tables"][table]
        return [self._row(table, one) for one in given]

    def _row(self, table: str, said: Line) -> Row:
        """A row's values in the order of the columns, the reading's id left out."""
        values: list[Any] = [said[name] for name in COLUMNS[table].split(", ")[1:]]
        if table == "read_curve":
            values[1] = self._curves[values[1]][0]
        return values

    def _sheet_id(self, sheet: SheetKey | None) -> int | None:
        if sheet is None:
            return None
        known = (sheet.sha256, sheet.page, sheet.plot)
        sheet_id, is_new = self._id("sheet", ("sha256", "page", "plot"), known)
        if is_new:
            self._rows.add("sheet", [(sheet_id, *known, sheet.file)])
        return sheet_id

    def _id(self, table: str, columns: tuple[str, ...], known: tuple[object, ...]) -> tuple[int, bool]:
        """The id of the row with these values, and whether it is new and still to be added."""
        if (table, *known) in self._ids:
            return self._ids[(table, *known)], False
        condition = " AND ".join(f"{name} = ?" for name in columns)
        row = self._connection.execute(f"SELECT {table}_id FROM {table} WHERE {condition}", known).fetchone()
        found: int = row[0] if row else self._rows.new_id(table)
        self._ids[(table, *known)] = found
        return found, row is None
