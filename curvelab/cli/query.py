"""``curvelab query``: what a stored device does at a current, or which currents go with a time."""

from collections.abc import Callable
from typing import Any, get_args

import click

import curvelab
from curvelab.calculators.refusals import not_protective
from curvelab.calculators.trip import Edges, TripAnswer, TripAnswers, trip_currents, trip_times
from curvelab.calculators.trip_json import trip_json
from curvelab.cli.answer import closing_lines, heading
from curvelab.cli.many import ManyValues, settings_option
from curvelab.cli.output import json_option, library_option, table, write_json
from curvelab.devices.device import Device
from curvelab.devices.question import Path
from curvelab.library.key import split_key
from curvelab.units import BASES, written_current, written_time

HEADINGS = {"trips": "surely trips from", "holds": "surely holds up to"}

LIMITING = {"let-through": lambda answer: answer.let_through, "cut-off": lambda answer: answer.peak}
"""What a current-limiting device shows beside its times, and where an answer has it."""


@click.command(cls=ManyValues)
@click.argument("key")
@click.option("--current", "currents", type=float, multiple=True, metavar="A...", help="Prospective currents.")
@click.option("--time", "times", type=float, multiple=True, metavar="S...", help="Times in s.")
@click.option(
    "--path", type=click.Choice(get_args(Path)), help="How the current comes back [default: as the device sees it]."
)
@click.option("--base", type=click.Choice(BASES), default="A", show_default=True, help="What currents are counted in.")
@settings_option
@library_option
@json_option
def command(
    key: str,
    currents: tuple[float, ...],
    times: tuple[float, ...],
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
    **asked: Any,
) -> int:
    """Trip times of KEY at currents, or its currents for times; KEY@3 asks revision 3.

    At currents also let-through energies and cut-off currents, where KEY has such sheets. Each answer has a 95 %
    interval. Statuses: at_least and at_most are bounds, never is below a declared pick-up, not_covered is outside what
    the sheet shows.
    """
    if bool(currents) == bool(times):
        raise click.UsageError("Give either --current A... or --time S....")
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key)).at(**dict(settings))
    answers = trip_times(device, currents, **asked) if currents else trip_currents(device, times, **asked)
    if json_file:
        write_json(trip_json(device, answers), json_file)
    if json_file != "-":
        click.echo(answers_text(device, answers))
    return 0 if all(answer.is_answered for answer in answers.answers) else 1


def answers_text(device: Device, answers: TripAnswers) -> str:
    """The device's name over its tables, a row for each thing asked; reasons and cautions below."""
    tables = [_table(answers, lambda answer: answer.edges, "")]
    tables += [_table(answers, edges_of, f"{name} ") for name, edges_of in LIMITING.items()]
    reasons = dict.fromkeys(reason for answer in answers.answers for reason in answer.reasons)
    notes = [*(f"{reason[0].upper()}{reason[1:]}." for reason in reasons), *answers.notes]
    shown = [each for each in tables if each] or [f"Nothing to ask: {not_protective(device) or 'no line'}."]
    return "\n".join([heading(device), *shown, *closing_lines((), notes, answers.cautions)])


def _table(answers: TripAnswers, edges_of: Callable[[TripAnswer], Edges | None], kind: str) -> str:
    """One table of edges; empty where the device has no such line."""
    rows = [(answer.asked, edges) for answer in answers.answers if (edges := edges_of(answer)) is not None]
    names = [name for name in (rows[0][1] if rows else ()) if any(edges[name] for _, edges in rows)]
    if not names:
        return ""
    heads = ["current" if answers.of_times else "time", *(kind + HEADINGS.get(name, name) for name in names)]
    return table(heads, [[_asked(asked, answers), *_cells(edges, names)] for asked, edges in rows])


def _asked(asked: float, answers: TripAnswers) -> str:
    return written_current(asked, answers.base) if answers.of_times else written_time(asked)


def _cells(edges: Edges, names: list[str]) -> list[str]:
    return [found.written() if (found := edges[name]) else "-" for name in names]
