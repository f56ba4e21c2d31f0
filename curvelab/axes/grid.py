"""What is found of a printed grid, from pixels or from strokes alike."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from curvelab.axes.comb import Alignment, Ruler, align
from curvelab.axes.marks import agreeing, mark_values, possible_rulers
from curvelab.axes.pattern import Range
from curvelab.axes.strips import Profile
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, GridLine

AXIS_NAMES: tuple[Literal["current"], Literal["value"]] = ("current", "value")

MARK_WORTH = 2.0
"""What one mark agreed with is worth beside lines, in units of log likelihood."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Grid:
    """Lines measured, in places of the sheet, and the scaled ranges of both axes that the plot covers.

    ``disagrees`` says for each axis that lines are there but not where the marks have them. ``line_sd`` and
    ``common_sd`` are, for each axis and in the sheet's unit, what a line is off at least and what all lines may be off
    together (standard deviations across).
    """

    lines: tuple[GridLine, ...]
    covered: tuple[Range, Range]
    disagrees: tuple[bool, bool]
    line_sd: tuple[float, float] = (0.0, 0.0)
    common_sd: tuple[float, float] = (0.0, 0.0)


def aligned_marks(axis: Axis, across: Floats, profile: Profile) -> Alignment:
    """The axis's pattern laid on the lines seen, starting from its marks at places ``across``, wrong ones outvoted."""
    scaled = mark_values(axis)
    ends = (float(scaled.min()), float(scaled.max()))

    def worth(alignment: Alignment) -> float:
        return alignment.score + MARK_WORTH * agreeing(alignment.ruler, across, scaled, profile.step)

    rulers = possible_rulers(across, scaled, profile.step)
    return max((align(axis, ruler, ends, profile) for ruler in rulers), key=worth)


def disagrees(alignment: Alignment, profile: Profile) -> bool:
    """Whether enough lines are seen to say that the marks do not fit them."""
    return not alignment.agrees and len(profile.peaks) >= 5


def rough_rows(ruler: Ruler, slope: float, middle: float, across: int, centre: Floats, reach: float) -> Floats:
    """An axis's row (constant, by X, by Y) of an affine map: its ruler leaning by ``slope`` about ``middle``."""
    row = np.zeros(3)
    row[1 + across] = reach / ruler.per_scaled
    row[2 - across] = -slope * reach / ruler.per_scaled
    lean = slope * (centre[1 - across] - middle)
    row[0] = (centre[across] - lean - ruler.origin) / ruler.per_scaled
    return row
