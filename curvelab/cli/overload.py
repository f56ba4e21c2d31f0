"""``curvelab overload``: whether a device protects a conductor against overload."""

import click

import curvelab
from curvelab.calculators.as_json import overload_json
from curvelab.calculators.overload import Load, Overload, overload, written_conventional
from curvelab.cli.answer import closing_lines, exit_status, heading, labelled
from curvelab.cli.many import ManySettings, settings_option
from curvelab.cli.output import json_option, library_option, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.units import written_current


@click.command(cls=ManySettings)
@click.argument("key")
@click.option(
    "--capacity", "capacity_a", type=float, required=True, metavar="A", help="Iz: what the conductor carries."
)
@click.option("--design-current", "design_a", type=float, metavar="A", help="IB: the design current of the circuit.")
@click.option(
    "--conventional-time", "conventional_time_s", type=float, metavar="S", help="In place of the tabulated time."
)
@settings_option
@library_option
@json_option
def command(
    key: str,
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
    **load: float,
) -> int:
    """Whether KEY protects a conductor against overload: IB <= In <= Iz and I2 <= 1.45 Iz."""
    asked = Load(**load)
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key)).at(**dict(settings))
    answer = overload(device, asked)
    if json_file:
        write_json(overload_json(answer), json_file)
    if json_file != "-":
        click.echo(overload_text(device, answer))
    return exit_status(answer.findings, ())


def overload_text(device: Device, answer: Overload) -> str:
    """The set current, the conventional tripping current, the least conductor, and the findings."""
    if answer.refusal:
        facts = [("not protected", answer.refusal)]
    else:
        reason = f" ({answer.trips.reason})" if answer.trips.reason else ""
        facts = [
            ("In (set)", written_current(answer.set_a, "A") if answer.set_a is not None else "not known"),
            ("conventional time", written_conventional(answer)),
            ("I2, surely trips", f"{answer.trips.written()}{reason}"),
            ("least Iz", answer.least_capacity.written()),
        ]
    return "\n".join([heading(device), *labelled(facts), *closing_lines(answer.findings, (), answer.cautions)])
