"""Values as TOML text; the standard library reads TOML and does not write it."""

import re
from collections.abc import Iterable, Mapping, Sequence
from typing import TypeAlias

Value: TypeAlias = "str | bool | int | float | Sequence[Value] | Mapping[str, Value]"
Entries: TypeAlias = "Mapping[str, Value | None]"

WHOLE_BELOW = 2.0**53
"""Every whole number below is exact as a float, and reads better without '.0'."""

_SHORT = {"\\": "\\\\", '"': '\\"', "\n": "\\n", "\t": "\\t", "\r": "\\r"}


def text_value(text: str) -> str:
    """A text in quotes with what TOML does not allow in it escaped."""
    signs = (
        _SHORT.get(sign) or (f"\\u{ord(sign):04x}" if ord(sign) < 32 or ord(sign) == 127 else sign) for sign in text
    )
    return f'"{"".join(signs)}"'


def key_text(key: str) -> str:
    """A key, in quotes only where TOML wants them."""
    return key if re.fullmatch(r"[A-Za-z0-9_-]+", key) else text_value(key)


def number_value(number: float) -> str:
    """The shortest text that reads back as exactly this number."""
    if float(number).is_integer() and abs(number) < WHOLE_BELOW:
        return str(int(number))
    return repr(float(number))


def inline(value: Value) -> str:
    """Any value on one line."""
    if isinstance(value, str):
        return text_value(value)
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, int | float):
        return number_value(value)
    if isinstance(value, Mapping):
        return f"{{ {', '.join(f'{key_text(key)} = {inline(each)}' for key, each in value.items())} }}"
    return f"[{', '.join(map(inline, value))}]"


def line(key: str, value: Value) -> str:
    """``key = value``; a list too long for a line goes on over several."""
    text = f"{key_text(key)} = {inline(value)}"
    if len(text) <= 120 or isinstance(value, str | Mapping) or not isinstance(value, Sequence):
        return text
    return f"{key_text(key)} = [\n{_wrapped(map(inline, value))}]"


def _wrapped(items: Iterable[str]) -> str:
    rows, row = [], "   "
    for item in items:
        if len(row) + len(item) > 110 and row.strip():
            rows.append(row)
            row = "   "
        row += f" {item},"
    return "\n".join([*rows, row, ""])


def table(heading: str, entries: Entries) -> str:
    """A table under its heading, without the keys whose value is None."""
    lines = [line(key, value) for key, value in entries.items() if value is not None]
    return "\n".join([heading, *lines])
