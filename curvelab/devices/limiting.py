"""Let-through and cut-off lines of a device asked: energies and peaks at currents, and currents for them.

Nothing is said beyond what is drawn: no line ends in a bound.
"""

from collections.abc import Mapping, Sequence

import numpy as np

from curvelab.devices.combine import latest, shortest
from curvelab.devices.found import ABOVE_BREAKING, AT_LEAST, Found, plain, without_number
from curvelab.devices.lines import Line, Lines
from curvelab.records.arrays import Floats
from curvelab.records.curve import Edge
from curvelab.records.evaluation import currents_at, left_end, right_end, values_at

Units = Mapping[str, float]
"""What one unit of each base is in the base asked."""


def edge_values(elements: Sequence[Lines], edge: Edge, units: Units, asked: tuple[Floats, float | None]) -> Found:
    """Values of one edge; ``asked`` is the currents and the breaking capacity, in the base asked.

    Over several conditions and elements the slow edge and a mean line answer the largest, the fast edge the least.
    """
    current, breaking = asked
    found = _over_lines([_values(line, units, current) for line in _holding(elements)], edge, current.size)
    if breaking is None:
        return found
    return found.where(current > breaking * (1 + 1e-12), without_number(ABOVE_BREAKING, current.size))


def edge_limits(elements: Sequence[Lines], units: Units, value: Floats) -> Found:
    """The greatest currents up to which every line stays at or below the values."""
    founds = [_limits(line, value).scaled(units[line.curve.base]) for line in _holding(elements)]
    return _over_lines(founds, "fast", value.size)


def _holding(elements: Sequence[Lines]) -> list[Line]:
    return [line for each in elements for line in each.lines if not line.bound]


def _over_lines(founds: Sequence[Found], edge: Edge, size: int) -> Found:
    if not founds:
        return plain(*np.full((3, size), np.nan))
    if len(founds) == 1:
        return founds[0]
    return shortest(founds) if edge == "fast" else latest(founds)


def _values(line: Line, units: Units, current: Floats) -> Found:
    bounded = values_at(line.curve, current / units[line.curve.base])
    return plain(bounded.value, bounded.lower, bounded.upper)


def _limits(line: Line, value: Floats) -> Found:
    bounded = currents_at(line.curve, value)
    found = plain(bounded.value, bounded.lower, bounded.upper)
    never_above = np.isnan(bounded.value) & (value > left_end(line.curve).value)
    unknown = np.full(value.size, np.nan)
    at_least = np.full(value.size, AT_LEAST, dtype=np.int8)
    last = np.full(value.size, right_end(line.curve).current)
    return found.where(never_above, Found(code=at_least, value=last, lower=unknown, upper=unknown))
