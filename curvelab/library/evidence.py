"""What led to a device, as rows: the worksheet, its document, the calibration, warnings and findings."""

import json
import math
from collections.abc import Iterator
from dataclasses import fields, is_dataclass, replace
from typing import Any

import numpy as np

from curvelab.library.rows import Row, WaitingRows
from curvelab.records.axes import Axes
from curvelab.records.finding import Finding
from curvelab.records.reading import Reading
from curvelab.records.warning import ReadingWarning


def add_reading(rows: WaitingRows, reading: Reading, statement: bytes, sheet_id: int | None) -> int:
    """Let a reading's rows wait; gives its id."""
    reading_id = rows.new_id("reading")
    document = reading.worksheet.document
    told = (document.title, document.issue, document.date, document.maker, document.note, reading.worksheet.text)
    axes = reading.axes and axes_as_json(reading.axes)
    rows.add("reading", [(reading_id, statement, sheet_id, reading.program_version, *told, axes)])
    rows.add("reading_warning", _warning_rows(reading_id, reading.warnings))
    rows.add("finding", _finding_rows(reading_id, reading.findings))
    return reading_id


def axes_as_json(axes: Axes) -> str:
    """The calibration with its covariance; the measured grid lines, which the map sums up, are left out."""
    return json.dumps(_plain(replace(axes, grid=())), separators=(",", ":"), allow_nan=False)


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


def _warning_rows(reading_id: int, warnings: tuple[ReadingWarning, ...]) -> Iterator[Row]:
    for seq, warning in enumerate(warnings, start=1):
        accepted = warning.accepted
        yield (
            reading_id,
            seq,
            warning.code,
            warning.text,
            *(warning.at or (None, None)),
            accepted is not None,
            accepted and accepted.reason,
            accepted and accepted.name,
        )


def _finding_rows(reading_id: int, findings: tuple[Finding, ...]) -> Iterator[Row]:
    for seq, finding in enumerate(findings, start=1):
        yield (
            reading_id,
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
        )
