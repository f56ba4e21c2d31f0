"""``curvelab digitise``: read a sheet, a worksheet, or every sheet of a folder."""

from collections.abc import Mapping
from pathlib import Path

import click

import curvelab
from curvelab.cli.output import json_option, table, write_json, write_text
from curvelab.errors import InputError
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
@click.option(
    "--output",
    type=click.Path(file_okay=False),
    help="Of a folder: where results go [default: FOLDER/curvelab-results].",
)
@click.option("--cluster", metavar="ADDRESS", help="Of a folder: read over the Dask cluster with this scheduler.")
def command(source: str, page: int | None, plot: int | None, **files: str | None) -> int:
    """Read SOURCE: a sheet (PNG, JPEG, TIFF, BMP, WebP, PDF, SVG), a worksheet (.toml), or a folder of either.

    Of a folder every page is read, on all processors, but those a worksheet in it speaks of. Each page's JSON,
    worksheet and overlay go to the folder of results, with summary.csv and summary.json; run again, it reads only what
    is new or has changed. To correct a page, put its worksheet beside its sheet and edit it there.
    """
    of_one = page, plot, files["worksheet_file"], files["picture_file"]
    if Path(source).is_dir():
        if any(of_one):
            raise InputError(
                f"'{source}' is a folder", "", "Give --page, --plot, --worksheet and --picture with one sheet"
            )
        return _read_folder(Path(source), files)
    if files["output"] or files["cluster"]:
        raise InputError(f"'{source}' is one sheet", "", "Give --output and --cluster with a folder")
    return _read_one(source, curvelab.digitise(source, page=page, plot=plot), files)


def _read_folder(folder: Path, files: Mapping[str, str | None]) -> int:
    # Many pages need what one does not: processes, or a cluster.
    from curvelab.cli.batch import RESULTS, Where, read_folder  # noqa: PLC0415

    results = Path(files["output"] or folder / RESULTS)
    where = Where(
        results=results, library_file=files["library_file"], json_file=files["json_file"], cluster=files["cluster"]
    )
    return read_folder(folder, where)


def _read_one(source: str, reading: Reading, files: Mapping[str, str | None]) -> int:
    if files["worksheet_file"]:
        write_text(worksheet_text(completed(reading)), files["worksheet_file"])
    if files["picture_file"]:
        draw_overlay(reading, files["picture_file"])
    if files["json_file"]:
        write_json(reading_json(reading), files["json_file"])
    if files["library_file"]:
        sheet = reading.worksheet.sheet
        with curvelab.open_library(files["library_file"]) as library:
            library.store(reading, sheet_files=[Path(source).parent / sheet.file] if sheet else [])
    if files["json_file"] != "-":
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
