"""``curvelab demo``: the whole chain on the shipped sheets, in one go."""

from dataclasses import replace
from pathlib import Path

import click

import curvelab
from curvelab.calculators.stretches import sides_of
from curvelab.calculators.trip import trip_currents, trip_times
from curvelab.cli.compare import comparison_text
from curvelab.cli.findings import findings_table
from curvelab.cli.output import named
from curvelab.cli.query import answers_text
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.paths import shipped
from curvelab.plots.bands import draw_bands
from curvelab.plots.overlay import draw_overlay
from curvelab.records.reading import Reading
from curvelab.standards.check import check

BREAKER, ASKED_A, ASKED_S = "riverside-b32", 160.0, 0.4
PAIR = ("riverside-incomer-gg80", "riverside-b16")
CHECKED = "riverside-loose-c20"
PICTURED = ("mcb-b", "fuse-gg-family", "mccb-long-time")
"""Worksheets whose reading is drawn over its sheet."""


@click.command()
@click.option(
    "--output", default="demo_output", type=click.Path(file_okay=False), help="Folder [default: demo_output]."
)
def command(output: str) -> int:
    """Read every shipped sheet into a library, check, query and compare, and draw pictures of it all."""
    folder = Path(output)
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise InputError(
            f"Cannot make folder '{output}': {error.strerror}", "", "Choose another with --output"
        ) from None
    library_file = folder / "library.sqlite"
    worksheets = sorted(shipped("demo_curves").joinpath("sheets").glob("*.toml"))
    readings = _read(worksheets, folder, library_file)
    with curvelab.open_library(library_file) as library:
        count = len(library.keys())
        breaker, checked = library.device(BREAKER), library.device(CHECKED)
        pair = [library.device(key) for key in PAIR]
    draw_bands([breaker.record], folder / f"{BREAKER}.png", findings=check(breaker))
    for ending in ("pdf", "png"):
        draw_bands([device.record for device in pair], folder / f"comparison.{ending}", sides=sides_of(pair))
    _say(breaker, checked, pair)
    click.echo(f"\n{len(readings)} sheets and tables read, {count} devices in {library_file}")
    click.echo(f"Pictures in {folder}: " + ", ".join(sorted(path.name for path in folder.glob("*.p[nd][gf]"))))
    click.echo(
        "\nInvented devices, for trying the program only. Results support the work of a qualified person; they do not"
    )
    click.echo("replace the maker's data, local codes or licensed practice.")
    return 0


def _read(worksheets: list[Path], folder: Path, library_file: Path) -> list[Reading]:
    """Read and store each worksheet, and draw some readings over their sheets."""
    readings = []
    with (
        curvelab.open_library(library_file) as library,
        click.progressbar(
            worksheets, label="Reading sheets", item_show_func=lambda path: path.name if path else ""
        ) as bar,
    ):
        for path in bar:
            reading = curvelab.digitise(path)
            sheet = reading.worksheet.sheet
            library.store(reading, author="demo", sheet_files=[path.parent / sheet.file] if sheet else [])
            if path.stem in PICTURED:
                draw_overlay(reading, folder / f"{path.stem}-overlay.png")
            readings.append(reading)
    return readings


def _say(breaker: Device, checked: Device, pair: list[Device]) -> None:
    click.echo("")
    for answers in (trip_times(breaker, [ASKED_A]), trip_currents(breaker, [ASKED_S])):
        click.echo(answers_text(breaker, replace(answers, cautions=())))
    click.echo(f"\n{named(checked.nameplate)} (out of standard on purpose)")
    click.echo(findings_table(check(checked)))
    click.echo("")
    click.echo(comparison_text(pair, curvelab.compare(pair), sides_of(pair)))
