"""Rows that wait to be written together: ids are given at once, the database is asked once for many rows."""

import sqlite3
from collections.abc import Iterable, Sequence

FLUSH_AT = 50_000
"""Waiting rows that are written before more are gathered: bounds memory, and is far past where batching gains."""

COLUMNS = {
    "device": "device_id, device_key, kind",
    "sheet": "sheet_id, sha256, page, plot, file",
    "reading": (
        "reading_id, statement_sha256, sheet_id, program_version, title, issue, date, maker, note, worksheet, axes, "
        "sheet_width, sheet_height, sheet_unit, sheet_pages, evidence_sha256"
    ),
    "reading_warning": "reading_id, seq, code, text, x, y, is_accepted, accepted_reason, accepted_name",
    "finding": (
        "reading_id, seq, device_key, standard, clause, requirement, limit_value, unit, value, lower, "
        "upper, outcome, is_advisory, source, rule, current, base, note, "
        "permitted, time_s"
    ),
    "grid_line": "reading_id, seq, axis, value, sd, width, darkness",
    "grid_point": "reading_id, line_seq, seq, x, y",
    "revision": (
        "revision_id, device_id, number, content_sha256, created_at, author, reason, program_version, "
        "reading_id, characteristic, standard, standard_edition, rated_current_a, rated_residual_current_a, "
        "residual_waveform, residual_delay, rated_voltage_v, poles, frequency_hz, ambient_reference_c, "
        "utilisation_category, maker, series, catalogue, state"
    ),
    "breaking": "revision_id, seq, quantity, value_a, voltage_v, supply, duration_s",
    "setting": "revision_id, name, seq, base, from_value, to_value, at_current, can_be_off",
    "setting_step": "revision_id, name, seq, step_value",
    "derating": "revision_id, seq, element, ambient_c, factor",
    "curve": (
        "curve_id, content_sha256, element, edge, meaning, quantity, base, basis, leaves_top, source, "
        "sheet_id, start, time_kind, supply, voltage_v, frequency_hz, ambient_c, poles_loaded, settings, "
        "time_setting, time_setting_at"
    ),
    "point": "curve_id, part, seq, current, value, sd_current, sd_value, sd_common",
    "read_curve": (
        "reading_id, seq, curve_id, label, devices, tolerance, origin, confidence, correlation_length, "
        "starts_at_frame, ends_at_frame, colour, width, is_boundary"
    ),
    "read_point": "reading_id, curve_seq, seq, x, y, sd, current, value, sd_current, sd_value",
    "read_gap": "reading_id, curve_seq, seq, start_x, start_y, end_x, end_y",
    "read_fit": "reading_id, curve_seq, fit",
    "read_form": ("reading_id, curve_seq, seq, name, standard, from_current, to_current, rms, excess, also, rivals"),
    "read_form_parameter": "reading_id, curve_seq, form_seq, seq, name, value, sd",
    "revision_curve": "revision_id, seq, curve_id, reading_id",
    "log": "seq, at, name, action, revision_id, state, reason, origin, sha256",
}
"""Table -> columns of its rows, a table after those it refers to."""

_NUMBERED = ("device", "sheet", "reading", "revision", "curve")

Row = Sequence[object]


class WaitingRows:
    """Rows of every table, written in an order that keeps references whole; call inside one transaction."""

    def __init__(self, connection: sqlite3.Connection) -> None:
        self._connection = connection
        self._rows: dict[str, list[Row]] = {table: [] for table in COLUMNS}
        self._waiting = 0
        self._last = {table: self._last_id(table) for table in _NUMBERED}

    def new_id(self, table: str) -> int:
        """The next id of a table; none other can take it while the transaction holds the write lock."""
        self._last[table] += 1
        return self._last[table]

    def add(self, table: str, rows: Iterable[Row]) -> None:
        """Let rows wait."""
        rows = list(rows)
        self._rows[table].extend(rows)
        self._waiting += len(rows)

    @property
    def are_many(self) -> bool:
        """Whether so many wait that they should be written once all that refer to each other have been added."""
        return self._waiting >= FLUSH_AT

    def write(self) -> None:
        """Write all that wait."""
        for table, columns in COLUMNS.items():
            marks = ", ".join("?" for _ in columns.split(","))
            self._connection.executemany(
                f"INSERT INTO {table} ({columns}) VALUES ({marks})",
                self._rows[table],
            )
            self._rows[table].clear()
        self._waiting = 0

    def _last_id(self, table: str) -> int:
        sql = f"SELECT coalesce(max({table}_id), 0) FROM {table}"
        return int(self._connection.execute(sql).fetchone()[0])
