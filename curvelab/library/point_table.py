"""Points as a table (CSV), one row a point: out of the library, and from handbook tables into it.

A cell of text that a spreadsheet would take for a formula begins with an apostrophe, which is taken off again on the
way in. The rows of a device stand together, the rows of a curve in the order of its points.
"""

import csv
import json
import math
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace
from itertools import groupby
from types import MappingProxyType
from typing import Any

import numpy as np

from curvelab.errors import InputError
from curvelab.library.load import CONDITION_COLUMNS, PLATE_COLUMNS
from curvelab.records.curve import Conditions, Curve, Part
from curvelab.records.device import DeviceRecord, Nameplate

CURVE_COLUMNS = ("element", "edge", "meaning", "quantity", "base", *CONDITION_COLUMNS, "leaves_top", "settings")
POINT_COLUMNS = ("part", "current", "value", "sd_current", "sd_value", "sd_common")
_PLATE = MappingProxyType({"frequency_hz": "rated_frequency_hz"})
PLATE = MappingProxyType({name: _PLATE.get(name, name) for name in PLATE_COLUMNS})
"""Field of the nameplate -> its column; the frequency a curve is drawn for has the field's name."""

COLUMNS = (
    *("device_key", "revision", "state", "kind", *CURVE_COLUMNS[:-1], *POINT_COLUMNS),
    *(*PLATE.values(), "source", "settings"),
)
"""In the order in which they are written; what may hold a comma stands last."""

NEEDED = ("device_key", "kind", "edge", "current", "value")
_TOLD = ("revision", "state")
"""Written, but nothing on the way in: the library gives both."""

_WHOLE = ("poles", "poles_loaded", "part", "leaves_top")
_NUMBERS = (
    *("rated_current_a", "rated_residual_current_a", "rated_voltage_v", "rated_frequency_hz", "frequency_hz"),
    *("ambient_reference_c", "voltage_v", "ambient_c", "current", "value", "sd_current", "sd_value", "sd_common"),
)
_FORMULA = ("=", "+", "-", "@", "\t", "\r", "\n", "'")
_UNSAID: Mapping[str, object] = {"element": "whole", "quantity": "time", "base": "A", "part": 1, "leaves_top": 0}

Row = dict[str, Any]


def point_rows(record: DeviceRecord) -> Iterator[list[str]]:
    """The cells of a device's points, in the order of `COLUMNS`."""
    plate = record.nameplate
    own = {"device_key": plate.key, "revision": record.revision, "state": record.state, "kind": plate.kind}
    own |= {column: getattr(plate, name) for name, column in PLATE.items()}
    for curve in record.curves:
        told = {name: getattr(curve, name) for name in ("element", "edge", "meaning", "quantity", "base")}
        told |= {name: getattr(curve.conditions, name) for name in CONDITION_COLUMNS}
        told |= {"settings": json.dumps(dict(curve.at), sort_keys=True) if curve.at else None}
        told |= {"leaves_top": int(curve.leaves_top), "source": curve.source or (curve.sheet and curve.sheet.file)}
        for number, part in enumerate(curve.parts, start=1):
            columns = (part.current, part.value, part.sd_current, part.sd_value, part.sd_common)
            for values in zip(*(column.tolist() for column in columns), strict=True):
                point = dict(zip(POINT_COLUMNS, (number, *values), strict=True))
                row = {**own, **told, **point}
                yield [_cell(row[name]) for name in COLUMNS]


def _cell(value: object) -> str:
    """Numbers so that they come back exactly; nothing for what is not known; text that is no formula."""
    if value is None or (isinstance(value, float) and math.isnan(value)):
        return ""
    if isinstance(value, str):
        return f"'{value}" if value.startswith(_FORMULA) else value
    return repr(value)


