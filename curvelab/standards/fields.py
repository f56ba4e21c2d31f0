"""Fields of a rule table read with the error that names the table, the rule and the field."""

import math
from collections.abc import Mapping
from typing import Any

from curvelab.errors import StandardError

Entry = Mapping[str, Any]


def refuse_unknown(table: Entry, known: set[str], place: str) -> None:
    """Refuse a key that means nothing: a misspelt limit must not be left out silently."""
    unknown = next((key for key in table if key not in known), None)
    if unknown is not None:
        raise StandardError(f"{place}: unknown key '{unknown}'", f"Known keys: {', '.join(sorted(known))}")


def tables(table: Entry, key: str, place: str) -> list[dict[str, Any]]:
    """An array of tables; none where the key is left out."""
    entries = table.get(key, [])
    if not isinstance(entries, list) or not all(isinstance(entry, dict) for entry in entries):
        raise StandardError(f"{place}: {key} is not a list of tables", f"[[{key}]]")
    return entries


def text(table: Entry, key: str, place: str, default: str | None = None) -> str:
    """A text that is not empty."""
    value = table.get(key, default)
    if not isinstance(value, str) or (not value and default is None):
        raise StandardError(f"{place}: {key} = {value!r}", "A text")
    return value


def texts(table: Entry, key: str, place: str, *, needed: bool = False) -> tuple[str, ...]:
    """A list of texts; empty where the key may be left out."""
    if key not in table and not needed:
        return ()
    values = table.get(key)
    if not isinstance(values, list) or not values or not all(isinstance(value, str) and value for value in values):
        raise StandardError(f"{place}: {key} = {values!r}", "A list of texts")
    return tuple(values)


def choice(table: Entry, key: str, known: tuple[str, ...], place: str) -> Any:
    """One of the words known."""
    value = table.get(key)
    if value not in known:
        raise StandardError(f"{place}: {key} = {value!r}", f"Expected one of: {', '.join(known)}")
    return value


def maybe(table: Entry, key: str, known: tuple[str, ...], place: str) -> Any:
    """One of the words known, or None where the key is left out."""
    return choice(table, key, known, place) if key in table else None


def number(table: Entry, key: str, place: str, default: float | None = None) -> float:
    """A positive number."""
    return positive(table.get(key, default), key, place)


def positive(value: Any, key: str, place: str) -> float:
    """The value, when it is a positive finite number (infinity only as a default)."""
    if isinstance(value, bool) or not isinstance(value, int | float) or math.isnan(value) or value <= 0:
        raise StandardError(f"{place}: {key} = {value!r}", "A positive number")
    return float(value)


def flag(table: Entry, key: str, place: str, default: bool | None = None) -> bool:
    """True or false."""
    value = table.get(key, default)
    if not isinstance(value, bool):
        raise StandardError(f"{place}: {key} = {value!r}", "true or false")
    return value


def pairs(table: Entry, key: str, place: str) -> list[tuple[float, Any]]:
    """Rows of two: a positive number each rating or current once, and what belongs to it."""
    rows = table.get(key)
    if not isinstance(rows, list) or not rows or not all(isinstance(row, list) and len(row) == 2 for row in rows):
        raise StandardError(f"{place}: {key} = {rows!r}", "Rows of two, such as [[16, 33], [20, 42]]")
    found = [(positive(row[0], key, place), row[1]) for row in rows]
    firsts = [first for first, _ in found]
    twice = next((first for first in firsts if firsts.count(first) > 1), None)
    if twice is not None:
        raise StandardError(f"{place}: {key} has {twice:g} twice", "One row each")
    return found
