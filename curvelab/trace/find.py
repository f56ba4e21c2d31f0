"""Find every curve line of a prepared plot, without guides."""

from curvelab.records.sheet import Word
from curvelab.trace.find_raster import find_on_raster
from curvelab.trace.find_vector import find_on_strokes
from curvelab.trace.found import FoundLine, FoundLines, ShortLine
from curvelab.trace.prepared import Prepared

__all__ = ["FoundLine", "FoundLines", "ShortLine", "find_lines"]


def find_lines(prepared: Prepared, words: tuple[Word, ...]) -> FoundLines:
    """Every line of a time-current curve on a plot, in the order of their currents at the top.

    Each line is exactly what its guide leads to, so that a worksheet with these places repeats the reading.

    Parameters
    ----------
    prepared : Prepared
    words : tuple of Word
        Words on the sheet: what lies within them is no line.
    """
    if prepared.raster is None:
        return find_on_strokes(prepared)
    return find_on_raster(prepared, prepared.raster, words)
