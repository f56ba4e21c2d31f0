"""Finds devices by words and by what is on their nameplate: the current revision of each, sorted, page by page."""

import re
import sqlite3
from dataclasses import dataclass
from typing import Any

from curvelab.errors import InputError

COLUMNS = (
    "device_key",
    "revision",
    "state",
    "kind",
    "characteristic",
    "standard",
    "maker",
    "series",
    "rated_current_a",
    "rated_residual_current_a",
)
"""What is told of each device found, and what can be sorted by."""

_WORDS = "device_id IN (SELECT rowid FROM device_text WHERE device_text MATCH :words)"

MOST_COUNTED = 1_000
"""A total beyond it is not worth the wait."""

PAGE = 50
LARGEST_PAGE = 10_000


@dataclass(frozen=True, kw_only=True, slots=True)
class Wanted:
    """What a device must be; None where it does not matter. ``words`` is looked for at the beginning of words."""

    words: str = ""
    kind: str | None = None
    characteristic: str | None = None
    standard: str | None = None
    state: str | None = None
    maker: str | None = None
    series: str | None = None
    rated_from_a: float | None = None
    rated_to_a: float | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Page:
    """Which stretch of the sorted devices is wanted."""

    sort: str = "device_key"
    falling: bool = False
    first: int = 0
    count: int = PAGE

    def __post_init__(self) -> None:
        if self.sort not in COLUMNS:
            raise InputError(f"Devices cannot be sorted by '{self.sort}'", f"Expected one of: {', '.join(COLUMNS)}")
        if self.first < 0 or not 1 <= self.count <= LARGEST_PAGE:
            raise InputError(
                f"There is no page of {self.count} devices from {self.first} on",
                f"1 to {LARGEST_PAGE} devices, from 0 on",
            )

    @property
    def order(self) -> str:
        """The sorting in SQL; equals are sorted by key, the same way, as the indexes are."""
        way = "DESC" if self.falling else "ASC"
        return f"ORDER BY {self.sort} {way}, device_key {way}"

    @property
    def limit(self) -> str:
        """The stretch in SQL."""
        return f"LIMIT {self.count} OFFSET {self.first}"


@dataclass(frozen=True, kw_only=True, slots=True)
class Found:
    """One page of the devices found.

    ``rows`` go by the names of `COLUMNS`; ``total`` is how many there are in all, counted up to `MOST_COUNTED`.
    """

    rows: tuple[dict[str, Any], ...]
    total: int


EVERY = Wanted()
FIRST_PAGE = Page()


def find(connection: sqlite3.Connection, wanted: Wanted, page: Page = FIRST_PAGE) -> Found:
    """Devices that are all that is wanted."""
    condition, values = conditions(wanted)
    total = _count(connection, condition, values)
    rows = connection.execute(
        f"SELECT {', '.join(COLUMNS)} FROM current_device WHERE {condition} {page.order} {page.limit}", values
    )
    return Found(rows=tuple(dict(zip(COLUMNS, row, strict=True)) for row in rows), total=total)


def _count(connection: sqlite3.Connection, condition: str, values: dict[str, object]) -> int:
    """How many there are, counted up to `MOST_COUNTED`."""
    few = f"SELECT 1 FROM current_device WHERE {condition} LIMIT {MOST_COUNTED}"
    if condition == _WORDS:
        # Words alone are counted where they stand, so that the count can end early.
        few = f"SELECT 1 FROM device_text WHERE device_text MATCH :words LIMIT {MOST_COUNTED}"
    (total,) = connection.execute(f"SELECT count(*) FROM ({few})", values).fetchone()
    return int(total)


def conditions(wanted: Wanted) -> tuple[str, dict[str, object]]:
    """The condition on ``current_device`` in SQL, and the values it names."""
    equal = ("kind", "characteristic", "standard", "state", "maker", "series")
    said = {name: f"{name} = :{name}" for name in equal}
    said["rated_from_a"] = "rated_current_a >= :rated_from_a"
    said["rated_to_a"] = "rated_current_a <= :rated_to_a"
    values = {name: value for name in said if (value := getattr(wanted, name)) is not None}
    chosen = [said[name] for name in values]
    if wanted.words.strip():
        chosen.append(_WORDS)
        values["words"] = _match(wanted.words)
    return " AND ".join(chosen) or "1", values


def _match(words: str) -> str:
    """Every word, or the beginning of one, in any order; quoted, so that none is taken for an operator."""
    found = re.findall(r"[^\W_]+", words)
    if not found:
        raise InputError(f"'{words}' has no word to look for", "Letters or digits", "Give a word, or leave it out")
    return " ".join(f'"{word}"*' for word in found)
