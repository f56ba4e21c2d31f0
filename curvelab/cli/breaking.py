"""``curvelab breaking``: whether a device breaks a short circuit at a voltage, alone or backed up."""

from typing import Any

import click

import curvelab
from curvelab.calculators.as_json import breaking_json
from curvelab.calculators.breaking import BreakingAnswer, ShortCircuit, breaking
from curvelab.calculators.estimate import Estimate
from curvelab.cli.answer import closing_lines, exit_status, heading, labelled
from curvelab.cli.output import json_option, library_option, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key


@click.command()
@click.argument("key")
@click.option("--prospective", "prospective_a", type=float, required=True, metavar="A", help="Current to be broken.")
@click.option("--voltage", "voltage_v", type=float, required=True, metavar="V", help="Voltage it is broken at.")
@click.option("--supply", type=click.Choice(["ac", "dc"]), help="Kind of supply [default: whatever is stated].")
@click.option("--back-up", "back_up_key", metavar="KEY", help="Device upstream that backs KEY up.")
@library_option
@json_option
def command(key: str, back_up_key: str | None, library_file: str | None, json_file: str | None, **asked: Any) -> int:
    """Whether KEY breaks a prospective current at a voltage, alone or with a named back-up device."""
    short_circuit = ShortCircuit(**asked)
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key))
        back_up = library.device(*split_key(back_up_key)) if back_up_key else None
    answer = breaking(device, short_circuit, back_up)
    if json_file:
        write_json(breaking_json(answer), json_file)
    if json_file != "-":
        click.echo(breaking_text([device, *([back_up] if back_up else [])], answer))
    return exit_status(answer.findings, ())


def breaking_text(devices: list[Device], answer: BreakingAnswer) -> str:
    """The capacities at the voltage, and the findings."""
    facts = [("breaking capacity", _capacity(answer.capacity))]
    if answer.back_up_capacity is not None:
        facts.append((f"of {answer.back_up}", _capacity(answer.back_up_capacity)))
    lines = [*map(heading, devices), *labelled(facts)]
    return "\n".join(lines + closing_lines(answer.findings, (), answer.cautions))


def _capacity(found: Estimate) -> str:
    return found.written() if found.is_known else found.reason
