"""The currents at which a margin changes sign, and the current up to which a device clears first."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from curvelab.calculators.margin import Asked, Margin, margin_between
from curvelab.devices.device import Device
from curvelab.records.arrays import Floats

_STEP = 1e-9
"""Relative distance at which both sides of a vertical stretch are looked at."""

_ROUNDS, _PIECES = 3, 32

MarginAt = Callable[[Floats], Margin]


@dataclass(frozen=True, kw_only=True, slots=True)
class Reach:
    """The stretch of current in which one device surely clears before the other may act.

    ``status`` is ``value`` where it ends at ``up_to_a``; ``at_least`` where the curves end before it does; ``none``
    where there is no such stretch. ``lower_a``, ``upper_a`` are the 95 % interval of ``up_to_a``; None where not known.
    """

    status: str
    from_a: float | None = None
    up_to_a: float | None = None
    lower_a: float | None = None
    upper_a: float | None = None


def margin_of(upstream: Device, downstream: Device) -> MarginAt:
    """The margin between two devices as a function of the current in A."""

    def margin_at(current_a: Floats) -> Margin:
        return margin_between(Asked(upstream, current_a), Asked(downstream, current_a))

    return margin_at


def knots_of(*devices: Device) -> Floats:
    """Every current in A at which a line of the devices may bend, with a place just before and after each, rising."""
    tabulated = np.concatenate([device.bends_a() for device in devices])
    return np.unique(np.concatenate((tabulated * (1 - _STEP), tabulated, tabulated * (1 + _STEP))))


def clears_first(margin_at: MarginAt, knots: Floats, margin: Margin) -> Reach:
    """How far the margin, known at the knots, stays above 0, from where it first is."""
    positive = np.flatnonzero(margin.best > 0)
    if positive.size == 0:
        return Reach(status="none")
    start = int(positive[0])
    up_to, ended = _first_end(margin_at, knots, margin, "best", start)
    known = not np.isnan(margin.lower[start])
    lower = _first_end(margin_at, knots, margin, "lower", start)[0] if known else None
    upper, closed = _first_end(margin_at, knots, margin, "upper", start) if known else (None, False)
    return Reach(
        status="value" if ended else "at_least",
        from_a=_first_start(margin_at, knots, margin, start),
        up_to_a=up_to,
        lower_a=None if lower is None else min(lower, up_to),
        upper_a=max(upper, up_to) if upper is not None and closed else None,
    )


def contacts(margin_at: MarginAt, knots: Floats, margin: Margin) -> tuple[float, ...]:
    """The currents in A at which the two edges cross, from the margin at the knots."""
    best = margin.best
    before, after = best[:-1], best[1:]
    crossing = np.flatnonzero((np.sign(before) != np.sign(after)) & ~np.isnan(before) & ~np.isnan(after))
    return tuple(_crossing(margin_at, knots, "best", int(place)) for place in crossing)


def _first_start(margin_at: MarginAt, knots: Floats, margin: Margin, start: int) -> float:
    """Where the margin rises above 0 before the knot ``start``; the knot itself where nothing is known before it."""
    if start == 0 or np.isnan(margin.best[start - 1]):
        return float(knots[start])
    return _crossing(margin_at, knots, "best", start - 1)


def _first_end(margin_at: MarginAt, knots: Floats, margin: Margin, name: str, start: int) -> tuple[float, bool]:
    """Where a line of the margin first falls to 0 or below, and True; or where it is last known, and False."""
    line: Floats = getattr(margin, name)[start:]
    stop = np.flatnonzero(~(line > 0))
    if stop.size == 0:
        return float(knots[-1]), False
    place = start + int(stop[0])
    if place == start:
        return float(knots[start]), True
    if np.isnan(getattr(margin, name)[place]):
        return float(knots[place - 1]), False
    return _crossing(margin_at, knots, name, place - 1), True


def _crossing(margin_at: MarginAt, knots: Floats, name: str, place: int) -> float:
    """The crossing between knots ``place`` and ``place + 1``: a tabulated step exactly, else found by division."""
    left, right = float(knots[place]), float(knots[place + 1])
    if right / left < 1 + 4 * _STEP:
        neighbours = knots[max(place - 1, 0) : place + 3]
        return _middle_of_step(neighbours, left, right)
    for _ in range(_ROUNDS):
        fine = np.geomspace(left, right, _PIECES + 1)
        fine[0], fine[-1] = left, right
        line: Floats = getattr(margin_at(fine), name)
        above = line > 0
        turn = int(np.flatnonzero(above[:-1] != above[1:])[0])
        left, right = float(fine[turn]), float(fine[turn + 1])
        before, after = float(line[turn]), float(line[turn + 1])
    if not np.isfinite(before - after) or before == after:
        return right
    return float(left * (right / left) ** (before / (before - after)))


def _middle_of_step(neighbours: Floats, left: float, right: float) -> float:
    """The tabulated current of the step that lies between two of its three places."""
    for number in (left, right):
        low, high = number * (1 - _STEP), number * (1 + _STEP)
        if np.isclose(neighbours, low, rtol=_STEP / 8).any() and np.isclose(neighbours, high, rtol=_STEP / 8).any():
            return number
    return right
