"""One edge of a device asked: lines turned to their base, conditions and elements combined."""

from collections.abc import Mapping, Sequence

import numpy as np

from curvelab.devices.combine import ElementFound, earliest, latest, shortest
from curvelab.devices.element import currents_of, times_of
from curvelab.devices.found import ABOVE_BREAKING, NOT_COVERED, NOT_SEEN, Found, without_number
from curvelab.devices.lines import Line, Lines
from curvelab.records.arrays import Floats
from curvelab.records.curve import Edge
from curvelab.records.evaluation import right_end

Units = Mapping[str, float]
"""What one unit of each base is in the base asked."""


def edge_times(
    elements: Sequence[Lines], edge: Edge, units: Units, asked: tuple[Floats, float | None], *, own: bool
) -> Found:
    """Times of one edge; ``asked`` is the currents and the breaking capacity, in the base asked."""
    current, breaking = asked
    if not elements:
        return without_number(NOT_SEEN, current.size)
    founds = [_element_times(each, edge, units, asked, own=own) for each in elements]
    found = founds[0] if len(founds) == 1 else _earliest(elements, founds, edge, units, current)
    if breaking is None:
        return found
    above = current > breaking * (1 + 1e-12)
    return found.where(above, without_number(ABOVE_BREAKING, current.size)) if above.any() else found


def edge_currents(elements: Sequence[Lines], edge: Edge, units: Units, time_s: Floats) -> Found:
    """Currents of one edge for times: the least that any element trips by, or that all elements hold up to."""
    if not elements:
        return without_number(NOT_SEEN, time_s.size)
    founds = [
        _over_conditions([currents_of(line, time_s).scaled(line.unit(units)) for line in each.lines], edge)
        if each.lines
        else without_number(NOT_COVERED, time_s.size)
        for each in elements
    ]
    return founds[0] if len(founds) == 1 else _least(founds, edge)


def _earliest(elements: Sequence[Lines], founds: Sequence[Found], edge: Edge, units: Units, current: Floats) -> Found:
    ended = [_ended_at(each.lines, units, current) for each in elements]
    return earliest([ElementFound(found=found, ended_at=time) for found, time in zip(founds, ended, strict=True)], edge)


def _element_times(element: Lines, edge: Edge, units: Units, asked: tuple[Floats, float | None], *, own: bool) -> Found:
    current, breaking = asked
    if not element.lines:
        return without_number(NOT_COVERED, current.size)
    founds = []
    for line in element.lines:
        unit = line.unit(units)
        in_base = current if unit == 1.0 else current / unit
        founds.append(times_of(line, in_base, None if breaking is None else breaking / unit, own=own))
    return _over_conditions(founds, edge)


def _over_conditions(founds: Sequence[Found], edge: Edge) -> Found:
    if len(founds) == 1:
        return founds[0]
    return shortest(founds) if edge == "fast" else latest(founds)


def _ended_at(lines: Sequence[Line], units: Units, current: Floats) -> Floats:
    """The time at which an element's lines ended, where the current lies to the right of all of them; NaN elsewhere."""
    if not lines:
        return np.full(current.size, np.nan)
    times = []
    for line in lines:
        end = right_end(line.curve)
        beyond = current > end.current * line.unit(units) * (1 + 1e-12)
        times.append(np.where(beyond, end.value * line.time_factor, np.nan))
    return np.asarray(np.min(times, axis=0))


def _least(founds: Sequence[Found], edge: Edge) -> Found:
    """The least current over elements.

    Slow: any element that surely trips is enough. Fast and mean: all must be known, as any of them may trip first.
    """
    silent = np.inf if edge == "slow" else -np.inf
    currents = [np.where(np.isnan(found.value), silent, found.value) for found in founds]
    chosen = np.argmin(currents, axis=0)
    result = founds[0]
    for index, found in enumerate(founds[1:], start=1):
        result = result.where(chosen == index, found)
    return result
