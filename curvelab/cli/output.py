"""What several commands share in showing results: tables, JSON, a device's one-line name."""

import json
import os
from collections.abc import Iterable, Mapping, Sequence
from contextlib import suppress
from pathlib import Path
from typing import Any

import click

from curvelab.errors import InputError
from curvelab.records.device import Nameplate

library_option = click.option(
    "--library",
    "library_file",
    type=click.Path(dir_okay=False),
    help="Library file [default: CURVELAB_LIBRARY, else the user's data folder].",
)
json_option = click.option(
    "--json",
    "json_file",
    type=click.Path(dir_okay=False, allow_dash=True),
    help="Write JSON to FILE; - is standard output.",
)

name_option = click.option("--name", default="", help="Who does it; kept in the library.")
reason_option = click.option("--reason", default="", metavar="TEXT", help="Why; kept in the library.")


def table(headings: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """Left-aligned columns two spaces apart; plain text, so that it pipes well."""
    lines = [list(headings), *[list(row) for row in rows]]
    widths = [max(len(line[column]) for line in lines) for column in range(len(headings))]
    return "\n".join(
        "  ".join(cell.ljust(width) for cell, width in zip(line, widths, strict=True)).rstrip() for line in lines
    )


def device_table(rows: Sequence[Mapping[str, Any]]) -> str:
    """Devices of the library, a row each."""
    heads = ["device_key", "kind", "characteristic", "rated_current_a", "standard", "revision", "state"]
    return table([head.replace("_", " ") for head in heads], [[_cell(row[head]) for head in heads] for row in rows])


def _cell(value: Any) -> str:
    if value is None:
        return "-"
    return f"{value:g}" if isinstance(value, float) else str(value)


def write_json(content: Any, target: str) -> None:
    """JSON to a file, or to standard output for ``-``."""
    write_text(json.dumps(content, indent=1, allow_nan=False, ensure_ascii=False) + "\n", target)


def write_text(text: str, target: str) -> None:
    """Text to a file, whole or not at all, or to standard output for ``-``."""
    write_lines([text], target)


def write_lines(lines: Iterable[str], target: str) -> None:
    """Lines, each with its end, to a file, whole or not at all, or to standard output for ``-``."""
    if target == "-":
        for line in lines:
            click.echo(line, nl=False)
        return
    path = Path(target)
    part = path.with_name(path.name + ".part")
    try:
        with part.open("w", encoding="utf-8", newline="\n") as file:
            file.writelines(lines)
        os.replace(part, path)
    except OSError as error:
        raise InputError(
            f"Cannot write '{target}': {error.strerror}", "", "Choose a place that can be written"
        ) from None
    finally:
        with suppress(OSError):
            part.unlink(missing_ok=True)


def named(nameplate: Nameplate) -> str:
    """A device in a few words: ``riverside-b32: MCB, B, 32 A``."""
    words = [nameplate.kind.upper() if len(nameplate.kind) <= 4 and nameplate.kind != "fuse" else nameplate.kind]
    if nameplate.characteristic:
        words.append(nameplate.characteristic)
    if nameplate.rated_current_a is not None:
        words.append(f"{nameplate.rated_current_a:g} A")
    if nameplate.rated_residual_current_a is not None:
        words.append(f"IΔn {nameplate.rated_residual_current_a * 1000:g} mA")
    return f"{nameplate.key}: {', '.join(words)}"
