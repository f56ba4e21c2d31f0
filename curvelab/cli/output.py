"""What several commands share in showing results: tables, JSON, a device's one-line name."""

import json
import os
from collections.abc import Sequence
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


def table(headings: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """Left-aligned columns two spaces apart; plain text, so that it pipes well."""
    lines = [list(headings), *[list(row) for row in rows]]
    widths = [max(len(line[column]) for line in lines) for column in range(len(headings))]
    return "\n".join(
        "  ".join(cell.ljust(width) for cell, width in zip(line, widths, strict=True)).rstrip() for line in lines
    )


def write_json(content: Any, target: str) -> None:
    """JSON to a file, or to standard output for ``-``."""
    write_text(json.dumps(content, indent=1, allow_nan=False, ensure_ascii=False) + "\n", target)


def write_text(text: str, target: str) -> None:
    """Text to a file, whole or not at all, or to standard output for ``-``."""
    if target == "-":
        click.echo(text, nl=False)
        return
    path = Path(target)
    part = path.with_name(path.name + ".part")
    try:
        part.write_text(text, encoding="utf-8")
        os.replace(part, path)
    except OSError as error:
        part.unlink(missing_ok=True)
        raise InputError(
            f"Cannot write '{target}': {error.strerror}", "", "Choose a place that can be written"
        ) from None


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
