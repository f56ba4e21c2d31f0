"""Marks as a first ruler of their axis, also where one of them is wrong."""

from itertools import combinations

import numpy as np

from curvelab.axes.comb import Ruler
from curvelab.axes.planefit import Line, Tilt
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis
from curvelab.records.sheet import Sheet

CLICK_SD = 0.7
"""Standard deviation of a mark clicked by hand, in pixels; common practice, confirmed by no published figure."""

SEEN_HIGH = 2000.0

AGREEING = 4.0
"""Pixels from the ruler within which a mark is clicked as well as hands do."""


SQUARE_SD = 2e-3
"""Radians by which the axes may be off the right angle where only one has lines."""

UPRIGHT_SD = 5e-3
"""Radians by which a page without any lines may be turned."""

FEWEST_LINES = 3
"""Grid lines from which on an axis needs no marks."""


def pixel_size(sheet: Sheet) -> float:
    """What a hand clicks by, in the sheet's unit: a pixel of the image, or of a vector page seen 2000 pixels high."""
    return sheet.pixels.size_in_places if sheet.pixels else max(sheet.width, sheet.height) / SEEN_HIGH


def mark_values(axis: Axis) -> Floats:
    """Scaled values of an axis's marks."""
    return axis.scaled([axis.value_of(mark) for mark in axis.marks])


def mark_places(axis: Axis) -> Floats:
    """Places of an axis's marks, shape (n, 2)."""
    return np.array([mark.at for mark in axis.marks], dtype=np.float64)


def fitted_ruler(across: Floats, scaled: Floats) -> Ruler:
    """Least-squares ruler through marks."""
    per_scaled, origin = np.polyfit(scaled, across, 1)
    return Ruler(origin=float(origin), per_scaled=float(per_scaled))


def possible_rulers(across: Floats, scaled: Floats, pixel: float = 1.0) -> list[Ruler]:
    """Rulers that the marks allow, most agreed on first.

    One, through all marks, where they agree; else one through each largest set of marks that agree with a pair.
    """
    ruler = fitted_ruler(across, scaled)
    if np.abs(across - ruler.across(scaled)).max() <= AGREEING * pixel:
        return [ruler]
    sets = set()
    for pair in combinations(range(len(across)), 2):
        if scaled[pair[0]] == scaled[pair[1]]:
            continue
        through = fitted_ruler(across[list(pair)], scaled[list(pair)])
        sets.add(tuple(np.flatnonzero(np.abs(across - through.across(scaled)) <= AGREEING * pixel)))
    ranked = sorted(sets, key=lambda members: (-len(members), members))
    return [fitted_ruler(across[list(members)], scaled[list(members)]) for members in ranked]


def agreeing(ruler: Ruler, across: Floats, scaled: Floats, pixel: float = 1.0) -> int:
    """How many marks lie within a hand's reach of a ruler."""
    return int(np.sum(np.abs(across - ruler.across(scaled)) <= AGREEING * pixel))


def with_marks(
    lines: list[Line], axes: tuple[Axis, Axis], places: tuple[Floats, Floats], pixel: float
) -> tuple[list[Line], list[Tilt]]:
    """Lines, and for an axis with too few of them its marks (at ``places``) and how its lines lean."""
    short = [sum(line.axis == k for line in lines) < FEWEST_LINES for k in (0, 1)]
    kept = [line for line in lines if not short[line.axis]]
    for k in (0, 1):
        if short[k]:
            kept += _marks_as_lines(axes[k], k, places[k], pixel)
    if all(short):
        return kept, [Tilt(axis=0, square=False, sd=UPRIGHT_SD), Tilt(axis=1, square=True, sd=SQUARE_SD)]
    return kept, [Tilt(axis=short.index(True), square=True, sd=SQUARE_SD)] if any(short) else []


def _marks_as_lines(axis: Axis, index: int, places: Floats, pixel: float) -> list[Line]:
    """Marks as lines of one place each, as exact as they agree with each other and hands are as a rule.

    A mark outvoted by at least three others that agree is left out.
    """
    scaled = mark_values(axis)
    across = places[:, 0 if axis.direction == "x" else 1]
    distance = np.abs(across - possible_rulers(across, scaled, pixel)[0].across(scaled))
    good = distance <= AGREEING * pixel
    if np.sum(good) < 3:
        good = np.ones(len(scaled), dtype=bool)
    ruler = fitted_ruler(across[good], scaled[good])
    misfit = float(np.sum((across[good] - ruler.across(scaled[good])) ** 2))
    # Two degrees of freedom of experience beside those that the marks beyond two give.
    sd = float(np.sqrt((2 * (CLICK_SD * pixel) ** 2 + misfit) / np.sum(good)))
    return [
        Line(axis=index, scaled=float(value), points=place[None, :], sd=sd)
        for value, place in zip(scaled[good], places[good], strict=True)
    ]
