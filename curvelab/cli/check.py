"""``curvelab check``: a device against the rules of its standard."""

from collections.abc import Sequence
from pathlib import Path

import click

import curvelab
from curvelab.cli.output import json_option, library_option, table, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.reading.as_json import finding_json
from curvelab.records.device import DeviceRecord
from curvelab.records.finding import Finding
from curvelab.standards.check import check
from curvelab.units import written_current, written_time


@click.command()
@click.argument("subject", metavar="KEY|WORKSHEET")
@library_option
@json_option
def command(subject: str, library_file: str | None, json_file: str | None) -> int:
    """Check a stored device, or every device of a worksheet, against its standard.

    Advisory rules are marked; they never decide the exit status.
    """
    records = _records(subject, library_file)
    findings = [finding for record in records for finding in check(Device(record))]
    if json_file:
        write_json([finding_json(each) for each in findings], json_file)
    if json_file != "-":
        click.echo(findings_table(findings) if findings else f"No rule table applies to '{subject}'.")
    return 1 if any(each.outcome in {"fails", "undecided"} and not each.advisory for each in findings) else 0


def _records(subject: str, library_file: str | None) -> tuple[DeviceRecord, ...]:
    if Path(subject).suffix.lower() == ".toml":
        return tuple(curvelab.digitise(subject).devices)
    with curvelab.open_library(library_file, create=False) as library:
        return (library.record(*split_key(subject)),)


def findings_table(findings: Sequence[Finding]) -> str:
    """Findings as a plain table: requirement, value read with its interval, outcome, what would settle it."""
    several = len({each.device for each in findings}) > 1
    heads = [*(["device"] if several else []), "clause", "requirement", "read (95 %)", "outcome", "note"]
    rows = [
        [*([each.device] if several else []), each.clause, each.requirement, _read(each), _outcome(each), each.note]
        for each in findings
    ]
    return f"{', '.join(sorted({each.standard for each in findings}))}\n{table(heads, rows)}"


def _outcome(finding: Finding) -> str:
    return f"{finding.outcome} (advisory)" if finding.advisory else finding.outcome


def _read(finding: Finding) -> str:
    if finding.value is None:
        return "-"

    def written(value: float) -> str:
        return written_time(value) if finding.unit == "s" else written_current(value, finding.unit)

    interval = f" ({written(finding.interval[0])} to {written(finding.interval[1])})" if finding.interval else ""
    return written(finding.value) + interval
