"""What a person says about one line: places it passes, its colour, rectangles that are not this line."""

from dataclasses import dataclass

from curvelab.records.trace import Place
from curvelab.records.worksheet import Box


@dataclass(frozen=True, kw_only=True, slots=True)
class Guide:
    """Guide places of one line, in order, in the sheet's unit.

    Parameters
    ----------
    through : tuple of Place
        At least one place on the line, in the order the line passes them.
    colour : str or None
        ``#rrggbb`` of the ink.
    avoid : tuple of Box
        Rectangles (x0, y0, x1, y1) whose ink is not this line.
    """

    through: tuple[Place, ...]
    colour: str | None = None
    avoid: tuple[Box, ...] = ()
