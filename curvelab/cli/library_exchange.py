"""``curvelab library export`` and ``import``: libraries, exported files and tables of points."""

import csv
import io
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TextIO

import click

import curvelab
from curvelab.cli.output import library_option, name_option, reason_option, write_lines
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.library.point_table import COLUMNS, point_rows, read_point_table

LIBRARY_ENDINGS = (".sqlite", ".sqlite3", ".db")


@click.command("export")
@click.argument("target", metavar="FILE", type=click.Path(dir_okay=False, allow_dash=True))
@click.argument("keys", nargs=-1)
@library_option
def export_command(target: str, keys: tuple[str, ...], library_file: str | None) -> int:
    """Write devices to FILE: all that is stored as JSON lines, or the points of current revisions as CSV (.csv).

    Without KEYS all devices; KEY@3 in a table is its third revision. - is standard output, JSON.
    """
    with curvelab.open_library(library_file, create=False) as library:
        is_table = Path(target).suffix.lower() == ".csv"
        write_lines(_table(library, keys) if is_table else library.exported(keys or None), target)
    return 0


def _table(library: Library, keys: tuple[str, ...]) -> Iterator[str]:
    yield _csv_line(list(COLUMNS))
    for key in keys or [row["device_key"] for row in library.index()]:
        for cells in point_rows(library.record(*split_key(key))):
            yield _csv_line(cells)


def _csv_line(cells: list[str]) -> str:
    text = io.StringIO(newline="")
    csv.writer(text, lineterminator="\n").writerow(cells)
    return text.getvalue()


@click.command("import")
@click.argument("source", metavar="FILE", type=click.Path(dir_okay=False))
@click.option("--source", "points_source", default="", metavar="TEXT", help="Of a table: where its points come from.")
@name_option
@reason_option
@library_option
def import_command(source: str, points_source: str, name: str, reason: str, library_file: str | None) -> int:
    """Take FILE into the library, all or nothing: another library (.sqlite), an exported file, or a table (.csv).

    Revisions of both libraries are kept; what contradicts is told on standard error, and the exit status is 1.
    """
    path = Path(source)
    with curvelab.open_library(library_file) as library:
        if path.suffix.lower() == ".csv":
            with _opened(path) as file:
                records = list(read_point_table(file, path.name, points_source))
            stored = library.store(records, author=name, reason=reason)
            click.echo(
                f"{sum(one.changed for one in stored)} revisions new, {sum(not one.changed for one in stored)} known"
            )
            return 0
        if path.suffix.lower() in LIBRARY_ENDINGS:
            with curvelab.open_library(path, create=False) as other:
                done = library.unite(other.exported(), file=path.name, name=name, reason=reason)
        else:
            with _opened(path) as file:
                done = library.unite(file, file=path.name, name=name, reason=reason)
    click.echo(f"{done.new} revisions new, {done.known} known")
    for conflict in done.conflicts:
        click.echo(conflict, err=True)
    return 1 if done.conflicts else 0


@contextmanager
def _opened(path: Path) -> Iterator[TextIO]:
    """A text file; a byte order mark, as spreadsheets write it, is passed over."""
    try:
        with path.open(encoding="utf-8-sig", newline="") as file:
            yield file
    except OSError as error:
        raise InputError(f"'{path}' cannot be read: {error.strerror}", "", "Check its name and folder") from None
    except UnicodeDecodeError as error:
        raise InputError(
            f"'{path}' is no text in UTF-8: {error.reason}", "", "Save it as UTF-8, or export it again"
        ) from None
