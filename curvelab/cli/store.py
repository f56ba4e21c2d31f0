"""``curvelab store``: worksheets into the library."""

from pathlib import Path

import click

import curvelab
from curvelab.cli.digitise import open_warnings
from curvelab.cli.output import library_option, name_option, reason_option


@click.command()
@click.argument("worksheets", nargs=-1, required=True, type=click.Path(dir_okay=False))
@name_option
@reason_option
@library_option
def command(worksheets: tuple[str, ...], name: str, reason: str, library_file: str | None) -> int:
    """Read each WORKSHEET and store its devices; all of them, or none.

    Storing what the library already holds makes no new revision.
    """
    readings = [curvelab.digitise(path) for path in worksheets]
    files = [
        Path(path).parent / reading.worksheet.sheet.file
        for path, reading in zip(worksheets, readings, strict=True)
        if reading.worksheet.sheet
    ]
    with curvelab.open_library(library_file) as library:
        stored = library.store(readings, author=name, reason=reason, sheet_files=files)
        click.echo(f"Library {library.path}")
    for each in stored:
        click.echo(f"{each.key}: revision {each.revision}{'' if each.changed else ', as it was'}")
    for path, reading in zip(worksheets, readings, strict=True):
        for line in open_warnings(reading):
            click.echo(f"{path}: {line}", err=True)
    return 0
