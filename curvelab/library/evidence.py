"""What led to a device, as rows: the worksheet, its document, the calibration, the lines read, warnings, findings."""

import hashlib
import json
import math
import sqlite3
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import asdict, astuple, fields, is_dataclass, replace
from typing import Any

import numpy as np

from curvelab.library.identity import curve_sha256
from curvelab.library.rows import Row, WaitingRows
from curvelab.records.axes import Axes
from curvelab.records.curve import Curve
from curvelab.records.finding import Finding
from curvelab.records.fit import CurveFit
from curvelab.records.form import PublishedForm
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.trace import Trace
from curvelab.records.warning import ReadingWarning

SheetName = tuple[str, int, int] | None

EVIDENCE: Mapping[str, str] = {
    "reading_warning": "seq",
    "finding": "seq",
    "grid_line": "seq",
    "grid_point": "line_seq, seq",
    "read_curve": "seq",
    "read_point": "curve_seq, seq",
    "read_gap": "curve_seq, seq",
    "read_fit": "curve_seq",
    "read_form": "curve_seq, seq",
    "read_form_parameter": "curve_seq, form_seq, seq",
}
"""Table of a reading's rows -> their order."""

LATER = frozenset({"read_fit", "read_form", "read_form_parameter"})
"""Tables that readings stored before them have no rows in, and whose absence does not change a hash."""


class ReadingRows:
    """The rows of one reading by table, without its id: what is written, hashed, and compared by `verify`."""

    def __init__(self, reading: Reading, curve_ids: Sequence[int]) -> None:
        self.of: dict[str, list[Row]] = {table: [] for table in EVIDENCE}
        self._add("reading_warning", _warning_rows(reading.warnings))
        self._add("finding", _finding_rows(reading.findings))
        for seq, line in enumerate(reading.axes.grid if reading.axes else (), start=1):
            self._add("grid_line", [(seq, line.axis, line.value, line.sd, line.width, line.darkness)])
            self._add("grid_point", ((seq, place, *at) for place, at in enumerate(line.points.tolist(), start=1)))
        for seq, (read, curve_id) in enumerate(zip(reading.curves, curve_ids, strict=True), start=1):
            self._add_curve(seq, read, curve_id)

    def _add(self, table: str, rows: Iterable[Row]) -> None:
        self.of[table].extend(rows)

    def _add_curve(self, number: int, read: ReadCurve, curve_id: int) -> None:
        trace = read.trace
        tolerance = read.tolerance and json.dumps(asdict(read.tolerance))
        told = (curve_id, read.label, json.dumps(read.devices), tolerance)
        followed = _trace_values(trace) if trace else ("typed", *(None,) * 7)
        self._add("read_curve", [(number, *told, *followed)])
        unknown = np.full(read.current.size, np.nan)
        places = (*trace.places.T, trace.sd) if trace else (unknown, unknown, unknown)
        columns = (*places, read.current, read.value, read.sd_current, read.sd_value)
        points = enumerate(zip(*(column.tolist() for column in columns), strict=True), start=1)
        self._add("read_point", ((number, seq, *values) for seq, values in points))
        for seq, gap in enumerate(trace.gaps if trace else (), start=1):
            self._add("read_gap", [(number, seq, *gap.start, *gap.end)])
        if read.fit is not None:
            self._add("read_fit", [(number, fit_as_json(read.fit))])
            for seq, form in enumerate(read.fit.forms, start=1):
                self._add("read_form", [(number, seq, *_form_values(form))])
                own = ((number, seq, k, *astuple(each)) for k, each in enumerate(form.parameters, start=1))
                self._add("read_form_parameter", own)


def add_reading(
    rows: WaitingRows,
    reading: Reading,
    statement: bytes,
    sheet: tuple[int | None, SheetName],
    curve_id: Callable[[Curve, bytes], int],
) -> tuple[int, bytes]:
    """Let a reading's rows wait; gives its id and its hash.

    Parameters
    ----------
    statement : bytes
        Hash of what people said, see `curvelab.library.identity`.
    sheet : tuple
        Id of the sheet, and its (SHA-256, page, plot); None for typed points.
    curve_id : callable
        Gives the id of a curve with its hash, stored if it is new.
    """
    reading_id = rows.new_id("reading")
    sheet_id, sheet_name = sheet
    document = reading.worksheet.document
    told = (document.title, document.issue, document.date, document.maker, document.note, reading.worksheet.text)
    page = reading.sheet
    size = (page.width, page.height, page.unit, page.pages) if page else (None,) * 4
    said = (reading.program_version, *told, reading.axes and axes_as_json(reading.axes), *size)
    hashes = [curve_sha256(read.curve) for read in reading.curves]
    ids = [curve_id(read.curve, sha256) for read, sha256 in zip(reading.curves, hashes, strict=True)]
    parts = ReadingRows(reading, ids)
    sha256 = evidence_sha256((statement, *(sheet_name or ()), *said), parts.of, dict(zip(ids, hashes, strict=True)))
    rows.add("reading", [(reading_id, statement, sheet_id, *said, sha256)])
    for table, own in parts.of.items():
        rows.add(table, ((reading_id, *row) for row in own))
    return reading_id, sha256


