"""Where a printed axis has its grid lines: 1 to 9 in each decade, the finer lines between, or equal steps."""

import math
from typing import TypeAlias

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis
from curvelab.units import unit_factor

Range: TypeAlias = tuple[float, float]

DECADES = np.array([1.0])
"""Mantissa of the coarsest log paper."""

MAIN = np.arange(1.0, 10.0)
"""Mantissas that log paper carries as a rule."""

FINE = np.unique(np.round(np.concatenate([np.arange(1, 2, 0.1), np.arange(2, 5, 0.2), np.arange(5, 10, 0.5)]), 3))
"""Mantissas of the finest log paper, without the halves that follow."""

HALVES = np.arange(1.5, 10.0)
"""Half lines between the main ones."""

STEPS = (1.0, 2.0, 2.5, 5.0)
"""Mantissas of the steps of a linear axis."""


def log_lines(axis: Axis, covered: Range, mantissas: Floats) -> Floats:
    """Scaled values of the lines of a log axis within ``covered`` (scaled), rising.

    Lines stand at round numbers of what is printed: with marks in seconds and in minutes, at round numbers of both.
    """
    units = {axis.unit, *(mark.unit for mark in axis.marks if mark.unit)}
    lines = [_decades(covered, math.log10(axis.factor * unit_factor(axis.quantity, unit)), mantissas) for unit in units]
    merged = np.sort(np.concatenate(lines))
    return merged[np.diff(merged, prepend=-np.inf) > 1e-9]


def log_patterns(axis: Axis, covered: Range) -> list[Floats]:
    """Lines within ``covered`` of each usual log paper, coarsest first."""
    papers = (DECADES, np.array([1.0, 2.0, 5.0]), MAIN, np.union1d(MAIN, HALVES))
    return [log_lines(axis, covered, paper) for paper in papers] + [finer_lines(axis, covered)]


def finer_lines(axis: Axis, covered: Range, room: float = 0.0) -> Floats:
    """Every line that the finest log paper may carry, rising; a finer one only ``room`` away from coarser ones."""
    kept = np.zeros(0)
    for mantissas in (DECADES, MAIN, HALVES, FINE):
        lines = log_lines(axis, covered, mantissas)
        free = np.abs(lines[:, None] - kept).min(axis=1, initial=np.inf) >= max(room, 1e-9)
        kept = np.sort(np.concatenate([kept, lines[free]]))
    return kept


def linear_lines(axis: Axis, covered: Range, step: float) -> Floats:
    """Values of the lines of a linear axis at multiples of ``step`` (printed unit) within ``covered``, rising."""
    factor = axis.factor * unit_factor(axis.quantity, axis.unit)
    size = step * factor
    first, last = math.ceil(covered[0] / size - 1e-9), math.floor(covered[1] / size + 1e-9)
    return size * np.arange(first, last + 1, dtype=np.float64)


def linear_steps(axis: Axis, longest: float, shortest: float) -> list[float]:
    """Steps 1, 2, 2.5, 5 x 10^k in the printed unit, between two lengths in the base unit, largest first."""
    factor = axis.factor * unit_factor(axis.quantity, axis.unit)
    exponents = range(math.floor(math.log10(shortest / factor)) - 1, math.ceil(math.log10(longest / factor)) + 1)
    steps = (mantissa * 10.0**exponent for exponent in exponents for mantissa in STEPS)
    return sorted((step for step in steps if shortest <= step * factor <= longest), reverse=True)


def _decades(covered: Range, shift: float, mantissas: Floats) -> Floats:
    first, last = math.floor(covered[0] - shift), math.ceil(covered[1] - shift)
    decades = np.arange(first, last + 1, dtype=np.float64) + shift
    scaled = (decades[:, None] + np.log10(mantissas)).ravel()
    return scaled[(scaled >= covered[0] - 1e-9) & (scaled <= covered[1] + 1e-9)]
