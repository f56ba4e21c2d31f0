"""A TOML table that hands out checked values; every complaint carries the table's place and the value."""

import math
import re
from collections.abc import Mapping, Sequence
from datetime import date
from difflib import get_close_matches
from typing import Any, TypeVar, cast

from curvelab.errors import WorksheetError

Choice = TypeVar("Choice", bound=str)

SHOWN = 60
"""Longest part of a wrong value that a message repeats."""


def written(value: object) -> str:
    """A value as a message shows it: short and on one line."""
    text = " ".join((f"'{value}'" if isinstance(value, str) else str(value)).split())
    return text if len(text) <= SHOWN else f"{text[:SHOWN]}..."


def nearest(name: str, known: Sequence[str]) -> str:
    """``Did you mean 'colour'?``, or the known names where none is near."""
    close = get_close_matches(name.lower(), known, n=1, cutoff=0.55)
    return f"Did you mean '{close[0]}'?" if close else f"Known here: {', '.join(known)}"


def as_number(value: object) -> float | None:
    """A finite number, or None; true and false are no numbers."""
    if isinstance(value, bool) or not isinstance(value, int | float):
        return None
    try:
        number = float(value)
    except OverflowError:
        return None
    return number if math.isfinite(number) else None


def as_numbers(value: object, count: int) -> tuple[float, ...] | None:
    """A list of exactly ``count`` finite numbers, or None."""
    if not isinstance(value, list) or len(value) != count:
        return None
    numbers = tuple(number for number in map(as_number, value) if number is not None)
    return numbers if len(numbers) == count else None