def evidence_sha256(said: Row, rows: Mapping[str, Iterable[Row]], curves: Mapping[int, bytes]) -> bytes:
    """Hash of all a reading says, the same in every library.

    Parameters
    ----------
    said : sequence
        Its own row, the sheet by its name.
    rows : mapping
        Its rows in each table of `EVIDENCE`, without its id.
    curves : mapping
        Curve id -> content hash.
    """
    digest = hashlib.sha256(_hashed(said))
    for table in EVIDENCE:
        own = list(rows[table])
        if table in LATER and not own:
            continue
        digest.update(table.encode("ascii"))
        for row in own:
            known = (row[0], curves[row[1]], *row[2:]) if table == "read_curve" else row  # type: ignore[index]
            digest.update(_hashed(known))
    return digest.digest()


def stored_evidence_sha256(connection: sqlite3.Connection, reading_id: int) -> tuple[bytes | None, bytes]:
    """The hash a reading was stored with, and the one its rows have now."""
    row = connection.execute("SELECT * FROM reading WHERE reading_id = ?", (reading_id,)).fetchone()
    sheet = connection.execute("SELECT sha256, page, plot FROM sheet WHERE sheet_id = ?", (row[2],)).fetchone()
    rows = {
        table: connection.execute(f"SELECT * FROM {table} WHERE reading_id = ? ORDER BY {order}", (reading_id,))
        for table, order in EVIDENCE.items()
    }
    curves = connection.execute(
        "SELECT curve_id, content_sha256 FROM read_curve JOIN curve USING (curve_id) WHERE reading_id = ?",
        (reading_id,),
    )
    own = {table: (row[1:] for row in cursor) for table, cursor in rows.items()}
    return row[-1], evidence_sha256((row[1], *(sheet or ()), *row[3:-1]), own, dict(curves.fetchall()))


def _hashed(row: Row) -> bytes:
    """A row as SQLite gives it back: NaN as NULL, no sign of zero; every number as a double, truth too."""
    return repr([_stored(value) for value in row]).encode("utf-8", "surrogatepass")


def _stored(value: object) -> object:
    if isinstance(value, int | float):
        return None if math.isnan(value) else float(value) + 0.0
    return value


def axes_as_json(axes: Axes) -> str:
    """The calibration with its covariance; the measured grid lines are rows of their own."""
    return json.dumps(_plain(replace(axes, grid=())), separators=(",", ":"), allow_nan=False)


def _trace_values(trace: Trace) -> tuple[object, ...]:
    colour = "#{:02x}{:02x}{:02x}".format(*trace.colour) if trace.colour else None
    followed = (trace.origin, trace.confidence, trace.correlation_length, *trace.ends_at_frame)
    return (*followed, colour, trace.width, trace.boundary)


def _form_values(form: PublishedForm) -> tuple[object, ...]:
    held = (form.from_current, form.to_current, form.rms, form.excess)
    return (form.name, form.standard, *held, json.dumps(form.also), json.dumps(form.rivals))


def fit_as_json(fit: CurveFit) -> str:
    """The model without its tabulated form, which is the curve itself, and without its forms, which have rows.

    Of a covariance the lower triangle is written, row by row.
    """
    said = _plain(replace(fit, parts=(), forms=()))
    del said["parts"], said["forms"]
    for piece, known in zip(said["pieces"], fit.pieces, strict=True):
        if known.covariance.ndim == 2:
            piece["covariance"] = _plain(known.covariance[np.tril_indices(len(known.covariance))])
    return json.dumps(said, separators=(",", ":"), allow_nan=False)


def _plain(value: Any) -> Any:
    """Records as mappings, arrays as lists; an unknown number as null."""
    if is_dataclass(value):
        return {field.name: _plain(getattr(value, field.name)) for field in fields(value)}
    if isinstance(value, np.ndarray):
        return _plain(value.tolist())
    if isinstance(value, tuple | list):
        return [_plain(item) for item in value]
    if isinstance(value, float) and not math.isfinite(value):
        return None
    return value


def _warning_rows(warnings: tuple[ReadingWarning, ...]) -> Iterator[Row]:
    for seq, warning in enumerate(warnings, start=1):
        accepted = warning.accepted
        yield (
            seq,
            warning.code,
            warning.text,
            *(warning.at or (None, None)),
            accepted is not None,
            accepted and accepted.reason,
            accepted and accepted.name,
        )


def _finding_rows(findings: tuple[Finding, ...]) -> Iterator[Row]:
    for seq, finding in enumerate(findings, start=1):
        yield (
            seq,
            finding.device,
            finding.standard,
            finding.clause,
            finding.requirement,
            finding.limit,
            finding.unit,
            finding.value,
            *(finding.interval or (None, None)),
            finding.outcome,
            finding.advisory,
            finding.source,
            finding.rule,
            finding.current,
            finding.base,
            finding.note,
            finding.permitted,
            finding.time_s,
        )
