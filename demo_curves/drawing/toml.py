"""Just enough TOML writing for worksheets: tables of plain values in a given order."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Entry:
    """A table: its heading as written ("" for the top of the file) and its keys."""

    heading: str
    keys: Mapping[str, object]


def tables(entries: Sequence[Entry]) -> str:
    """The whole file."""
    blocks = []
    for entry in entries:
        lines = [f"{key} = {_value(value)}" for key, value in entry.keys.items()]
        blocks.append("\n".join([entry.heading, *lines] if entry.heading else lines))
    return "\n\n".join(blocks) + "\n"


def _value(value: object) -> str:
    match value:
        case bool():
            return "true" if value else "false"
        case str():
            return '"' + value.replace("\\", "\\\\").replace('"', '\\"') + '"'
        case int():
            return str(value)
        case float():
            return f"{value:.10g}"
        case Mapping():
            return "{ " + ", ".join(f"{key} = {_value(item)}" for key, item in value.items()) + " }"
        case Sequence():
            return _list(value)
        case _:
            raise TypeError(f"{value!r} has no TOML form here")


def _list(items: Sequence[object]) -> str:
    """A list; of tables, one a line."""
    if items and isinstance(items[0], Mapping):
        return "[\n" + "".join(f"    {_value(item)},\n" for item in items) + "]"
    return "[" + ", ".join(_value(item) for item in items) + "]"
