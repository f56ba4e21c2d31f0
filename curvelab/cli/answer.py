"""What the calculators' commands share in showing answers: the device, labelled facts, findings, cautions, status."""

from collections.abc import Sequence

from curvelab.calculators.cautions import Caution
from curvelab.calculators.estimate import Estimate
from curvelab.cli.findings import findings_table
from curvelab.cli.output import named
from curvelab.devices.device import Device
from curvelab.records.finding import Finding


def heading(device: Device) -> str:
    """The device in a line, with its revision and its settings."""
    state = f", revision {device.revision} ({device.state})" if device.revision else ""
    settings = "".join(f", {name} = {value}" for name, value in device.settings.items())
    return named(device.nameplate) + state + settings


def labelled(facts: Sequence[tuple[str, str]]) -> list[str]:
    """Facts a line each, their labels aligned."""
    width = max(len(label) for label, _ in facts)
    return [f"{label.ljust(width)}  {words}" for label, words in facts]


def closing_lines(findings: Sequence[Finding], notes: Sequence[str], cautions: Sequence[Caution]) -> list[str]:
    """Findings as a table, then notes, then cautions."""
    return [
        *([findings_table(findings)] if findings else []),
        *(f"Note: {note}" for note in notes),
        *(f"Caution: {caution.text}" for caution in cautions),
    ]


def exit_status(findings: Sequence[Finding], needed: Sequence[Estimate]) -> int:
    """1 where a finding fails or decides nothing, or a number that was asked is not covered; else 0."""
    open_ones = {"fails", "undecided", "not covered"}
    decided = all(each.advisory or each.outcome not in open_ones for each in findings)
    return 0 if decided and all(each.is_known for each in needed) else 1
