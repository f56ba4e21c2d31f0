"""A trace: one printed line or boundary followed along the sheet."""

from dataclasses import dataclass
from typing import Literal

from curvelab.records.arrays import Floats, freeze

Place = tuple[float, float]
TraceOrigin = Literal["found", "guided", "vector", "typed"]


@dataclass(frozen=True, kw_only=True, slots=True)
class Gap:
    """A stretch along which the line was not seen, between two places of the trace."""

    start: Place
    end: Place


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Trace:
    """Places along one line, in the order they are passed, sub-pixel, with their uncertainty.

    Parameters
    ----------
    places : array, shape (n, 2)
        In the sheet's unit. No place lies inside a gap.
    sd : array, shape (n,)
        Standard deviation of each place along the line's normal, in the sheet's unit.
    correlation_length : float
        Length along the line over which neighbouring errors are alike, in the sheet's unit; 0 for exact strokes.
    gaps : tuple of Gap
    ends_at_frame : tuple of bool
        Whether the line's start and end leave the plot through its frame.
    colour : tuple of int, or None
        Red, green, blue of the ink.
    width : float
        Stroke width in the sheet's unit; for the boundary of a filled area, what its step is spread over (0 if exact).
    boundary : bool
        True for the boundary of a filled area, False for the centre line of a stroke.
    origin : str
        ``found``, ``guided``, ``vector`` or ``typed``.
    confidence : float
        0 to 1: how surely all of it is one line.
    """

    places: Floats
    sd: Floats
    correlation_length: float
    gaps: tuple[Gap, ...]
    ends_at_frame: tuple[bool, bool]
    colour: tuple[int, int, int] | None
    width: float
    boundary: bool
    origin: TraceOrigin
    confidence: float

    def __post_init__(self) -> None:
        freeze(self, places=self.places, sd=self.sd)
