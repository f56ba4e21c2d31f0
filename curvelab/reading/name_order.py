"""How the lines of a plot lie to one another: which of two is left of the other, and labels in the lines' order."""

from collections.abc import Sequence

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.records.trace import Trace

LEVELS = 200


class Order:
    """The lines of a plot, compared at the values they share."""

    def __init__(self, traces: Sequence[Trace], axes: Axes) -> None:
        scaled = [axes.map.scaled(trace.places) for trace in traces]
        self._lines = [_by_value(one, falls=axes.value.quantity == "time") for one in scaled]

    def left_share(self, one: int, other: int) -> float:
        """Share of the values both have at which the first has the smaller current; NaN where they share none."""
        (value_a, current_a), (value_b, current_b) = self._lines[one], self._lines[other]
        low, high = max(value_a[0], value_b[0]), min(value_a[-1], value_b[-1])
        if high <= low:
            return float("nan")
        levels = np.linspace(low, high, LEVELS + 2)[1:-1]
        apart = np.interp(levels, value_a, current_a) - np.interp(levels, value_b, current_b)
        return float(np.mean(apart < 0))

    def sorted(self, members: Sequence[int]) -> list[int]:
        """The lines from the smallest current to the largest."""

        def rank(one: int) -> float:
            shares = [self.left_share(other, one) for other in members if other != one]
            known = [share for share in shares if np.isfinite(share)]
            return float(np.sum(known)) if known else float(np.median(self._lines[one][1]))

        return sorted(members, key=rank)

    def is_left(self, one: int, other: int, least: float = 0.9) -> bool:
        """Whether the first line lies left of the second nearly everywhere."""
        return self.left_share(one, other) >= least


def _by_value(scaled: Floats, *, falls: bool) -> tuple[Floats, Floats]:
    """Value and current along a line, in order of value and made monotone."""
    order = np.lexsort((-scaled[:, 0] if falls else scaled[:, 0], scaled[:, 1]))
    value, current = scaled[order, 1], scaled[order, 0]
    rising = np.maximum.accumulate(value + np.arange(value.size) * 1e-12)
    return rising, current


def monotone_match(gains: Floats) -> dict[int, int]:
    """Which row (labels in order) belongs to which column (lines in order), columns rising with rows.

    The assignment of the largest sum of gains (dynamic programming); -inf where a pair cannot be. Rows and columns may
    be left over.
    """
    rows, columns = gains.shape
    best = np.zeros((rows + 1, columns + 1))
    for row in range(1, rows + 1):
        for column in range(1, columns + 1):
            both = best[row - 1, column - 1] + gains[row - 1, column - 1]
            best[row, column] = max(best[row - 1, column], best[row, column - 1], both)
    match: dict[int, int] = {}
    row, column = rows, columns
    while row and column:
        if best[row, column] == best[row - 1, column]:
            row -= 1
        elif best[row, column] == best[row, column - 1]:
            column -= 1
        else:
            row, column = row - 1, column - 1
            match[row] = column
    return match
