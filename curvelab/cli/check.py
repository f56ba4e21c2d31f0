"""``curvelab check``: a device against the rules of its standard."""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

import click

import curvelab
from curvelab.cli.findings import findings_table
from curvelab.cli.many import ManyValues, settings_option
from curvelab.cli.output import json_option, library_option, write_json
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.library.place import library_path
from curvelab.library.search import Page, Wanted
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.records.finding import Finding, finding_json
from curvelab.standards.family import doubts_about_family
from curvelab.standards.review import review
from curvelab.standards.rules import rules_beside
from curvelab.standards.scope import unchecked


@click.command(cls=ManyValues)
@click.argument("subject", metavar="KEY|WORKSHEET")
@settings_option
@click.option(
    "--picture",
    "picture_file",
    type=click.Path(dir_okay=False),
    help="Draw the band, its limits and the table on one page (PDF, PNG or SVG).",
)
@library_option
@json_option
def command(
    subject: str,
    settings: tuple[tuple[str, float | str], ...],
    picture_file: str | None,
    library_file: str | None,
    json_file: str | None,
) -> int:
    """Check a stored device, or every device of a worksheet, against its standard.

    Advisory rules are marked; they never decide the exit status. Rule files in a folder `standards` beside the library
    are checked too. An adjustable device is checked at the settings its curves are drawn for, unless --set says others.
    """
    records, neighbours = _records(subject, library_file)
    devices = [Device(record, dict(settings)) for record in records]
    findings = review(devices, rules_beside(library_path(library_file)))
    if neighbours:
        findings += doubts_about_family([*map(Device, neighbours), *devices])
    if picture_file:
        _draw(devices, findings, picture_file)
    if json_file:
        write_json([finding_json(each) for each in findings], json_file)
    if json_file != "-":
        click.echo(check_text(devices, findings))
    return 1 if any(each.outcome in {"fails", "undecided"} and not each.advisory for each in findings) else 0


def _records(subject: str, library_file: str | None) -> tuple[tuple[DeviceRecord, ...], tuple[DeviceRecord, ...]]:
    """The devices to check, and of a stored one the next smaller and next larger of its series."""
    if Path(subject).suffix.lower() == ".toml":
        return tuple(curvelab.digitise(subject).devices), ()
    with curvelab.open_library(library_file, create=False) as library:
        record = library.record(*split_key(subject))
        return (record,), tuple(library.record(key) for key in _beside(library, record.nameplate))


def _beside(library: Library, plate: Nameplate) -> list[str]:
    rating = plate.rated_current_a
    if plate.series is None or rating is None:
        return []
    series = Wanted(kind=plate.kind, characteristic=plate.characteristic, maker=plate.maker, series=plate.series)
    below, above = replace(series, rated_to_a=rating * (1 - 1e-9)), replace(series, rated_from_a=rating * (1 + 1e-9))
    nearest = Page(sort="rated_current_a", falling=True, count=1), Page(sort="rated_current_a", count=1)
    found = (library.find(wanted, page) for wanted, page in zip((below, above), nearest, strict=True))
    return [row["device_key"] for each in found for row in each.rows]


def _draw(devices: Sequence[Device], findings: Sequence[Finding], picture_file: str) -> None:
    if len(devices) != 1:
        keys = ", ".join(device.key for device in devices)
        raise InputError(
            f"--picture draws one device, the worksheet has {keys}", "", "Store them and check one by its key"
        )
    # A picture needs the plotting library; the check alone starts without it.
    from curvelab.plots.check_page import draw_check_page  # noqa: PLC0415

    draw_check_page(devices[0].record, findings, picture_file)


def check_text(devices: Sequence[Device], findings: Sequence[Finding]) -> str:
    """What a person reads: the table of findings, and a sentence on each device that no rule covers."""
    checked = {finding.device for finding in findings}
    lines = [findings_table(findings)] if findings else []
    lines += [unchecked(device.nameplate) for device in devices if device.key not in checked]
    return "\n".join(lines)
