"""How far a sheet bends beyond what its map follows, from what neighbouring grid lines miss the map by alike."""

from itertools import pairwise

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, GridLine

SURE = 2.0
"""Standard errors by which neighbours must agree: lines that are each off by themselves agree by chance."""

FEWEST_PAIRS = 4


def warp_sd(axes: Axes) -> tuple[float, float]:
    """Standard deviations along the current and the value axis, in the axes' scaled units.

    An error of one line alone (how it was drawn, or measured) is not shared by the next line, a bend of the paper is:
    so the mean product of what neighbouring lines miss the map by, place by place, is the variance of the bends alone.
    Lines drawn on whole pixels are off together as far as the map's own covariance says, and by bends not at all.
    """
    if axes.snapped:
        return 0.0, 0.0
    return _along(axes, "current", 0), _along(axes, "value", 1)


def _along(axes: Axes, name: str, index: int) -> float:
    lines = sorted((line for line in axes.grid if line.axis == name), key=lambda line: line.value)
    axis = axes.current if index == 0 else axes.value
    missed = [_missed(axes, line, float(axis.scaled(line.value)), index) for line in lines]
    products = [_product(first, second) for first, second in pairwise(missed)]
    known = np.array([each for each in products if np.isfinite(each)])
    if len(known) < FEWEST_PAIRS:
        return 0.0
    sure = float(known.mean()) - SURE * float(known.std(ddof=1)) / np.sqrt(len(known))
    return float(np.sqrt(known.mean())) if sure > 0.0 else 0.0


def _missed(axes: Axes, line: GridLine, scaled: float, index: int) -> tuple[Floats, Floats]:
    """Places along a line, as the other axis's scaled value, and what the map misses the line by there."""
    seen = axes.map.scaled(line.points)
    order = np.argsort(seen[:, 1 - index])
    return seen[order, 1 - index], seen[order, index] - scaled


def _product(first: tuple[Floats, Floats], second: tuple[Floats, Floats]) -> float:
    """Mean product over the places that both lines have; NaN where there are none."""
    inside = (first[0] >= second[0][0]) & (first[0] <= second[0][-1])
    if not inside.any():
        return float("nan")
    return float(np.mean(first[1][inside] * np.interp(first[0][inside], *second)))
