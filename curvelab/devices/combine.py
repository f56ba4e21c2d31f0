"""Elements combined: the earliest trips, edge by edge, and an element nobody knows of never makes an answer surer.

Of each element an edge's answer says that its time lies in a range: ``value`` exactly there, ``at_least`` from there
up, ``at_most`` from there down, ``never`` at no time, ``not_covered`` anywhere. The earliest of all elements then lies
between the least lower end and the least upper end.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from curvelab.devices.found import AT_LEAST, AT_MOST, NEVER, NOT_COVERED, VALUE, Found
from curvelab.records.arrays import Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ElementFound:
    """The answers of one element, and whether a current lies beyond where its line ends, and at which time it ended."""

    found: Found
    ended_at: Floats
    """Time at which the line ended, where the current lies to the right of it; NaN elsewhere."""


def earliest(elements: Sequence[ElementFound], edge: str) -> Found:
    """The earliest of several elements on one edge."""
    founds = [element.found for element in elements]
    if all(found.all_values for found in founds):
        return _pick(founds, np.argmin([found.value for found in founds], axis=0))
    return _with_status(elements, edge)


def latest(founds: Sequence[Found]) -> Found:
    """The longest time over several conditions, none of which is asked for: all must be known."""
    return _pick(founds, _over_conditions(founds, longest=True))


def shortest(founds: Sequence[Found]) -> Found:
    """The shortest time over several conditions, none of which is asked for: all must be known."""
    return _pick(founds, _over_conditions(founds, longest=False))


def _over_conditions(founds: Sequence[Found], *, longest: bool) -> np.ndarray[tuple[int, ...], np.dtype[np.intp]]:
    """Which condition governs; one that is not covered, or bounded on the wrong side, governs."""
    worst = np.inf if longest else -np.inf
    unsure = AT_LEAST if longest else AT_MOST
    times = []
    for found in founds:
        time = np.where(found.code == NEVER, np.inf, found.value)
        time = np.where(found.code == NOT_COVERED, worst, time)
        times.append(np.where(found.code == unsure, worst, time))
    return np.asarray(np.argmax(times, axis=0) if longest else np.argmin(times, axis=0))


def _pick(founds: Sequence[Found], chosen: np.ndarray[tuple[int, ...], np.dtype[np.intp]]) -> Found:
    result = founds[0]
    for index, found in enumerate(founds[1:], start=1):
        result = result.where(chosen == index, found)
    return result


def _with_status(elements: Sequence[ElementFound], edge: str) -> Found:
    size = elements[0].found.code.size
    least, most = np.full((len(elements), size), np.inf), np.full((len(elements), size), np.inf)
    for row, element in enumerate(elements):
        found = element.found
        known_below = (found.code == VALUE) | (found.code == AT_LEAST)
        known_above = (found.code == VALUE) | (found.code == AT_MOST)
        least[row] = np.where(known_below, found.value, np.where(found.code == NEVER, np.inf, 0.0))
        most[row] = np.where(known_above, found.value, np.inf)
    # A sheet draws only the element that trips first: a line that ended later than another covers is overtaken by it.
    covered = [np.where(each.found.code == VALUE, each.found.value, np.inf) for each in elements]
    first_known = np.min(covered, axis=0)
    for row, element in enumerate(elements):
        overtaken = np.isfinite(first_known) & (element.ended_at >= first_known)
        least[row][overtaken] = np.inf
        most[row][overtaken & (element.found.code == AT_MOST)] = np.inf
    return _between(elements, least, most, edge)


def _between(elements: Sequence[ElementFound], least: Floats, most: Floats, edge: str) -> Found:
    """The answer the edge gives when the earliest time lies between the least of both."""
    founds = [element.found for element in elements]
    lower, upper = least.min(axis=0), most.min(axis=0)
    from_lower, from_upper = _pick(founds, least.argmin(axis=0)), _pick(founds, most.argmin(axis=0))
    code = np.full(lower.size, NOT_COVERED, dtype=np.int8)
    bounded_below, bounded_above = (lower > 0) & np.isfinite(lower), np.isfinite(upper)
    if edge == "slow":
        code[bounded_below] = AT_LEAST
        code[bounded_above] = AT_MOST
    else:
        code[bounded_below] = AT_LEAST
    exact = bounded_above & (lower >= upper)
    code[exact] = np.where(from_upper.code[exact] == AT_MOST, AT_MOST, VALUE)
    code[np.isinf(lower) & np.isinf(upper)] = NEVER
    chosen = from_lower.where((code == AT_MOST) | (code == VALUE), from_upper)
    silent = (code == NEVER) | (code == NOT_COVERED)
    return Found(
        code=code,
        value=np.where(silent, np.nan, chosen.value),
        lower=np.where(silent | (code == AT_MOST), np.nan, chosen.lower),
        upper=np.where(silent | (code == AT_LEAST), np.nan, chosen.upper),
    )
