"""A curve asked: its value at currents and its current at values, with 95 % intervals. Straight lines in log-log."""

from dataclasses import dataclass
from functools import lru_cache

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.chains import Chain, best_chain, bound_chains, falls
from curvelab.records.curve import Curve
from curvelab.records.power_table import PowerTable, chain_table, end_to_end, side_by_side, with_bounds


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Bounded:
    """Numbers with their 95 % interval, arrays of one shape; NaN where not covered or not known."""

    value: Floats
    lower: Floats
    upper: Floats


@dataclass(frozen=True, kw_only=True, slots=True)
class End:
    """One end of a curve."""

    current: float
    value: float


def values_at(curve: Curve, current: Floats, *, own: bool = False) -> Bounded:
    """Values of a curve at currents.

    Parameters
    ----------
    current : array, shape (n,)
        In the curve's base, positive.
    own : bool
        Intervals without the part that all curves of the sheet share.

    Returns
    -------
    Bounded
        At a repeated current the fast edge answers the smaller, the slow edge and a mean line the larger value. NaN
        between parts and outside the ends.
    """
    return _bounded(_value_table(curve, own), current)


def outer_bounds(curve: Curve, current: Floats, *, own: bool = False) -> tuple[Floats, Floats]:
    """Lower and upper bound carried on level beyond the curve's ends; NaN where the uncertainty is not known.

    Left of a falling curve the lower bound rises to its first value, right of it the upper falls to its last.
    """
    table = _bounds_table(curve, own)
    if table is None:
        unknown = np.full(current.size, np.nan)
        return unknown, unknown
    lower, upper = table(current)
    return lower, upper


def currents_at(curve: Curve, value: Floats) -> Bounded:
    """Currents at values: of a falling slow edge the least, of a falling fast edge the greatest.

    Of a rising curve (let-through, peak) the greatest up to which it stays at or below the value.

    Where a value lies in a gap between two parts, or is repeated on a level stretch, that is the end on the safe side:
    the least current from which on the slow edge is surely no longer than the value, the greatest up to which the fast
    edge surely is no shorter. NaN beyond the ends.
    """
    return _bounded(_current_table(curve), value)


def left_end(curve: Curve) -> End:
    """The curve's end at its smallest current."""
    return _end(curve, 0)


def right_end(curve: Curve) -> End:
    """The curve's end at its largest current."""
    return _end(curve, -1)


def _bounded(table: PowerTable, asked: Floats) -> Bounded:
    answers = table(asked)
    if answers.shape[0] == 1:
        unknown = np.broadcast_to(np.nan, asked.shape)
        return Bounded(value=answers[0], lower=unknown, upper=unknown)
    value, lower, upper = answers
    return Bounded(value=value, lower=lower, upper=upper)


def _takes_first(curve: Curve, *, larger: bool) -> bool:
    """Whether the first of points at one current is the one with the larger (or smaller) value."""
    return larger == falls(curve)


@lru_cache(maxsize=1024)
def _value_table(curve: Curve, own: bool) -> PowerTable:
    """Value, lower and upper side by side; the value alone where the uncertainty is not known."""
    best = best_chain(curve)
    first = _takes_first(curve, larger=curve.edge != "fast")
    stops = (*best.starts[1:], best.current.size)
    parts = [
        chain_table(best.current[start:stop], best.value[start:stop], first=first)
        for start, stop in zip(best.starts, stops, strict=True)
    ]
    value = end_to_end(parts, first=first)
    bounds = _bounds_table(curve, own)
    return value if bounds is None else with_bounds(value, bounds)


@lru_cache(maxsize=1024)
def _bounds_table(curve: Curve, own: bool) -> PowerTable | None:
    """Lower and upper side by side; None where the uncertainty is not known."""
    bounds = bound_chains(curve, own=own)
    if bounds is None:
        return None
    return side_by_side(
        [
            chain_table(chain.current, chain.value, first=_takes_first(curve, larger=larger), clamped=True)
            for chain, larger in zip(bounds, (False, True), strict=True)
        ]
    )


@lru_cache(maxsize=1024)
def _current_table(curve: Curve) -> PowerTable:
    """Current, lower and upper over rising values; the current alone where the uncertainty is not known."""
    if not falls(curve):
        return _rising_current_table(curve)
    best = best_chain(curve)
    current = _inverse(_bridged(best, curve.edge), first=curve.edge == "fast", clamped=False)
    bounds = bound_chains(curve, own=False)
    if bounds is None:
        return current
    lower, upper = bounds
    sides = [_inverse(lower, first=False, clamped=True), _inverse(upper, first=True, clamped=True)]
    return with_bounds(current, side_by_side(sides))


def _rising_current_table(curve: Curve) -> PowerTable:
    current = _last_current(_bridged(best_chain(curve), "fast"), clamped=False)
    bounds = bound_chains(curve, own=False)
    if bounds is None:
        return current
    lower, upper = bounds
    return with_bounds(current, side_by_side([_last_current(each, clamped=True) for each in (upper, lower)]))


def _last_current(chain: Chain, *, clamped: bool) -> PowerTable:
    """The last current up to which a chain has stayed at or below each value."""
    return chain_table(np.maximum.accumulate(chain.value), chain.current, first=False, clamped=clamped)


def _inverse(chain: Chain, *, first: bool, clamped: bool) -> PowerTable:
    return chain_table(chain.value[::-1], chain.current[::-1], first=first, clamped=clamped)


def _bridged(chain: Chain, edge: str) -> Chain:
    """The chain with a step across each gap, on the side where the edge is sure to be."""
    if len(chain.starts) == 1:
        return chain
    at = np.array(chain.starts[1:])
    current = np.insert(chain.current, at, chain.current[at - 1] if edge == "fast" else chain.current[at])
    value = np.insert(chain.value, at, chain.value[at] if edge == "fast" else chain.value[at - 1])
    return Chain(current=current, value=value, starts=(0,))


@lru_cache(maxsize=1024)
def _end(curve: Curve, index: int) -> End:
    best = best_chain(curve)
    return End(current=float(best.current[index]), value=float(best.value[index]))
