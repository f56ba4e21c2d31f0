"""``curvelab withstand``: whether a conductor withstands what a device lets through."""

import click

import curvelab
from curvelab.calculators.as_json import withstand_json
from curvelab.calculators.conductors import USES, conductor_of
from curvelab.calculators.energy import Way
from curvelab.calculators.withstand import Faults, Stress, Withstand, withstand
from curvelab.cli.answer import closing_lines, exit_status, heading, labelled
from curvelab.cli.many import ManySettings, settings_option
from curvelab.cli.output import json_option, library_option, table, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.units import written_current, written_let_through

_WAYS = {
    Way.TIMES: "times",
    Way.LET_THROUGH: "let-through sheet",
    Way.GAP: "gap of the let-through sheet, up to its next value",
}


@click.command(cls=ManySettings)
@click.argument("key")
@click.option("--material", required=True, metavar="NAME", help="copper, aluminium, steel or lead.")
@click.option("--insulation", required=True, metavar="NAME", help="pvc70, pvc90, xlpe90, rubber60, mineral70...")
@click.option("--use", type=click.Choice(USES), default="line", show_default=True, help="How the conductor lies.")
@click.option("--area", "area_mm2", type=float, metavar="MM2", help="Cross-section to judge.")
@click.option(
    "--current", "currents", type=float, nargs=2, required=True, metavar="MIN MAX", help="Prospective fault currents."
)
@click.option("--breaker-time", "breaker_time_s", type=float, metavar="S", help="Of the breaker a relay acts on.")
@settings_option
@library_option
@json_option
def command(
    key: str,
    area_mm2: float | None,
    currents: tuple[float, float],
    breaker_time_s: float | None,
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
    **cable: str,
) -> int:
    """Whether a conductor behind KEY withstands its let-through energy at every fault current from MIN to MAX."""
    conductor = conductor_of(**cable)
    faults = Faults(least_a=currents[0], greatest_a=currents[1], breaker_time_s=breaker_time_s)
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key)).at(**dict(settings))
    answer = withstand(device, conductor, faults, area_mm2)
    if json_file:
        write_json(withstand_json(answer), json_file)
    if json_file != "-":
        click.echo(withstand_text(device, answer))
    return exit_status(answer.findings, [stress.energy for stress in answer.stresses])


def withstand_text(device: Device, answer: Withstand) -> str:
    """The conductor, the energy span by span, the least cross-section, and the findings on one given."""
    conductor = answer.conductor
    factors = " / ".join(f"{factor.k:g}" for factor in conductor.factors)
    facts = [("conductor", f"{conductor.material}, {conductor.words} ({conductor.use}): k = {factors}")]
    if answer.area_mm2 is not None and answer.withstands_a2s is not None:
        k = conductor.factor(answer.area_mm2).k
        withstands = written_let_through(answer.withstands_a2s, 6)
        facts.append(("k2S2", f"({k:g} x {answer.area_mm2:g} mm2)^2 = {withstands}"))
    facts.append(("least area", _least_area(answer)))
    rows = [
        [f"{written_current(each.from_a, 'A')} to {written_current(each.to_a, 'A')}", *_cells(each)]
        for each in answer.stresses
    ]
    lines = [
        heading(device),
        *labelled(facts),
        table(["fault current", "largest let-through (95 %)", "known by"], rows),
    ]
    return "\n".join(lines + closing_lines(answer.findings, (), answer.cautions))


def _least_area(answer: Withstand) -> str:
    if not answer.least_area.is_known:
        return "not known"
    size = f"; next standard size {answer.next_size_mm2:g} mm2" if answer.next_size_mm2 else ""
    reason = f" ({answer.least_area.reason})" if answer.least_area.reason else ""
    return f"{answer.least_area.written()}{size}{reason}"


def _cells(stress: Stress) -> list[str]:
    if stress.worst_a is None:
        return ["not covered", stress.energy.reason]
    return [f"{stress.energy.written()} at {written_current(stress.worst_a, 'A')}", _WAYS[stress.way]]
