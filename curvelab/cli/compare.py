"""``curvelab compare``: two or more devices side by side."""

from collections.abc import Mapping, Sequence
from typing import Any

import click
import numpy as np

import curvelab
from curvelab.calculators.compare import Comparison, Pair
from curvelab.calculators.reach import Reach
from curvelab.cli.many import ManyValues, Settings
from curvelab.cli.output import json_option, library_option, named, table, write_json
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.records.answer import EdgeAnswer
from curvelab.units import written_current, written_time

ROWS = 13
"""Currents the printed table shows."""


@click.command(cls=ManyValues)
@click.argument("keys", nargs=-1, required=True, metavar="KEY KEY [KEY...]")
@click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="KEY.NAME=VALUE...", help="Settings of a device."
)
@click.option("--picture", "picture_file", type=click.Path(dir_okay=False), help="Draw both bands (PNG, SVG or PDF).")
@library_option
@json_option
def command(
    keys: tuple[str, ...],
    settings: tuple[tuple[str, float | str], ...],
    picture_file: str | None,
    library_file: str | None,
    json_file: str | None,
) -> int:
    """Compare two to eight devices: times, who surely clears first, and up to which current. The first is upstream."""
    given = _settings_by_key(keys, settings)
    with curvelab.open_library(library_file, create=False) as library:
        devices = [library.device(*split_key(key)).at(**given[key]) for key in keys]
    comparison = curvelab.compare(devices)
    if picture_file:
        # A picture needs the plotting library; the comparison alone starts without it.
        from curvelab.plots.bands import draw_bands  # noqa: PLC0415

        draw_bands([device.record for device in devices], picture_file)
    if json_file:
        write_json(comparison_json(comparison), json_file)
    if json_file != "-":
        click.echo(comparison_text(devices, comparison))
    return 0


def _settings_by_key(
    keys: Sequence[str], settings: Sequence[tuple[str, float | str]]
) -> Mapping[str, dict[str, float | str]]:
    given: dict[str, dict[str, float | str]] = {key: {} for key in keys}
    for name, value in settings:
        key, dot, setting = name.rpartition(".")
        if not dot or key not in given:
            raise InputError(
                f"'{name}' names no device of this comparison", "KEY.NAME=VALUE", f"KEY is one of: {', '.join(keys)}"
            )
        given[key][setting] = value
    return given


def comparison_text(devices: Sequence[Device], comparison: Comparison) -> str:
    """Times at a few currents, then one sentence a pair."""
    lines = [named(device.nameplate) for device in devices]
    shown = np.unique(np.linspace(0, comparison.current_a.size - 1, ROWS).round().astype(int))
    rows = [
        [
            written_current(float(comparison.current_a[k]), "A"),
            *(_span(times.fast, times.slow, k) for times in comparison.times),
        ]
        for k in shown
    ]
    lines.append(table(["current", *comparison.devices], rows))
    return "\n".join(lines + [sentence for pair in comparison.pairs for sentence in _sentences(pair)])


def _span(fast: EdgeAnswer | None, slow: EdgeAnswer | None, k: int) -> str:
    return f"{_one(fast, k)} - {_one(slow, k)}"


def _one(edge: EdgeAnswer | None, k: int) -> str:
    if edge is None:
        return "?"
    status, value = np.ravel(edge.status)[k], float(np.ravel(edge.value)[k])
    if np.isnan(value):
        return "?" if status == "not_covered" else str(status).replace("_", " ")
    return {"at_least": "≥ ", "at_most": "≤ "}.get(str(status), "") + written_time(value)


def _sentences(pair: Pair) -> list[str]:
    sentences = [_sentence(pair.a, pair.b, pair.b_clears_first), _sentence(pair.b, pair.a, pair.a_clears_first)]
    return [sentence for sentence in sentences if sentence] or [
        f"{pair.a} and {pair.b}: nowhere does one surely clear before the other may act."
    ]


def _sentence(waits: str, clears: str, reach: Reach) -> str:
    if reach.from_a is None or reach.up_to_a is None:
        return ""
    interval = ""
    if reach.lower_a is not None and reach.upper_a is not None:
        interval = f" (95 %: {written_current(reach.lower_a, 'A')} to {written_current(reach.upper_a, 'A')})"
    end = "at least up to" if reach.status == "at_least" else "up to"
    start = written_current(reach.from_a, "A")
    return f"{clears} clears before {waits} may act from {start} {end} {written_current(reach.up_to_a, 'A')}{interval}."


def comparison_json(comparison: Comparison) -> dict[str, Any]:
    """The whole comparison; null where nothing is known."""
    return {
        "format": 1,
        "devices": list(comparison.devices),
        "current": comparison.current_a.tolist(),
        "times": [
            {edge: _edge_json(getattr(times, edge)) for edge in ("fast", "slow", "mean")} for times in comparison.times
        ],
        "pairs": [
            {
                "a": pair.a,
                "b": pair.b,
                "sooner": pair.sooner.tolist(),
                "b_over_a": _numbers(pair.b_over_a.value),
                "a_over_b": _numbers(pair.a_over_b.value),
                "b_clears_first": _reach_json(pair.b_clears_first),
                "a_clears_first": _reach_json(pair.a_clears_first),
                "contacts": list(pair.contacts_a),
            }
            for pair in comparison.pairs
        ],
    }


def _reach_json(reach: Reach) -> dict[str, Any]:
    known = reach.lower_a is not None and reach.upper_a is not None
    return {
        "status": reach.status,
        "from": reach.from_a,
        "up_to": reach.up_to_a,
        "interval": [reach.lower_a, reach.upper_a] if known else None,
    }


def _edge_json(edge: EdgeAnswer | None) -> dict[str, Any] | None:
    if edge is None:
        return None
    return {
        "status": np.ravel(edge.status).tolist(),
        "value": _numbers(edge.value),
        "lower": _numbers(edge.lower),
        "upper": _numbers(edge.upper),
        "basis": edge.basis,
    }


def _numbers(values: Any) -> list[float | None]:
    return [float(value) if np.isfinite(value) else None for value in np.ravel(values)]
