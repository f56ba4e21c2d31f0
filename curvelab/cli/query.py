"""``curvelab query``: what a stored device does at a current, or which currents go with a time."""

from math import isnan
from typing import Any

import click

import curvelab
from curvelab.cli.many import ManyValues, Settings
from curvelab.cli.output import json_option, library_option, named, table, write_json
from curvelab.devices.device import Device
from curvelab.library.key import split_key
from curvelab.records.answer import EdgeAnswer
from curvelab.units import interval_figures, written_current, written_time

REACHED = {"value", "at_least", "at_most", "never"}
"""Statuses that answer what was asked; any other makes the exit status 1."""


@click.command(cls=ManyValues)
@click.argument("key")
@click.option("--current", "currents", type=float, multiple=True, metavar="A...", help="Prospective currents in A.")
@click.option("--time", "times", type=float, multiple=True, metavar="S...", help="Times in s.")
@click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="NAME=VALUE...", help="Settings, e.g. ir=0.8."
)
@library_option
@json_option
def command(
    key: str,
    currents: tuple[float, ...],
    times: tuple[float, ...],
    settings: tuple[tuple[str, float | str], ...],
    library_file: str | None,
    json_file: str | None,
) -> int:
    """Trip times of KEY at currents, or its currents for times; KEY@3 asks revision 3.

    Each answer has a 95 % interval. Statuses: at_least and at_most are bounds, never is below a declared pick-up,
    not_covered is outside what the sheet shows.
    """
    if bool(currents) == bool(times):
        raise click.UsageError("Give either --current A... or --time S....")
    with curvelab.open_library(library_file, create=False) as library:
        device = library.device(*split_key(key)).at(**dict(settings))
    answers = [answer_at(device, each) for each in currents] + [answer_for(device, each) for each in times]
    if json_file:
        write_json(_as_json(device, answers), json_file)
    if json_file != "-":
        click.echo(answers_text(device, answers))
    reached = all(edge is None or edge.status in REACHED for answer in answers for edge in answer["edges"].values())
    return 0 if reached and all(any(answer["edges"].values()) for answer in answers) else 1


def answer_at(device: Device, current_a: float) -> dict[str, Any]:
    """What the device does at a current in A."""
    times = device.trip_time(current_a)
    return {"current": current_a, "edges": {"fast": times.fast, "slow": times.slow, "mean": times.mean}}


def answer_for(device: Device, time_s: float) -> dict[str, Any]:
    """Which currents go with a time in s."""
    currents = device.trip_current(time_s)
    return {"time": time_s, "edges": {"trips": currents.trips, "holds": currents.holds, "mean": currents.mean}}


def _as_json(device: Device, answers: list[dict[str, Any]]) -> dict[str, Any]:
    return {
        "format": 1,
        "device": device.key,
        "revision": device.revision,
        "state": device.state,
        "settings": dict(device.settings),
        "base": "A",
        "answers": [
            {name: value for name, value in answer.items() if name != "edges"}
            | {edge: _edge_json(found) for edge, found in answer["edges"].items()}
            for answer in answers
        ],
    }


def _number(value: Any) -> float | None:
    return None if isnan(value) else float(value)


def _edge_json(found: EdgeAnswer | None) -> dict[str, Any] | None:
    if found is None:
        return None
    known = not (isnan(found.lower) or isnan(found.upper))
    return {
        "status": found.status,
        "value": _number(found.value),
        "interval": [_number(found.lower), _number(found.upper)] if known else None,
        "basis": found.basis,
    }


def answers_text(device: Device, answers: list[dict[str, Any]]) -> str:
    """The device's name over a table, a row for each thing asked."""
    state = f", revision {device.revision} ({device.state})" if device.revision else ""
    asks_times = "current" in answers[0]
    names = list(answers[0]["edges"])
    shown = [name for name in names if any(answer["edges"][name] for answer in answers)]
    rows = []
    for answer in answers:
        asked = written_current(answer["current"], "A") if asks_times else written_time(answer["time"])
        rows.append([asked, *(_cell(answer["edges"][name], times=asks_times) for name in shown)])
    headings = {"trips": "surely trips from", "holds": "surely holds up to"}
    heads = ["current" if asks_times else "time", *(headings.get(name, name) for name in shown)]
    return f"{named(device.nameplate)}{state}\n{table(heads, rows)}"


def _cell(found: EdgeAnswer | None, *, times: bool) -> str:
    if found is None:
        return "-"
    if isnan(found.value):
        return str(found.status).replace("_", " ")

    figures = interval_figures(float(found.value), float(found.lower), float(found.upper))

    def written(value: Any) -> str:
        return written_time(float(value), figures) if times else written_current(float(value), "A", figures)

    prefix = {"at_least": "at least ", "at_most": "at most "}.get(str(found.status), "")
    interval = "" if isnan(found.lower) else f" ({written(found.lower)} to {written(found.upper)})"
    return f"{prefix}{written(found.value)}{interval}"
