"""``curvelab library evidence``: what led to a device, written out and read again."""

import tempfile
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import click

import curvelab
from curvelab.cli.output import library_option, write_text
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.reading.rerun import differences, rerun
from curvelab.reading.restore import restored
from curvelab.records.device import DeviceRecord
from curvelab.records.evidence import StoredReading
from curvelab.records.reading import ReadCurve, Reading

LEAST_SHARE = 0.01
"""Of the variance: causes below it are not listed."""


@click.command("evidence")
@click.argument("key")
@click.option(
    "--output", type=click.Path(file_okay=False), help="Write sheets, worksheets, overlays and bands to this folder."
)
@click.option("--rerun", "again", is_flag=True, help="Read again with this version and list what differs.")
@library_option
def evidence_command(key: str, output: str | None, again: bool, library_file: str | None) -> int:
    """Show what led to a device: who, when, why, and each reading; KEY@3 of its third revision.

    With --rerun the exit status is 1 where this version finds other numbers.
    """
    with curvelab.open_library(library_file, create=False) as library:
        evidence = library.evidence(*split_key(key))
        device = library.record(evidence.key, evidence.revision)
    click.echo(
        f"{evidence.key}@{evidence.revision} ({evidence.state}), {evidence.at}, curvelab {evidence.program_version}"
    )
    click.echo(f"by {evidence.author or 'nobody named'}: {evidence.reason or 'no reason given'}")
    differs = False
    for number, stored in enumerate(evidence.readings, start=1):
        click.echo(f"Reading {number}: {_told(stored)}")
        for read in stored.reading.curves:
            for line in _fitted(read):
                click.echo(f"  {line}")
        if output:
            _write(stored, device, Path(output) / f"{evidence.key}-{evidence.revision}-reading-{number}")
        if again:
            differs |= _differs(stored)
    return 1 if differs else 0


def _told(stored: StoredReading) -> str:
    reading = stored.reading
    sheet = reading.worksheet.sheet
    source = f"{sheet.file}, page {sheet.page}, plot {sheet.plot}" if sheet else "typed points"
    kept = "" if stored.source or not sheet else ", its bytes were not kept"
    counts = f"{len(reading.curves)} curves, {len(reading.findings)} findings, {len(reading.warnings)} warnings"
    return f"{source}{kept}, {counts}"


def _fitted(read: ReadCurve) -> Iterator[str]:
    """The published forms that a line follows, and what its uncertainty is made of; nothing for typed points."""
    if read.fit is None:
        return
    drawn = "".join(f" {setting}={value:g}" for setting, value in sorted(read.curve.at.items()))
    name = f"{read.curve.element} {read.curve.edge}{drawn}" + (f" '{read.label}'" if read.label else "")
    for form in read.fit.forms:
        said = form.name if form.is_claimed else f"{form.name} or {', '.join(form.rivals)}"
        values = ", ".join(f"{each.name} {each.value:.5g} ({each.sd:.2%})" for each in form.parameters)
        span = f"{form.from_current:.4g} to {form.to_current:.4g} {read.curve.base}"
        yield f"{name}: {said}, {values}, {span}"
    budget = read.fit.budget
    parts = [f"{each.cause} {each.share:.0%}" for each in budget.contributions if each.share >= LEAST_SHARE]
    yield f"{name}: standard uncertainty {budget.total:.2g} along the normal; of its variance {', '.join(parts)}"


def _write(stored: StoredReading, device: DeviceRecord, folder: Path) -> None:
    """The sheet's file and worksheet as they were, the overlay, and the stored band drawn back over the sheet."""
    # A picture needs the plotting library; the rest starts without it.
    from curvelab.plots.on_sheet import draw_on_sheet  # noqa: PLC0415
    from curvelab.plots.overlay import draw_overlay  # noqa: PLC0415

    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise InputError(
            f"Cannot make folder '{folder}': {error.strerror}", "", "Choose another with --output"
        ) from None
    if stored.reading.worksheet.text:
        write_text(stored.reading.worksheet.text, str(folder / "worksheet.toml"))
    if stored.source is not None:
        reading = restored(stored, folder)
        draw_overlay(reading, folder / "overlay.png")
        own = _of_sheet(device, reading)
        if reading.axes is not None and any(each.quantity == reading.axes.value.quantity for each in own.curves):
            draw_on_sheet(reading, [own], folder / "band.png")
    click.echo(f"  written to {folder}")


def _of_sheet(device: DeviceRecord, reading: Reading) -> DeviceRecord:
    """The device with the curves of the reading's sheet alone."""
    sha256 = reading.sheet.sha256 if reading.sheet else None
    return replace(
        device, curves=tuple(curve for curve in device.curves if curve.sheet and curve.sheet.sha256 == sha256)
    )


def _differs(stored: StoredReading) -> bool:
    with tempfile.TemporaryDirectory() as folder:
        found = differences(stored.reading, rerun(stored, Path(folder)))
    for difference in found:
        click.echo(f"  {difference}")
    if not found:
        click.echo("  read again: the same")
    return any(difference.of != "program version" for difference in found)
