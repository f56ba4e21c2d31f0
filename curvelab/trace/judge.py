"""Whether a line on a plot is a time-current curve, or a leader, a legend's sample, a grid line or a scrap."""

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.trace.window import PlotWindow, plot_window

Verdict = Literal["curve", "straight", "scrap", "grid"]

LEAST_LENGTH = 0.12
"""Shortest curve, relative to the plot's smaller side."""
STRAIGHT = 0.006
"""Largest distance from the chord, relative to its length, of a straight line."""
LONGEST_FURNITURE = 0.35
"""Longest leader or sample, relative to the plot's smaller side."""
PARALLEL = 0.004
"""Largest change of a scaled value along a line parallel to an axis, relative to the plot's span."""
MOSTLY = 0.8
"""Share of a line inside the plot that lies along grid lines, from which it is one."""
AT_FRAME = 0.006
"""Distance from the frame of a line that leaves the plot, relative to the smaller side."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Judge:
    """What a plot's own size makes of lines on it; ``side`` is its smaller side in the sheet's unit."""

    window: PlotWindow
    side: float
    exactness: float

    @classmethod
    def of(cls, axes: Axes, exactness: float) -> "Judge":
        """The judge of one plot on which places of a straight line scatter by up to ``exactness``."""
        window = plot_window(axes)
        corners = window.corners()
        return cls(
            window=window, side=float(np.hypot(*(corners - np.roll(corners, 1, axis=0)).T).min()), exactness=exactness
        )

    def verdict(self, places: Floats, width: float) -> Verdict:
        """What a line is; ``straight`` where only others beside it tell."""
        length = length_of(places)
        if length < LEAST_LENGTH * self.side:
            return "scrap"
        if self._turns_back(places):
            return "scrap"
        if self.is_parallel(places) or (not self.at_frame(places).any() and self._on_grid(places) > MOSTLY):
            return "grid"
        return "straight" if bow(places) <= max(STRAIGHT * length, 0.5 * width, self.exactness) else "curve"

    def is_furniture(self, places: Floats) -> bool:
        """Whether a straight line inside the plot is as short as a leader or an arrow."""
        return not self.at_frame(places).any() and length_of(places) < LONGEST_FURNITURE * self.side

    def is_odd(self, places: Floats) -> bool:
        """Whether a long line along an axis lies where no grid line is usually drawn: a limit, or part of a curve."""
        return length_of(places) > LONGEST_FURNITURE * self.side and self._on_grid(places) < 1.0 - MOSTLY

    def at_frame(self, places: Floats) -> NDArray[np.bool_]:
        """Whether the line's start and end lie at the frame."""
        result: NDArray[np.bool_] = self.window.depth(places[[0, -1]]) < AT_FRAME * self.side
        return result

    def _turns_back(self, places: Floats) -> bool:
        """Whether its value changes with current the wrong way from end to end: times fall, let-through rises."""
        rise = np.subtract(*self.window.axes.map.scaled(places[[-1, 0]])) / (self.window.high - self.window.low)
        wrong = -1.0 if self.window.axes.value.quantity == "time" else 1.0
        return bool(wrong * rise[0] * rise[1] < 0.0 and np.abs(rise).min() > PARALLEL)

    def _on_grid(self, places: Floats) -> float:
        """Share of a line along where grid lines are usually drawn: at whole digits of a decade."""
        scaled = self.window.axes.map.scaled(places)
        near = 2.0 * self.exactness * np.linalg.norm(self.window.axes.map.jacobian(places), axis=2)
        step = np.abs(np.gradient(scaled, axis=0)) / np.abs(np.gradient(scaled, axis=0)).max(axis=1, keepdims=True)
        along = np.zeros(len(places), dtype=bool)
        for k, axis in enumerate((self.window.axes.current, self.window.axes.value)):
            digit = _nearest_digit(scaled[:, k]) if axis.scale == "log" else np.full(len(places), np.inf)
            along |= (np.abs(scaled[:, k] - digit) < near[:, k]) & (step[:, k] < 0.2)
        return float(along.mean())

    def is_parallel(self, places: Floats) -> bool:
        """Whether a line runs along one axis."""
        spans = np.ptp(self.window.axes.map.scaled(places), axis=0) / (self.window.high - self.window.low)
        return bool(spans.min() < PARALLEL)


def _nearest_digit(scaled: Floats) -> Floats:
    """Scaled value of the nearest whole digit of a decade."""
    decade = np.floor(scaled)
    digits = np.log10(np.arange(1.0, 11.0))
    nearest: Floats = decade + digits[np.abs((scaled - decade)[:, None] - digits).argmin(axis=1)]
    return nearest


def length_of(places: Floats) -> float:
    """Length of a polyline."""
    return float(np.hypot(*np.diff(places, axis=0).T).sum())


def bow(places: Floats) -> float:
    """Largest distance of a polyline's places from the chord between its ends."""
    chord = places[-1] - places[0]
    size = float(np.hypot(*chord))
    offset = places - places[0]
    if size == 0.0:
        return float(np.hypot(*offset.T).max())
    return float(np.abs(offset[:, 0] * chord[1] - offset[:, 1] * chord[0]).max() / size)
