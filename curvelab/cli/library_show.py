"""``curvelab library list`` and ``show``: what is stored."""

import click

import curvelab
from curvelab.cli.output import device_table, json_option, library_option, named, table, write_json
from curvelab.library.key import split_key
from curvelab.records.curve import Curve
from curvelab.units import written_current, written_time


@click.command("list")
@library_option
@json_option
def list_command(library_file: str | None, json_file: str | None) -> int:
    """List the current revision of every device."""
    with curvelab.open_library(library_file, create=False) as library:
        rows = library.index()
    if json_file:
        write_json(rows, json_file)
    if json_file != "-":
        click.echo(device_table(rows))
        click.echo(f"{len(rows)} devices")
    return 0


@click.command("show")
@click.argument("key")
@library_option
def show_command(key: str, library_file: str | None) -> int:
    """Show a device: its ratings, curves and revisions. KEY@3 shows revision 3."""
    device_key, revision = split_key(key)
    with curvelab.open_library(library_file, create=False) as library:
        record = library.record(device_key, revision)
        history = library.history(device_key)
    click.echo(f"{named(record.nameplate)}, revision {record.revision} ({record.state})")
    if record.curves:
        heads = ["element", "edge", "meaning", "quantity", "from - to", "points", "from sheet"]
        click.echo(table(heads, [_curve_row(curve) for curve in record.curves]))
    else:
        click.echo("No curve: this device has no trip characteristic in the library.")
    click.echo(f"Revisions: {', '.join(str(row['revision']) + ' ' + str(row['state']) for row in history)}")
    return 0


def _curve_row(curve: Curve) -> list[str]:
    first, last = curve.parts[0], curve.parts[-1]
    written = written_time if curve.quantity == "time" else (lambda value: f"{value:.3g}")
    start = f"{written_current(float(first.current[0]), curve.base)}, {written(float(first.value[0]))}"
    end = f"{written_current(float(last.current[-1]), curve.base)}, {written(float(last.value[-1]))}"
    points = sum(part.current.size for part in curve.parts)
    source = curve.sheet.file if curve.sheet else curve.source
    return [
        curve.element,
        curve.edge,
        curve.meaning or "-",
        curve.quantity,
        f"{start} - {end}",
        str(points),
        source or "-",
    ]
