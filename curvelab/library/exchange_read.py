"""Reads the lines of an exchanged library back into records and checks them against their hashes."""

import base64
import binascii
import hashlib
import json
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any

import numpy as np

from curvelab.errors import InputError
from curvelab.library.exchange import FORMAT, VERSION, Line
from curvelab.records.curve import Conditions, Curve, Part, SheetKey
from curvelab.records.device import Breaking, Derating, Nameplate, Setting

LONGEST_LINE = 512 * 1024 * 1024
"""Characters; a sheet's file is the longest thing on one line."""


@dataclass(frozen=True, kw_only=True, slots=True)
class GivenRevision:
    """A revision of another library; ``curves`` pairs ids of curves with ids of the readings they come from."""

    number: int
    state: str
    created_at: str
    author: str
    reason: str
    program_version: str
    content_sha256: bytes
    reading: int | None
    nameplate: Nameplate
    curves: tuple[tuple[int, int | None], ...]


def parsed(lines: Iterable[str], name: str) -> Iterator[Line]:
    """The lines of a file as objects; the first must say what it is.

    Raises
    ------
    InputError
        A line is no JSON object, or the file is something else.
    """
    first = True
    for number, text in enumerate(lines, start=1):
        line = _parsed(text, f"Line {number} of {name}")
        if first:
            _check_header(line, name)
            first = False
            continue
        yield line
    if first:
        raise InputError(f"{name} is empty", "", "Export a library to it first")


def _parsed(text: str, place: str) -> Line:
    try:
        line = json.loads(text, parse_constant=_no_constant)
    except (ValueError, RecursionError) as error:
        raise InputError(f"{place} is no JSON: {error}", "", "Export the library again") from error
    if not isinstance(line, dict):
        raise InputError(f"{place} is no JSON object", "", "Export the library again")
    return line


def _no_constant(word: str) -> None:
    raise ValueError(f"{word} is no number in JSON")


def _check_header(line: Line, name: str) -> None:
    if line.get("format") != FORMAT:
        raise InputError(
            f"{name} is no exported library", f'Its first line has "format": "{FORMAT}"', "Give another file"
        )
    if line.get("version") != VERSION:
        raise InputError(
            f"{name} has version {line.get('version')!r}",
            f"This program knows version {VERSION}",
            "Use a newer curvelab",
        )


def source_of(said: Line) -> tuple[str, bytes]:
    """SHA-256 and bytes of a sheet's file.

    Raises
    ------
    ValueError
        The bytes are not those of the hash.
    """
    try:
        content = base64.b64decode(said["bytes"], validate=True)
    except binascii.Error as error:
        raise ValueError(str(error)) from error
    if hashlib.sha256(content).hexdigest() != said["sha256"]:
        raise ValueError(f"the bytes of the sheet {said['sha256'][:12]}... have another hash")
    return said["sha256"], content


def curve_of(said: Line) -> Curve:
    """A curve with its points."""
    own = {name: value for name, value in said.items() if name not in ("id", "parts", "sheet", "conditions", "at")}
    return Curve(
        **own,
        parts=tuple(_part(part) for part in said["parts"]),
        sheet=said["sheet"] and SheetKey(**said["sheet"]),
        conditions=Conditions(**said["conditions"]),
        at=MappingProxyType({str(name): float(value) for name, value in said["at"].items()}),
    )


def _part(said: Mapping[str, list[float | None]]) -> Part:
    columns = {name: np.array(values, dtype=np.float64) for name, values in said.items()}
    return Part(**columns)


def revision_of(said: Line, key: str, kind: str) -> GivenRevision:
    """A revision with its nameplate."""
    return GivenRevision(
        number=_whole(said["number"]),
        state=said["state"],
        created_at=said["created_at"],
        author=said["author"],
        reason=said["reason"],
        program_version=said["program_version"],
        content_sha256=bytes.fromhex(said["content_sha256"]),
        reading=said["reading"],
        nameplate=_nameplate(said["nameplate"], key, kind),
        curves=tuple((one["curve"], one["reading"]) for one in said["curves"]),
    )


def _nameplate(said: Line, key: str, kind: str) -> Nameplate:
    own: dict[str, Any] = {name: value for name, value in said.items() if name != "kind"}
    own["breaking"] = tuple(Breaking(**item) for item in own.get("breaking", ()))
    own["derating"] = tuple(Derating(**item) for item in own.get("derating", ()))
    own["settings"] = tuple(Setting(**{**item, "steps": tuple(item["steps"])}) for item in own.get("settings", ()))
    return Nameplate(key=key, kind=kind, **own)


def _whole(value: Any) -> int:
    if not isinstance(value, int) or isinstance(value, bool):
        raise ValueError(f"{value!r} is no whole number")
    return value
