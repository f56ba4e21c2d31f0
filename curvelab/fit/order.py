"""The two edges of one element kept in order: the fast edge is never above the slow one.

In rotated coordinates both are functions of u with slopes between -1 and 1, and "above" is a greater v at the same u,
whether the curves are flat or upright there. Where they cross, both take their mean: the lesser (greater) of a curve
and the mean of both is again a function with such slopes, so that both stay monotone.
"""

from dataclasses import dataclass, replace
from itertools import product

import numpy as np

from curvelab.errors import FitError
from curvelab.fit.rotate import log_slope, rotated, unrotated
from curvelab.fit.tabulate import LN10, part_of, polyline
from curvelab.records.arrays import Floats
from curvelab.records.curve import Part
from curvelab.records.fit import CurveFit

EXPLAINED = 4.0
"""Standard deviations of their difference up to which two edges may cross."""

SAME_LINE = 5e-4
"""Decades that two traces of one printed line may differ by beyond their own scatter: 0.2 px at 400 px a decade."""

ROUNDING = 1e-12
"""Decades of crossing that are only arithmetic."""


def keep_order(fast: CurveFit, slow: CurveFit) -> tuple[CurveFit, CurveFit]:
    """Move the tabulated forms of two edges apart where they cross.

    Parameters
    ----------
    fast, slow : CurveFit
        Fits of the two edges of one element.

    Returns
    -------
    tuple of CurveFit
        Fast and slow with ``moved`` saying by how many decades along the normal at most.

    Raises
    ------
    FitError
        They cross by more than their uncertainties explain: one is not the edge it is said to be.
    """
    fast_parts, slow_parts = list(fast.parts), list(slow.parts)
    moved = 0.0
    for i, j in product(range(len(fast_parts)), range(len(slow_parts))):
        fast_line, slow_line = _Line.of(fast_parts[i], fast.rising), _Line.of(slow_parts[j], slow.rising)
        places = _shared_places(fast_line, slow_line)
        fast_v, slow_v = np.interp(places, fast_line.u, fast_line.v), np.interp(places, slow_line.u, slow_line.v)
        over = fast_v - slow_v
        if over.max(initial=0.0) <= ROUNDING:
            continue
        _check(fast_line, slow_line, places, over)
        moved = max(moved, 0.5 * float(over.max()))
        middle = 0.5 * (fast_v + slow_v)
        fast_parts[i] = fast_line.moved(places, np.minimum(fast_v, middle))
        slow_parts[j] = slow_line.moved(places, np.maximum(slow_v, middle))
    if moved == 0.0:
        return fast, slow
    return (
        replace(fast, parts=tuple(fast_parts), moved=moved),
        replace(slow, parts=tuple(slow_parts), moved=moved),
    )


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Line:
    """A part in rotated coordinates with its own variance along the normal, calibration apart."""

    u: Floats
    v: Floats
    own: Floats
    calibration: Floats
    rising: bool

    @staticmethod
    def of(part: Part, rising: bool) -> "_Line":
        u, v = rotated(np.log10(part.current), np.log10(part.value), rising)
        calibration = (np.nan_to_num(part.sd_common) / LN10) ** 2
        slope = np.diff(v) / np.diff(u)
        sides = [np.concatenate([slope[:1], slope]), np.concatenate([slope, slope[-1:]])]
        total = np.zeros_like(u)
        # A corner's sd in current belongs to its steep side, its sd in value to its flat side.
        for along_current, along_value in map(log_slope, sides):
            total = np.fmax(total, np.fmax(part.sd_current * along_value, part.sd_value * along_current))
        own = np.maximum((total / LN10) ** 2 - calibration, 0.0)
        return _Line(u=u, v=v, own=own, calibration=calibration, rising=rising)

    def moved(self, u: Floats, v: Floats) -> Part:
        """The part with v at the places u, its own places elsewhere."""
        outside = (self.u < u[0]) | (self.u > u[-1])
        places = np.concatenate([self.u[outside], u])
        order = np.argsort(places, kind="stable")
        places = places[order]
        levels = np.concatenate([self.v[outside], v])[order]
        own, calibration = (np.interp(places, self.u, column) for column in (self.own, self.calibration))
        return part_of(polyline(places, levels, own, calibration), rising=self.rising)


def _shared_places(fast: _Line, slow: _Line) -> Floats:
    """Every u where either line has a point or both cross, over the range they share; empty where they share none."""
    start, end = max(fast.u[0], slow.u[0]), min(fast.u[-1], slow.u[-1])
    if start >= end:
        return np.empty(0)
    places = np.unique(np.concatenate([fast.u, slow.u, [start, end]]))
    places = places[(places >= start) & (places <= end)]
    over = np.interp(places, fast.u, fast.v) - np.interp(places, slow.u, slow.v)
    k = np.flatnonzero(over[:-1] * over[1:] < 0.0)
    crossings = places[k] + (places[k + 1] - places[k]) * over[k] / (over[k] - over[k + 1])
    return np.unique(np.concatenate([places, crossings]))


def _check(fast: _Line, slow: _Line, places: Floats, over: Floats) -> None:
    """Refuse a crossing that the two lines' own scatter does not explain (the calibration moves both alike)."""
    own = np.interp(places, fast.u, fast.own) + np.interp(places, slow.u, slow.own)
    excess = over - (EXPLAINED * np.sqrt(2.0 * own) + SAME_LINE)
    k = int(np.argmax(excess))
    if excess[k] <= 0.0:
        return
    level = np.interp(places[k : k + 1], fast.u, fast.v)
    log_current, log_value = unrotated(places[k : k + 1], level, fast.rising)
    raise FitError(
        f"The fast edge lies above the slow edge by {100.0 * np.expm1(LN10 * over[k]):.2g} % "
        f"near {10 ** log_current[0]:.4g}, {10 ** log_value[0]:.4g}",
        "The fast edge is the shortest time at every current",
        "Check which line is which edge, and the guides where the two meet",
    )
