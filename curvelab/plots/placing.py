"""Where words go on a drawing so that they cover as little of it as can be."""

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np

from curvelab.records.arrays import Floats

ALONG = np.linspace(0.12, 0.88, 20)
"""Where along a line its words may stand, as fractions of its points."""
TAKEN_WEIGHT, OUTSIDE_WEIGHT = 50.0, 1e6
"""Covering other words, or leaving the page, is as bad as covering so many points of lines."""

Box = tuple[float, float, float, float]


@dataclass(kw_only=True, slots=True)
class Words:
    """Places for words, each chosen after those before.

    Parameters
    ----------
    lines : sequence of array, shape (n, 2)
        Polylines across and down that should stay free, also where they jump a gap.
    letter : tuple of float
        Width and height of a letter, in the same unit.
    room : tuple of float
        Left, top, right and bottom of where words may stand; words that leave it are the last choice.
    """

    lines: Sequence[Floats]
    letter: tuple[float, float]
    room: Box
    taken: list[Box] = field(default_factory=list)
    _points: Floats = field(init=False)

    def __post_init__(self) -> None:
        self._points = np.concatenate([_dense(line, self.letter[0] / 2) for line in self.lines])

    def beside(self, line: Floats, text: str) -> tuple[tuple[float, float], bool]:
        """The point of the line beside which the text covers least, and whether it stands to its right."""
        width, height = (len(text) + 1) * self.letter[0], self.letter[1]
        options: list[tuple[float, int, tuple[float, float], bool, Box]] = []
        for place in line[(ALONG * (len(line) - 1)).astype(int)]:
            for right in (True, False):
                left = place[0] + self.letter[0] if right else place[0] - self.letter[0] - width
                box = (left, place[1] - height / 2, left + width, place[1] + height / 2)
                options.append((self._covered(box), len(options), (float(place[0]), float(place[1])), right, box))
        _, _, place, right, box = min(options)
        self.taken.append(box)
        return place, right

    def _covered(self, box: Box) -> float:
        x0, y0, x1, y1 = box
        across, down = self._points.T
        inside = (across > x0) & (across < x1) & (down > y0) & (down < y1)
        clashes = sum(x0 < other[2] and other[0] < x1 and y0 < other[3] and other[1] < y1 for other in self.taken)
        outside = x0 < self.room[0] or y0 < self.room[1] or x1 > self.room[2] or y1 > self.room[3]
        return float(inside.sum()) + TAKEN_WEIGHT * clashes + OUTSIDE_WEIGHT * outside


def _dense(line: Floats, step: float) -> Floats:
    """Points along a polyline at even steps."""
    along = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(line, axis=0).T))])
    even = np.arange(0.0, along[-1] + step, step)
    return np.column_stack([np.interp(even, along, line[:, axis]) for axis in (0, 1)])
