"""A reading for the page: as for every program, with traces and numbers only as fine as they can be seen."""

from typing import Any

import numpy as np
from numpy.typing import NDArray

from curvelab.reading.as_json import numbers, reading_json
from curvelab.records.arrays import Floats
from curvelab.records.reading import Reading
from curvelab.workbench.amperes import with_amperes
from curvelab.workbench.entries import entries_of

SEEN = 0.35
"""Pixels or points that a thinned trace strays at most."""
FIGURES = 7


def page_reading(reading: Reading) -> dict[str, Any]:
    """The reading's JSON, thinned; each curve with ``entry``, its place among the worksheet's, null if it has none."""
    told, entry = reading_json(reading), reading.worksheet.sheet
    if told["sheet"] is not None and entry is not None:
        told["sheet"]["file"] = entry.file
    for curve, read, number in zip(told["curves"], reading.curves, entries_of(reading), strict=True):
        curve["entry"] = number
        if read.trace is not None:
            kept = thinned(read.trace.places, SEEN)
            curve["points"] = {name: [values[k] for k in kept] for name, values in curve["points"].items()}
    told["bands"] = with_amperes(told["bands"], reading.devices, {})
    shortened: dict[str, Any] = _short(told)
    # The page computes with the map, which would move if it were rounded.
    shortened["axes"] = told["axes"]
    return shortened


def thinned(places: Floats, stray: float) -> list[int]:
    """Indices of places such that the polyline through them strays from none by more than ``stray``."""
    keep: NDArray[np.bool_] = np.zeros(len(places), dtype=bool)
    if len(places) == 0:
        return []
    keep[[0, -1]] = True
    waiting = [(0, len(places) - 1)]
    while waiting:
        first, last = waiting.pop()
        if last - first < 2:
            continue
        chord = places[last] - places[first]
        away = places[first + 1 : last] - places[first]
        length = float(np.hypot(*chord))
        across = np.abs(away[:, 0] * chord[1] - away[:, 1] * chord[0]) / length if length else np.hypot(*away.T)
        worst = int(np.argmax(across))
        if across[worst] > stray:
            middle = first + 1 + worst
            keep[middle] = True
            waiting += [(first, middle), (middle, last)]
    return np.flatnonzero(keep).tolist()


def _short(value: Any) -> Any:
    """The same with numbers of as many figures as are ever shown."""
    if isinstance(value, dict):
        return {name: _short(each) for name, each in value.items()}
    if not isinstance(value, list) or not value:
        return value
    if isinstance(value[0], float | None):
        return numbers(rounded(np.array(value, dtype=np.float64)))
    return [_short(each) for each in value]


def rounded(values: Floats) -> Floats:
    """Values to so many figures, each the nearest number that is written so short."""
    with np.errstate(divide="ignore", over="ignore"):
        digits = FIGURES - 1 - np.floor(np.log10(np.abs(values)))
        digits = np.where(np.isfinite(digits), np.clip(digits, -22, 22), 0)
        # A whole number divided by a power of ten is rounded once, and so is the nearest to its decimal form.
        power = 10.0 ** np.abs(digits)
        result: Floats = np.where(digits >= 0, np.round(values * power) / power, np.round(values / power) * power)
    return result
