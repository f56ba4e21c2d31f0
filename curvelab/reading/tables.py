"""A worksheet's tables edited and read again, strictly, so that nothing gets in that could not be typed."""

import re
import tomllib
from collections.abc import Callable, Mapping, Sequence
from typing import Any, Literal, TypeAlias, TypeVar

from curvelab.errors import InputError
from curvelab.records.worksheet import Worksheet
from curvelab.worksheets.read import worksheet_of
from curvelab.worksheets.write import worksheet_text

Tables: TypeAlias = dict[str, Any]
Entry = TypeVar("Entry")

NUMBER_AND_UNIT = re.compile(r"\s*([0-9.]+(?:[eE][+-]?[0-9]+)?)\s*([A-Za-z]\w*)?\s*")


def edited(worksheet: Worksheet, edit: Callable[[Tables], None]) -> Worksheet:
    """The worksheet whose tables were edited, with its text.

    Raises
    ------
    WorksheetError
        What was said cannot stand in a worksheet.
    """
    tables = tomllib.loads(worksheet_text(worksheet))
    edit(tables)
    said = worksheet_of(tables, "worksheet")
    return worksheet_of(tables, "worksheet", worksheet_text(said))


def entries_of(tables: Tables, name: str) -> list[Any]:
    """A list of tables, begun where there is none."""
    entries: list[Any] = tables.setdefault(name, [])
    return entries


def numbered(entries: Sequence[Entry], index: int, what: str) -> Entry:
    """The entry of an index.

    Raises
    ------
    InputError
        There is none.
    """
    if not 0 <= index < len(entries):
        raise InputError(f"There is no {what} {index + 1}", f"There are {len(entries)}", "Look at the newest state")
    return entries[index]


def merge(table: Tables, fields: Mapping[str, Any]) -> None:
    """Set keys; null takes one out."""
    for key, value in fields.items():
        if value is None:
            table.pop(key, None)
        else:
            table[key] = value


def with_fields(
    worksheet: Worksheet, name: Literal["curves", "devices"], index: int | None, fields: Mapping[str, Any]
) -> Worksheet:
    """The worksheet with keys set in one table of a list, or in a new one."""

    def edit(tables: Tables) -> None:
        entries = entries_of(tables, name)
        if index is None:
            entries.append({})
        merge(entries[-1] if index is None else numbered(entries, index, name.removesuffix("s")), fields)

    return edited(worksheet, edit)


def number_and_unit(value: float | str) -> Tables:
    """``value``, and ``unit`` where one is written behind it.

    Raises
    ------
    InputError
        It is no number with or without a unit.
    """
    if not isinstance(value, str):
        return {"value": value}
    found = NUMBER_AND_UNIT.fullmatch(value)
    try:
        number = float(found[1]) if found else None
    except ValueError:
        number = None
    if found is None or number is None:
        raise InputError(f"'{value}' is no value", "A number, or one with its unit, such as 2 kA or 30 ms")
    return {"value": number, "unit": found[2]} if found[2] else {"value": number}


def listed(fields: Mapping[str, Any]) -> str:
    """Keys and their values in words."""
    return ", ".join(f"{key} {'taken out' if value is None else value}" for key, value in fields.items()) or "as it was"
