"""``curvelab disconnection``: whether a device disconnects a fault in time, and with which greatest loop."""

from typing import Any, get_args

import click

import curvelab
from curvelab.calculators.as_json import disconnection_json
from curvelab.calculators.circumstances import Circumstances, written_voltage
from curvelab.calculators.disconnection import Disconnection, disconnection
from curvelab.calculators.estimate import Estimate
from curvelab.calculators.practices import DEFAULT_PRACTICE, Circuit, System, touch_limit
from curvelab.cli.answer import closing_lines, exit_status, heading, labelled
from curvelab.cli.many import ManyValues, settings_option
from curvelab.cli.output import json_option, library_option, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.units import written, written_time

FIGURES = 5


@click.command(cls=ManyValues)
@click.argument("key")
@click.option("--voltage", "voltage_v", type=float, required=True, metavar="V", help="Nominal voltage to earth.")
@click.option("--system", type=click.Choice(get_args(System)), default="TN", show_default=True, help="Earthing system.")
@click.option(
    "--loop-impedance",
    "--electrode",
    "loop_ohm",
    type=float,
    metavar="OHM",
    help="Fault loop to judge; of a residual current device in a TT system the earth electrode.",
)
@click.option("--measured", is_flag=True, help="The loop was measured cold [default: as designed].")
@click.option("--required-time", "required_s", type=float, metavar="S", help="In place of the tabulated time.")
@click.option(
    "--circuit", type=click.Choice(get_args(Circuit)), default="final", show_default=True, help="Which tabulated time."
)
@click.option(
    "--practice",
    default=DEFAULT_PRACTICE,
    show_default=True,
    metavar="NAME",
    help="iec60364, bs7671 or asnzs3000: how the greatest loop is reckoned.",
)
@click.option("--breaker-time", "breaker_time_s", type=float, metavar="S", help="Of the breaker a relay acts on.")
@settings_option
@library_option
@json_option
def command(
    key: str,
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
    **circumstances: Any,
) -> int:
    """Whether KEY disconnects a fault to earth in the required time, and the greatest loop impedance for it."""
    asked = Circumstances(**circumstances)
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key)).at(**dict(settings))
    answer = disconnection(device, asked)
    if json_file:
        write_json(disconnection_json(answer), json_file)
    if json_file != "-":
        click.echo(disconnection_text(device, answer))
    return exit_status(answer.findings, (answer.trips, answer.greatest_loop))


def disconnection_text(device: Device, answer: Disconnection) -> str:
    """What is required, what the device does, the greatest loop, and the findings on a loop given."""
    asked, required, practice = answer.asked, answer.required, answer.practice
    clause = required.origin.clause if required.origin else "as given"
    counted = "the mean tripping current" if practice.current == "mean" else "the current that surely trips"
    facts = [
        ("required", f"{asked.system}, {asked.voltage_v:g} V to earth: {written_time(required.time_s)} ({clause})"),
        (
            "practice",
            f"{practice.title}: {written_voltage(asked.voltage_v, answer.reckoning.voltage_factor)} over {counted}",
        ),
        ("trips", f"from {_with_reason(answer.trips)}" if answer.trips.is_known else _with_reason(answer.trips)),
        _greatest(answer),
    ]
    if answer.fault is not None and answer.time is not None:
        time = f"trips in {answer.time.written()}" if answer.time.is_known else f"time {_with_reason(answer.time)}"
        facts.append(("given loop", f"{answer.fault.words}: {time}"))
    return "\n".join(
        [heading(device), *labelled(facts), *closing_lines(answer.findings, answer.notes, answer.cautions)]
    )


def _greatest(answer: Disconnection) -> tuple[str, str]:
    greatest, by = _impedance(answer.greatest_loop), answer.reckoning
    if by.residual_a is not None and answer.asked.system == "TT":
        return "greatest electrode", f"{greatest} ({touch_limit()[0]:g} V over IΔn, and the required time)"
    if not answer.greatest_loop.is_known:
        return "greatest loop", greatest
    factor = f"x {by.measured_factor:.3g}"
    return (
        "greatest loop",
        f"{greatest} as designed, {_impedance(answer.greatest_measured_loop)} measured cold ({factor})",
    )


def _impedance(found: Estimate) -> str:
    if found.value is None or found.interval is not None:
        return found.written()
    prefix = "at least " if found.status == "at_least" else ""
    return prefix + written(found.value, found.unit, FIGURES)


def _with_reason(found: Estimate) -> str:
    return f"{found.written()} ({found.reason})" if found.reason else found.written()
