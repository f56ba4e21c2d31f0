"""``curvelab digitise``: read a sheet, a worksheet, or every worksheet of a folder."""

from pathlib import Path

import click

import curvelab
from curvelab.cli.output import json_option, table, write_json, write_text
from curvelab.errors import CurvelabError, InputError
from curvelab.plots.overlay import draw_overlay
from curvelab.reading.as_json import reading_json
from curvelab.reading.complete import completed
from curvelab.records.reading import Reading
from curvelab.units import written_current
from curvelab.worksheets.write import worksheet_text


@click.command()
@click.argument("source", type=click.Path())
@click.option("--page", type=int, help="Page of the file, from 1 [default: 1].")
@click.option("--plot", type=int, help="Plot of the page, from 1 [default: 1].")
@json_option
@click.option(
    "--worksheet", "worksheet_file", type=click.Path(dir_okay=False), help="Write the worksheet that repeats it."
)
@click.option("--picture", "picture_file", type=click.Path(dir_okay=False), help="Draw the reading over its sheet.")
@click.option("--library", "library_file", type=click.Path(dir_okay=False), help="Store the devices in this library.")
def command(
    source: str,
    page: int | None,
    plot: int | None,
    json_file: str | None,
    worksheet_file: str | None,
    picture_file: str | None,
    library_file: str | None,
) -> int:
    """Read SOURCE: a sheet (PNG, JPEG, TIFF, BMP, WebP, PDF, SVG), a worksheet (.toml), or a folder of worksheets."""
    if Path(source).is_dir():
        if page or plot or worksheet_file or picture_file:
            raise InputError(
                f"'{source}' is a folder", "", "Give --page, --plot, --worksheet and --picture with one sheet"
            )
        return _read_folder(Path(source), json_file, library_file)
    reading = curvelab.digitise(source, page=page, plot=plot)
    if worksheet_file:
        write_text(worksheet_text(completed(reading)), worksheet_file)
    if picture_file:
        draw_overlay(reading, picture_file)
    if json_file:
        write_json(reading_json(reading), json_file)
    if library_file:
        _store([(Path(source), reading)], library_file)
    if json_file != "-":
        click.echo(summary(reading))
    return status(reading)


def status(reading: Reading) -> int:
    """1 where a finding fails or is undecided, else 0."""
    return 1 if any(each.outcome in {"fails", "undecided"} for each in reading.findings if not each.advisory) else 0


def open_warnings(reading: Reading) -> list[str]:
    """Warnings nobody has accepted, a line each."""
    return [
        f"{each.code}{f' at ({each.at[0]:.1f}, {each.at[1]:.1f})' if each.at else ''}: {each.text}"
        for each in reading.warnings
        if each.accepted is None
    ]


def summary(reading: Reading) -> str:
    """What was read, in a few lines."""
    lines = []
    if reading.axes is not None and reading.sheet is not None:
        residual = f"marks {reading.axes.mark_residual_rms:.2f} {reading.sheet.unit} RMS"
        if reading.axes.grid_residual_rms is not None:
            residual += (
                f", {len(reading.axes.grid)} grid lines {reading.axes.grid_residual_rms:.3f} {reading.sheet.unit} RMS"
            )
        lines.append(f"Axes: {residual}")
    rows = []
    for each in reading.curves:
        low, high = each.curve.parts[0].current[0], each.curve.parts[-1].current[-1]
        reach = f"{written_current(float(low), each.curve.base)} to {written_current(float(high), each.curve.base)}"
        points = str(sum(part.current.size for part in each.curve.parts))
        rows.append([", ".join(each.devices) or "-", each.curve.element, each.curve.edge, reach, points])
    if rows:
        lines.append(table(["device", "element", "edge", "from - to", "points"], rows))
    if reading.devices:
        lines.append(f"Devices: {', '.join(record.nameplate.key for record in reading.devices)}")
    counts = {outcome: sum(each.outcome == outcome for each in reading.findings) for outcome in _OUTCOMES}
    if reading.findings:
        lines.append("Checks: " + ", ".join(f"{count} {outcome}" for outcome, count in counts.items() if count))
    return "\n".join(lines + [f"Warning {line}" for line in open_warnings(reading)])


_OUTCOMES = ("meets", "fails", "undecided", "at limit", "not covered")


def _store(readings: list[tuple[Path, Reading]], library_file: str) -> None:
    files = [path.parent / each.worksheet.sheet.file for path, each in readings if each.worksheet.sheet]
    with curvelab.open_library(library_file) as library:
        library.store([reading for _, reading in readings], sheet_files=files)


def _read_folder(folder: Path, json_file: str | None, library_file: str | None) -> int:
    """Read every worksheet of a folder; one that cannot be read does not stop the others."""
    paths = sorted(folder.glob("*.toml"))
    if not paths:
        raise InputError(f"Folder '{folder}' holds no worksheet", "Files that end in .toml")
    readings: list[tuple[Path, Reading]] = []
    rows = []
    for path in paths:
        try:
            reading = curvelab.digitise(path)
        except CurvelabError as error:
            rows.append([path.name, "-", "-", str(error)])
            continue
        readings.append((path, reading))
        rows.append([path.name, str(len(reading.curves)), str(len(reading.devices)), _state(reading)])
    if library_file:
        _store(readings, library_file)
    if json_file:
        write_json([reading_json(reading) for _, reading in readings], json_file)
    if json_file != "-":
        click.echo(table(["worksheet", "curves", "devices", "outcome"], rows))
    if len(readings) < len(paths):
        return 2
    return max(status(reading) for _, reading in readings)


def _state(reading: Reading) -> str:
    open_count = len(open_warnings(reading))
    failing = sum(each.outcome == "fails" for each in reading.findings)
    words = [f"{failing} checks fail"] if failing else []
    words += [f"{open_count} warnings"] if open_count else []
    return ", ".join(words) or "read"
