"""What a worksheet says and what was read beside it, as JSON: its tables, with the reading's words in them."""

import tomllib
from collections.abc import Iterator
from typing import Any

from curvelab.reading.complete import completed
from curvelab.records.reading import Reading
from curvelab.worksheets.write import worksheet_text


def tables(text: str) -> dict[str, Any]:
    """A worksheet's tables."""
    return tomllib.loads(text)


def tables_read(reading: Reading) -> dict[str, Any]:
    """The tables of the worksheet that says everything that was said and read."""
    return tomllib.loads(worksheet_text(completed(reading)))


def only_read(said: dict[str, Any], read: dict[str, Any]) -> list[str]:
    """Paths such as ``devices.0.kind`` of what stands in the second and not in the first."""
    return [".".join(path) for path in _only(said, read, ())]


def _only(said: Any, read: Any, path: tuple[str, ...]) -> Iterator[tuple[str, ...]]:
    if isinstance(read, dict):
        for name, value in read.items():
            yield from _only(said.get(name) if isinstance(said, dict) else None, value, (*path, name))
    elif _is_tables(read):
        for index, value in enumerate(read):
            inner = said[index] if isinstance(said, list) and index < len(said) else None
            yield from _only(inner, value, (*path, str(index)))
    elif said is None:
        yield path


def _is_tables(value: Any) -> bool:
    """Whether it is a list of tables; marks are one value."""
    return (
        isinstance(value, list) and bool(value) and all(isinstance(each, dict) and "at" not in each for each in value)
    )
