"""Polylines of a path become strokes: mapped to places and cut by what clips them, as an area and as a line."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke
from curvelab.sheets import limits
from curvelab.sheets.affine import apply, scale_of
from curvelab.sheets.clip import Clip, pieces_inside

FLATNESS = 1e-3
"""Greatest distance in the sheet's unit between a curve and its polyline: below 2e-5 decade at 60 units a decade."""


class TooManyPointsError(Exception):
    """The lines of a page have more points than the limit."""


class PointCount:
    """Counts points while they are made, so that a hostile path is given up early."""

    def __init__(self) -> None:
        self._points = 0

    def add(self, points: int) -> None:
        """Count some more.

        Raises
        ------
        TooManyPointsError
            They are more than the limit.
        """
        self._points += points
        if self._points > limits.STROKE_POINTS:
            raise TooManyPointsError


Colour = tuple[int, int, int]
Polyline = tuple[Floats, bool]
"""Points, shape (n, 2), and whether the path itself returns to its start."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Paint:
    """How a path is painted; None where its area is not filled or its line not drawn.

    ``width`` and ``dash`` are in the path's own unit.
    """

    fill: Colour | None
    line: Colour | None
    width: float = 0.0
    dash: tuple[float, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Setting:
    """Where a path lands: its map to places, the areas that clip it and its number on the page."""

    to_place: Floats
    clips: tuple[Clip, ...]
    path: int

    @property
    def tolerance(self) -> float:
        """Flatness in the path's own unit."""
        scale = scale_of(self.to_place)
        return FLATNESS / scale if scale > 0 else FLATNESS


def strokes_from(polylines: list[Polyline], paint: Paint, setting: Setting) -> list[Stroke]:
    """Visible strokes of one path."""
    strokes: list[Stroke] = []
    scale = scale_of(setting.to_place)
    for points, closed in polylines:
        if paint.fill is not None:
            outline = points if closed else np.concatenate([points, points[:1]])
            strokes += _strokes(outline, True, paint.fill, setting)
        if paint.line is not None:
            drawn = (paint.width * scale, tuple(length * scale for length in paint.dash))
            strokes += _strokes(points, closed, paint.line, setting, drawn)
    return strokes


def _strokes(
    points: Floats, closed: bool, colour: Colour, setting: Setting, drawn: tuple[float, tuple[float, ...]] | None = None
) -> list[Stroke]:
    width, dash = drawn or (0.0, ())
    return [
        Stroke(
            points=piece,
            colour=colour,
            width=width,
            filled=drawn is None,
            closed=closed and len(piece) == len(points),
            dash=dash,
            path=setting.path,
        )
        for piece in pieces_inside(apply(setting.to_place, points), setting.clips)
    ]
