"""Lines found on a plot without guides: what was found, and how each is found again."""

from dataclasses import dataclass

from curvelab.records.trace import Place, Trace
from curvelab.records.warning import ReadingWarning
from curvelab.trace.guide import Guide


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class FoundLine:
    """One curve line.

    Parameters
    ----------
    trace : Trace
        Exactly what ``guide`` leads to.
    guide : Guide
        A place on the line that means it alone.
    dashed : bool
        Whether the line is printed in dashes.
    warnings : tuple of ReadingWarning
        What is doubtful about its course.
    """

    trace: Trace
    guide: Guide
    dashed: bool
    warnings: tuple[ReadingWarning, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class ShortLine:
    """A short straight line: a sample of a legend, a leader from words to a curve; ends in the sheet's unit."""

    start: Place
    end: Place
    colour: tuple[int, int, int]
    width: float
    dashed: bool


@dataclass(frozen=True, kw_only=True, slots=True)
class FoundLines:
    """Everything found on one plot: lines of curves, short straight lines, and what was left unexplained."""

    lines: tuple[FoundLine, ...]
    short_lines: tuple[ShortLine, ...]
    warnings: tuple[ReadingWarning, ...]
