"""``curvelab library verify``, ``backup``, ``restore`` and ``compact``: keeping the file."""

from pathlib import Path

import click

import curvelab
from curvelab.cli.output import library_option
from curvelab.library.backup import restore
from curvelab.library.place import library_path


@click.command("verify")
@library_option
def verify_command(library_file: str | None) -> int:
    """Check the file, its references, every number against its hash, and the log against its chain of hashes.

    The log's last hash stands for all that is in it: written down elsewhere, it shows later that nothing was changed.
    """
    with curvelab.open_library(library_file, create=False) as library:
        verdict = library.verify()
    for problem in verdict.problems:
        click.echo(problem, err=True)
    if not verdict.is_sound:
        click.echo(f"{len(verdict.problems)} problems: restore the library from a backup", err=True)
        return 1
    click.echo(f"Sound: {verdict.revisions} revisions, {verdict.entries} entries in the log")
    click.echo(f"Log {verdict.log_sha256}")
    return 0


@click.command("backup")
@click.argument("target", metavar="FILE", type=click.Path(dir_okay=False))
@library_option
def backup_command(target: str, library_file: str | None) -> int:
    """Copy the library to FILE while others use it; a FILE that is there is replaced once the copy is whole."""
    with curvelab.open_library(library_file, create=False) as library:
        library.backup(Path(target))
        click.echo(f"{library.path} copied to {target}")
    return 0


@click.command("restore")
@click.argument("source", metavar="FILE", type=click.Path(dir_okay=False))
@library_option
def restore_command(source: str, library_file: str | None) -> int:
    """Put the backup FILE in the place of the library; what was there is kept beside it."""
    target = library_path(library_file)
    before = restore(Path(source).absolute(), target)
    click.echo(f"{target} restored" + (f", what was there is in {before}" if before else ""))
    return 0


@click.command("compact")
@library_option
def compact_command(library_file: str | None) -> int:
    """Write the library anew without unused space; nothing in it changes."""
    with curvelab.open_library(library_file, create=False) as library:
        before = library.path.stat().st_size
        library.compact()
        click.echo(f"{before:,} bytes before, {library.path.stat().st_size:,} after")
    return 0