def read_point_table(lines: Iterable[str], name: str, source: str = "") -> Iterator[DeviceRecord]:
    """The devices of a table.

    Parameters
    ----------
    lines : iterable of str
        The first line names the columns, in any order; `NEEDED` must be among them.
    name : str
        What messages call the table.
    source : str
        Where the points come from, for rows that do not say so.

    Raises
    ------
    InputError
        A column or cell is not what it must be, with its row; or nothing says where the points come from.
    """
    reader = csv.DictReader(lines, strict=True)
    try:
        _check_columns(reader.fieldnames, name)
        rows = (_row(cells, f"{name}, row {number}", source) for number, cells in enumerate(reader, start=2))
        seen: set[str] = set()
        for key, own in groupby(rows, key=lambda row: str(row["device_key"])):
            if key in seen:
                raise InputError(f"{name}: the rows of {key} do not stand together", "", "Sort the table by device_key")
            seen.add(key)
            yield _device(list(own))
    except csv.Error as error:
        raise InputError(
            f"{name} is no CSV table: {error}", "Cells parted by commas", "Save it as CSV again"
        ) from error


def _check_columns(given: Iterable[str] | None, name: str) -> None:
    names = list(given or ())
    missing = [column for column in NEEDED if column not in names]
    unknown = [column for column in names if column not in COLUMNS]
    if missing:
        raise InputError(f"{name} lacks the columns {', '.join(missing)}", "The first row names the columns")
    if unknown or len(set(names)) < len(names):
        wrong = unknown[0] if unknown else next(column for column in names if names.count(column) > 1)
        raise InputError(
            f"{name}: the column '{wrong}' is not known or there twice", f"Known: {', '.join(COLUMNS)}", "Rename it"
        )


def _row(cells: Mapping[str | None, Any], place: str, source: str) -> Row:
    if None in cells or None in cells.values():
        raise InputError(f"{place} has more or fewer cells than there are columns")
    row: Row = {"source": source}
    for column, text in cells.items():
        if column is not None and column not in _TOLD and text != "":
            row[column] = _value(column, text, place)
    for column in NEEDED:
        if column not in row:
            raise InputError(f"{place}: {column} is empty", "Each point has a device, a kind, an edge and two numbers")
    if not row["source"]:
        raise InputError(f"{place}: nothing says where the points come from", "A cell in source, or one for all")
    return {**_UNSAID, **row}


def _value(column: str, text: str, place: str) -> object:
    try:
        if column in _NUMBERS:
            return float(text)
        if column in _WHOLE:
            return int(text)
        if column == "settings":
            return tuple(sorted((str(name), float(value)) for name, value in json.loads(text).items()))
    except (ValueError, TypeError, AttributeError, RecursionError):
        raise InputError(
            f"{place}: '{text[:40]}' in {column} is not what it must be", "A number; for settings JSON"
        ) from None
    return text[1:] if text.startswith("'") else text


def _device(rows: list[Row]) -> DeviceRecord:
    first = rows[0]
    said: Row = {name: first.get(column) for name, column in PLATE.items()}
    plate = Nameplate(key=first["device_key"], kind=first["kind"], **said)
    for row in rows:
        for name in ("kind", *PLATE.values()):
            if row.get(name) != first.get(name):
                raise InputError(
                    f"The rows of {plate.key} differ in {name}", "One device has one nameplate", "Correct them"
                )
    curves: dict[tuple[object, ...], list[Row]] = {}
    for row in rows:
        curves.setdefault(tuple(row.get(name) for name in (*CURVE_COLUMNS, "source")), []).append(row)
    return DeviceRecord(nameplate=plate, curves=tuple(_curve(own) for own in curves.values()))


def _curve(rows: list[Row]) -> Curve:
    first = rows[0]
    return replace(
        Curve(
            element=first["element"],
            edge=first["edge"],
            meaning=first.get("meaning"),
            quantity=first["quantity"],
            base=first["base"],
            parts=tuple(_part(list(own)) for _, own in groupby(rows, key=lambda row: int(row["part"]))),
            conditions=Conditions(**{name: first.get(name) for name in CONDITION_COLUMNS}),
            leaves_top=bool(first["leaves_top"]),
            source=first["source"],
        ),
        at=MappingProxyType(dict(first.get("settings", ()))),
    )


def _part(rows: list[Row]) -> Part:
    columns = {
        name: np.array([row.get(name, math.nan) for row in rows], dtype=np.float64) for name in POINT_COLUMNS[1:]
    }
    return Part(**columns)
