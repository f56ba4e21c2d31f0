"""Lines whose stroke is like no other's: curves that run along a grid line and hide it."""

import numpy as np

from curvelab.axes.classes import CLASS_RATIO
from curvelab.axes.measure import Measured
from curvelab.axes.pattern import DECADES, Range, log_lines
from curvelab.records.axes import Axis

FEWEST = 5
"""Lines of an axis from which on a single stroke of another kind says something."""


def without_curves(axis: Axis, lines: list[Measured], covered: Range) -> list[Measured]:
    """Lines without those darker than all others of their rank.

    The frame and the lines at decades may be darker than the rest: a line inside the plot between decades may not, by
    itself.
    """
    if len(lines) < FEWEST:
        return lines
    decades = log_lines(axis, (covered[0] - 1, covered[1] + 1), DECADES) if axis.scale == "log" else np.zeros(0)
    # Nothing stands closer to a decade line or to the frame than this share of the plot.
    same = 1e-3 * (covered[1] - covered[0])
    special = np.array([*covered, *decades])
    ordinary = [line for line in lines if np.abs(special - line.scaled).min() > same]
    inks = np.array([line.width * line.darkness for line in ordinary])
    strange = [
        line for k, line in enumerate(ordinary) if np.sum(inks > inks[k] / CLASS_RATIO) == 1 and len(ordinary) >= FEWEST
    ]
    return [line for line in lines if line not in strange]
