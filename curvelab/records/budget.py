"""What contributes how much to the uncertainty of a curve: the uncertainty budget of its reading (JCGM 100)."""

from dataclasses import dataclass
from typing import Literal

Cause = Literal["calibration", "snapping", "warp", "trace", "correlation", "smoothing", "edge", "tabulation"]

CAUSES: tuple[tuple[Cause, str, bool], ...] = (
    ("calibration", "Axes: where the grid lines and marks were measured", True),
    ("snapping", "Axes: grid lines drawn on whole pixels", True),
    ("warp", "Axes: bends of the sheet beyond the map, other at every place", False),
    ("trace", "Trace: scatter of single places across the line", False),
    ("correlation", "Fit: what neighbouring errors being alike adds to the scatter", False),
    ("smoothing", "Fit: what the model may have smoothed away", False),
    ("edge", "Stroke: its width, and which part of it is the curve", False),
    ("tabulation", "Stored points: straight lines between them", False),
)
"""Name of a cause, what it is, and whether all curves of the sheet share it."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Contribution:
    """One cause: its standard uncertainty, its share of the variance, and whether all curves of the sheet share it."""

    cause: Cause
    text: str
    sd: float
    share: float
    is_shared: bool


@dataclass(frozen=True, kw_only=True, slots=True)
class UncertaintyBudget:
    """Relative standard uncertainties along the curve's normal in log-log, by cause: root mean squares over its length.

    The squares of the causes add up to the square of ``total``. A cause that is known to be none is 0.
    """

    calibration: float
    snapping: float
    warp: float
    trace: float
    correlation: float
    smoothing: float
    edge: float
    tabulation: float

    @property
    def common(self) -> float:
        """What all curves of the sheet share."""
        return _root_sum(self.calibration, self.snapping)

    @property
    def total(self) -> float:
        """All causes together."""
        return _root_sum(*(getattr(self, cause) for cause, _, _ in CAUSES))

    @property
    def contributions(self) -> tuple[Contribution, ...]:
        """The causes in the order of a reading, each with its share of the variance; a total of 0 has no shares."""
        whole = self.total**2
        return tuple(
            Contribution(
                cause=cause,
                text=text,
                sd=getattr(self, cause),
                share=getattr(self, cause) ** 2 / whole if whole > 0.0 else 0.0,
                is_shared=is_shared,
            )
            for cause, text, is_shared in CAUSES
        )


def _root_sum(*parts: float) -> float:
    return float(sum(part**2 for part in parts) ** 0.5)
