"""``curvelab compare``: two or more devices side by side."""

from collections.abc import Mapping, Sequence
from pathlib import Path
from tempfile import TemporaryDirectory

import click
import numpy as np

import curvelab
from curvelab.calculators.compare import Comparison, Pair, Ratio
from curvelab.calculators.comparison_json import comparison_json
from curvelab.calculators.reach import Reach
from curvelab.calculators.stretches import sides_of
from curvelab.cli.many import ManyValues, Settings
from curvelab.cli.output import json_option, library_option, named, table, write_json
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.records.answer import EdgeAnswer
from curvelab.records.stretch import NOT_COVERED, UNDECIDED, Sides, written_stretch
from curvelab.units import written_between, written_current, written_time

ROWS = 13
"""Currents the printed table shows where none are chosen."""


@click.command(cls=ManyValues)
@click.argument("keys", nargs=-1, required=True, metavar="KEY KEY [KEY...]")
@click.option(
    "--current", "currents", type=float, multiple=True, metavar="A...", help="Currents in A [default: evenly spread]."
)
@click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="KEY.NAME=VALUE...", help="Settings of a device."
)
@click.option(
    "--picture", "picture_file", type=click.Path(dir_okay=False), help="Draw the bands on one page (PNG, SVG or PDF)."
)
@click.option(
    "--on-sheet",
    "on_sheet_file",
    type=click.Path(dir_okay=False),
    help="Draw the bands over the sheet the first was read from.",
)
@library_option
@json_option
def command(
    keys: tuple[str, ...],
    currents: tuple[float, ...],
    settings: tuple[tuple[str, float | str], ...],
    picture_file: str | None,
    on_sheet_file: str | None,
    library_file: str | None,
    json_file: str | None,
) -> int:
    """Compare two to eight devices: times, who surely clears first, and up to which current. The first is upstream.

    KEY@2 KEY@3 compares two revisions of one device.
    """
    given = settings_by_key(keys, settings)
    with curvelab.open_library(library_file, create=False) as library:
        devices = [library.device(*split_key(key)).at(**given[key]) for key in keys]
        comparison = curvelab.compare(devices, currents or None)
        sides = sides_of(devices)
        if on_sheet_file:
            _draw_on_sheet(library, keys[0], devices, on_sheet_file)
    if picture_file:
        # A picture needs the plotting library; the comparison alone starts without it.
        from curvelab.plots.at_settings import drawn_record  # noqa: PLC0415
        from curvelab.plots.bands import draw_bands  # noqa: PLC0415

        draw_bands([drawn_record(device) for device in devices], picture_file, sides=sides)
    if json_file:
        write_json(comparison_json(comparison, sides), json_file)
    if json_file != "-":
        click.echo(comparison_text(devices, comparison, sides))
    return 0


def _draw_on_sheet(library: Library, key: str, devices: Sequence[Device], path: str) -> None:
    """The bands over the newest sheet of the first device that has time-current curves."""
    # Opening a sheet and drawing need libraries that the comparison alone starts without.
    from curvelab.plots.at_settings import drawn_record  # noqa: PLC0415
    from curvelab.plots.on_sheet import draw_on_sheet  # noqa: PLC0415
    from curvelab.reading.restore import restored  # noqa: PLC0415

    of_sheet = [
        stored
        for stored in library.evidence(*split_key(key)).readings
        if stored.reading.axes is not None and stored.reading.axes.value.quantity == "time"
    ]
    if not of_sheet:
        raise InputError(f"'{key}' was not read from a sheet", "", "Give --picture instead")
    with TemporaryDirectory() as folder:
        draw_on_sheet(restored(of_sheet[-1], Path(folder)), [drawn_record(device) for device in devices], path)


def settings_by_key(
    keys: Sequence[str], settings: Sequence[tuple[str, float | str]]
) -> Mapping[str, dict[str, float | str]]:
    """The settings of each device, from ``KEY.NAME`` and value.

    Raises
    ------
    InputError
        A name is of none of the devices.
    """
    given: dict[str, dict[str, float | str]] = {key: {} for key in keys}
    for name, value in settings:
        key, dot, setting = name.rpartition(".")
        if not dot or key not in given:
            raise InputError(
                f"'{name}' names no device of this comparison", "KEY.NAME=VALUE", f"KEY is one of: {', '.join(keys)}"
            )
        given[key][setting] = value
    return given


def comparison_text(devices: Sequence[Device], comparison: Comparison, sides: Sequence[Sides]) -> str:
    """Times at a few currents, and of two devices who is sooner there; then a few sentences a pair."""
    lines = [named(device.nameplate) for device in devices]
    shown = range(comparison.current_a.size)
    if len(shown) > ROWS:
        shown = np.unique(np.linspace(0, len(shown) - 1, ROWS).round().astype(int)).tolist()
    heads = ["current", *comparison.devices]
    rows = [
        [
            written_current(float(comparison.current_a[k]), "A"),
            *(_span(times.fast, times.slow, k) for times in comparison.times),
        ]
        for k in shown
    ]
    if len(devices) == 2:
        (pair,) = comparison.pairs
        heads += [f"slow {pair.b} / fast {pair.a}", "surely clears first"]
        rows = [[*row, _ratio(pair.b_over_a, k), _words(pair.sooner[k])] for row, k in zip(rows, shown, strict=True)]
    lines.append(table(heads, rows))
    lines += [sentence for pair in comparison.pairs for sentence in _sentences(pair)]
    return "\n".join(lines + [_stretches(each) for each in sides])


def _ratio(ratio: Ratio, k: int) -> str:
    value, interval = float(ratio.value[k]), (float(ratio.lower[k]), float(ratio.upper[k]))
    if not np.isfinite(value):
        return "-"
    return written_between(value, interval if np.isfinite(interval).all() else None, "ratio")


def _words(status: object) -> str:
    return str(status).replace("_", " ")


def _told(sooner: str) -> str:
    return _words(sooner) if sooner in {UNDECIDED, NOT_COVERED} else f"{sooner} clears first"


def _stretches(sides: Sides) -> str:
    """One line: ``a and b: b clears first 22.1 A to 1.35 kA; undecided 1.35 kA to 1.52 kA``."""
    told = "; ".join(f"{_told(each.sooner)} {written_stretch(each)}" for each in sides.stretches)
    return f"{sides.a} and {sides.b}: {told or 'nothing in common'}."


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
    told = [sentence for sentence in sentences if sentence] or [
        f"{pair.a} and {pair.b}: nowhere does one surely clear before the other may act."
    ]
    if pair.contacts_a:
        places = ", ".join(written_current(current, "A") for current in pair.contacts_a)
        told.append(f"The edges of {pair.a} and {pair.b} cross at {places}.")
    return told


def _sentence(waits: str, clears: str, reach: Reach) -> str:
    if reach.from_a is None or reach.up_to_a is None:
        return ""
    interval = ""
    if reach.lower_a is not None and reach.upper_a is not None:
        interval = f" (95 %: {written_current(reach.lower_a, 'A')} to {written_current(reach.upper_a, 'A')})"
    end = "at least up to" if reach.status == "at_least" else "up to"
    start = written_current(reach.from_a, "A")
    return f"{clears} clears before {waits} may act from {start} {end} {written_current(reach.up_to_a, 'A')}{interval}."
