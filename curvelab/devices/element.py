"""One line asked: its answers with the status that is honest inside, left of and right of what is drawn."""

from dataclasses import replace

import numpy as np

from curvelab.devices.found import (
    AT_LEAST,
    AT_MOST,
    NEVER,
    NOT_COVERED,
    VALUE,
    Codes,
    Found,
    plain,
    without_number,
)
from curvelab.devices.lines import Line
from curvelab.records.arrays import Floats
from curvelab.records.curve import Curve
from curvelab.records.evaluation import currents_at, left_end, outer_bounds, right_end, values_at

_PICKS_UP = ("delayed", "instantaneous", "earth", "neutral", "override", "residual")
"""Elements that act from a threshold on; a line of theirs that begins with a vertical stretch declares it."""

_SETTING_BASES = ("xIr", "xIsd", "xIi", "xIg")


def pick_up(curve: Curve) -> float | None:
    """The declared pick-up in the curve's base: at smaller currents the element never trips.

    Declared is the setting itself where the curve is drawn in multiples of it, and the current of a vertical stretch a
    line starts with inside the plot.
    """
    part = curve.parts[0]
    start = float(part.current[0])
    vertical = part.current.size > 1 and part.current[1] == start
    if curve.element in _PICKS_UP and vertical and not curve.leaves_top:
        return start
    if curve.base in _SETTING_BASES:
        return min(1.0, start)
    return None


def times_of(line: Line, current: Floats, breaking: float | None, *, own: bool = False) -> Found:
    """Times of a line at currents in its base.

    Parameters
    ----------
    breaking : float, optional
        Breaking capacity in the curve's base: up to it the slow edge's last time bounds what lies beyond.
    own : bool
        Intervals without the part that all curves of the sheet share.
    """
    curve = line.curve
    bounded = values_at(curve, current, own=own)
    found = plain(bounded.value, bounded.lower, bounded.upper)
    if not found.all_values:
        found = _outside(curve, current, breaking, found, own=own)
    if line.bound:
        found = _as_bound(found, AT_MOST if curve.edge == "slow" else AT_LEAST)
    return found.scaled(line.time_factor)


def _outside(curve: Curve, current: Floats, breaking: float | None, found: Found, *, own: bool) -> Found:
    missing = found.code == NOT_COVERED
    left, right = left_end(curve), right_end(curve)
    to_the_left = missing & (current < left.current)
    lower, upper = outer_bounds(curve, current, own=own)
    if curve.leaves_top:
        at_least = replace(_constant(AT_LEAST, left.value, current.size), lower=lower)
        found = found.where(to_the_left, at_least)
    threshold = pick_up(curve)
    if threshold is not None:
        found = found.where(to_the_left & (current < threshold), without_number(NEVER, current.size))
    if curve.edge == "slow" and breaking is not None:
        beyond = missing & (current > right.current) & (current <= breaking)
        found = found.where(beyond, replace(_constant(AT_MOST, right.value, current.size), upper=upper))
    return found


def _constant(code: int, value: float, size: int) -> Found:
    """One bound for everything asked, its interval not known."""
    unknown = np.full(size, np.nan)
    return Found(code=np.full(size, code, dtype=np.int8), value=np.full(size, value), lower=unknown, upper=unknown)


def _as_bound(found: Found, code: int) -> Found:
    """Values of a line that only bounds the device; what was a bound on the other side says nothing any more."""
    codes = found.code.copy()
    codes[found.code == VALUE] = code
    other = AT_LEAST if code == AT_MOST else AT_MOST
    lost = (found.code == other) | ((found.code == NEVER) if code == AT_MOST else False)
    codes[lost] = NOT_COVERED
    emptied = np.where(lost, np.nan, 1.0)
    return Found(code=codes, value=found.value * emptied, lower=found.lower * emptied, upper=found.upper * emptied)


def currents_of(line: Line, time_s: Floats) -> Found:
    """Currents of a line, in its base, for times in s.

    Of the slow edge the least that surely trips by the time, of the fast edge the greatest that surely does not trip
    before it.
    """
    curve = line.curve
    times = time_s / line.time_factor
    bounded = currents_at(curve, times)
    found = plain(bounded.value, bounded.lower, bounded.upper)
    found = _gaps(curve, times, found)
    if not found.all_values:
        found = _beyond(curve, times, found)
    if line.bound:
        # The bound lies on the safe side: a hot device trips at no larger current than its cold slow edge.
        found = _as_bound(found, AT_MOST if curve.edge == "slow" else AT_LEAST)
    return found


def _gaps(curve: Curve, times: Floats, found: Found) -> Found:
    """Times that fall between two parts are answered by the end on the safe side: a bound, not a value."""
    if len(curve.parts) == 1:
        return found
    inside = np.zeros(times.size, dtype=bool)
    for before, after in zip(curve.parts[:-1], curve.parts[1:], strict=True):
        inside |= (times < before.value[-1]) & (times > after.value[0]) & (before.current[-1] != after.current[0])
    code: Codes = found.code.copy()
    code[inside & (found.code == VALUE)] = AT_LEAST if curve.edge == "fast" else AT_MOST
    return replace(found, code=code)


def _beyond(curve: Curve, times: Floats, found: Found) -> Found:
    left, right = left_end(curve), right_end(curve)
    missing = found.code == NOT_COVERED
    longer, shorter = missing & (times > left.value), missing & (times < right.value)
    threshold = pick_up(curve)
    declared = threshold is not None and threshold == left.current
    if curve.edge == "slow":
        # At its first current the slow edge is already short enough.
        return found.where(longer, _constant(VALUE if declared else AT_MOST, left.current, times.size))
    if curve.edge == "fast":
        # Up to its last current the fast edge is still long enough; before a declared pick-up it never trips.
        found = found.where(shorter, _constant(AT_LEAST, right.current, times.size))
        if threshold is not None:
            code = VALUE if declared else AT_LEAST
            found = found.where(longer, _constant(code, threshold, times.size))
    return found