class Table:
    """One table of the worksheet.

    Parameters
    ----------
    entries : object
        What the TOML holds there.
    place : str
        How messages call it: ``breaker.toml, [[curves]] 2``.
    known : sequence of str
        Every key it may have.

    Raises
    ------
    WorksheetError
        It is not a table, or has a key that is not known.
    """

    def __init__(self, entries: object, place: str, known: Sequence[str]) -> None:
        self.place = place
        if not isinstance(entries, Mapping):
            raise WorksheetError(f"{place}: {written(entries)} stands where a table is expected")
        self._entries: Mapping[str, Any] = entries
        for key in self._entries:
            if key not in known:
                raise WorksheetError(f"{place}: unknown key {written(key)}", nearest(key, known))

    def __contains__(self, key: str) -> bool:
        return key in self._entries

    def wrong(self, key: str, expected: str, fix: str = "") -> WorksheetError:
        """The error for a key's value."""
        if key not in self._entries:
            return WorksheetError(f"{self.place}: '{key}' is missing", expected, fix)
        return WorksheetError(f"{self.place}: {key} = {written(self._entries[key])} is not valid", expected, fix)

    def raw(self, key: str) -> object:
        """The value as the TOML holds it; None where the key is absent."""
        return self._entries.get(key)

    def text(self, key: str) -> str | None:
        """A text; a TOML date counts as its ISO form."""
        value = self.raw(key)
        if isinstance(value, date):
            return value.isoformat()
        if value is not None and not isinstance(value, str):
            raise self.wrong(key, "Expected a text in quotes")
        return value

    def needed_text(self, key: str) -> str:
        """A text that must be there and not be blank."""
        value = self.text(key)
        if value is None or not value.strip():
            raise self.wrong(key, "Expected a text in quotes")
        return value

    def choice(self, key: str, options: Sequence[Choice]) -> Choice | None:
        """One of a few words."""
        value = self.text(key)
        if value is not None and value not in options:
            raise self.wrong(key, f"Expected one of: {', '.join(options)}", _hint(value, options))
        return cast("Choice | None", value)

    def pattern(self, key: str, pattern: str, expected: str) -> str | None:
        """A text that matches a regular expression as a whole."""
        value = self.text(key)
        if value is not None and not re.fullmatch(pattern, value):
            raise self.wrong(key, expected)
        return value

    def flag(self, key: str) -> bool:
        """True or false; false where absent."""
        value = self.raw(key)
        if value is not None and not isinstance(value, bool):
            raise self.wrong(key, "Expected true or false")
        return bool(value)

    def number(self, key: str) -> float | None:
        """A finite number."""
        value = as_number(self.raw(key))
        if value is None and key in self:
            raise self.wrong(key, "Expected a finite number")
        return value

    def positive(self, key: str) -> float | None:
        """A finite number above zero."""
        value = self.number(key)
        if value is not None and value <= 0:
            raise self.wrong(key, "Expected a number above 0")
        return value

    def needed_number(self, key: str) -> float:
        """A finite number that must be there."""
        value = self.number(key)
        if value is None:
            raise self.wrong(key, "Expected a finite number")
        return value

    def needed_positive(self, key: str) -> float:
        """A finite number above zero that must be there."""
        value = self.positive(key)
        if value is None:
            raise self.wrong(key, "Expected a number above 0")
        return value

    def count(self, key: str) -> int | None:
        """A whole number from 1 upwards."""
        value = self.raw(key)
        if value is None:
            return None
        if isinstance(value, bool) or not isinstance(value, int) or not 1 <= value <= 10**6:
            raise self.wrong(key, "Expected a whole number from 1 upwards")
        return value

    def pair(self, key: str, meaning: str) -> tuple[float, float] | None:
        """A list of two finite numbers; ``meaning`` names them in the message."""
        numbers = as_numbers(self.raw(key), 2)
        if numbers is None and key in self:
            raise self.wrong(key, f"Expected {meaning}")
        return None if numbers is None else (numbers[0], numbers[1])

    def rows(self, key: str, count: int, meaning: str) -> tuple[tuple[float, ...], ...]:
        """A list of lists of ``count`` finite numbers each; empty where absent."""
        value = self.raw(key)
        if value is None:
            return ()
        if not isinstance(value, list) or not value:
            raise self.wrong(key, f"Expected a list of {meaning}")
        rows = []
        for index, entry in enumerate(value, start=1):
            row = as_numbers(entry, count)
            if row is None:
                raise WorksheetError(
                    f"{self.place}: {key} {index}: {written(entry)} is not valid", f"Expected {meaning}"
                )
            rows.append(row)
        return tuple(rows)

    def positives(self, key: str) -> tuple[float, ...]:
        """A list of numbers above zero, none twice; empty where absent."""
        value = self.raw(key)
        if value is None:
            return ()
        numbers = as_numbers(value, len(value)) if isinstance(value, list) else None
        if not numbers or min(numbers) <= 0 or len(set(numbers)) != len(numbers):
            raise self.wrong(key, "Expected a list of numbers above 0, none twice")
        return numbers

    def names(self, key: str) -> tuple[str, ...]:
        """A list of texts, none blank or twice; empty where absent."""
        value = self.raw(key)
        if value is None:
            return ()
        if not isinstance(value, list) or not value or not all(isinstance(name, str) and name for name in value):
            raise self.wrong(key, "Expected a list of texts in quotes")
        if len(set(value)) != len(value):
            raise self.wrong(key, "Expected each only once")
        return tuple(value)

    def table(self, key: str, known: Sequence[str]) -> "Table | None":
        """A table within this one."""
        return Table(self.raw(key), f"{self.place} {key}", known) if key in self else None

    def tables(self, key: str, known: Sequence[str], place: str | None = None) -> list["Table"]:
        """A list of tables, counted from 1 in messages; ``place`` replaces this table's own place before the count."""
        value = self.raw(key)
        if value is None:
            return []
        if not isinstance(value, list):
            raise WorksheetError(
                f"{self.place}: '{key}' is not a list of tables", "", f"Write each under its own heading [[{key}]]"
            )
        start = place or f"{self.place} {key}"
        return [Table(entry, f"{start} {index}", known) for index, entry in enumerate(value, start=1)]


def _hint(value: str, options: Sequence[str]) -> str:
    close = get_close_matches(value, options, n=1, cutoff=0.55)
    return f"Did you mean '{close[0]}'?" if close else ""
