"""Stations along predicted grid lines: short stretches whose mean profile across is measured.

A station is short enough that its line hardly moves across within it; rows where a line of the other axis crosses are
left out.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.paths import Look
from curvelab.axes.pattern import Range
from curvelab.axes.stroke import Centres, Shape, darkest_places, fit_centres
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

STATION = 16
MOST_STATIONS = 96
LEAST_ROWS = 4
WIDEST = 7
"""Half width of the window across, in pixels."""

NARROWEST = 3
CROSSING_MARGIN = 3.0
"""Pixels on either side of a crossing line that are left out."""

NEAR = 1.5
"""Pixels by which a line may lie off its prediction."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Stations:
    """Mean profiles of stations, shape (n, 2 WIDEST + 1), about whole columns; of which line and where along.

    ``path`` is where the line was predicted.
    """

    profiles: Floats
    line: NDArray[np.int64]
    column: Floats
    along: Floats
    path: Floats

    def window(self, half: int) -> Floats:
        """The profiles within ``half`` pixels of the middle."""
        return self.profiles[:, WIDEST - half : WIDEST + half + 1]

    def where(self, which: NDArray[np.bool_]) -> "Stations":
        """Some of them."""
        return Stations(
            profiles=self.profiles[which],
            line=self.line[which],
            column=self.column[which],
            along=self.along[which],
            path=self.path[which],
        )


def taken_stations(look: Look, plane: PlaneMap, scaled: Floats, others: Floats, covered: Range) -> Stations:
    """Stations along every line inside the plot, without the rows where other lines cross."""
    height, width = look.image.shape
    ends = np.sort(look.crossings(plane, scaled, np.array(covered)), axis=1)
    first, last = max(float(ends.min()), 0.0), min(float(ends.max()), height - 1.0)
    step = max(STATION, int(np.ceil((last - first) / MOST_STATIONS)))
    tops = np.arange(int(np.ceil(first)), int(last) - STATION + 2, step)
    middles = (tops + (STATION - 1) / 2).astype(np.float64)
    path = look.paths(plane, scaled, middles)
    line, station = np.nonzero(
        (tops[None, :] >= ends[:, :1])
        & (tops[None, :] + STATION - 1 <= ends[:, 1:])
        & (path >= WIDEST)
        & (path <= width - 1 - WIDEST)
    )
    path = path[line, station]
    column = np.rint(path).astype(np.int64)
    rows = tops[station][:, None] + np.arange(STATION)
    clear = _clear_rows(look, plane, scaled, others, height)[line[:, None], rows].astype(np.float32)
    window = look.image[rows[:, :, None], column[:, None, None] + np.arange(-WIDEST, WIDEST + 1)]
    count = clear.sum(axis=1)
    profiles = np.einsum("nrk,nr->nk", window, clear, dtype=np.float32) / np.maximum(count, 1)[:, None]
    enough = count >= LEAST_ROWS
    along = np.sum(clear * rows, axis=1) / np.maximum(count, 1)
    # The mean row of those left is where the profile belongs; the prediction moves with it.
    lean = np.gradient(look.paths(plane, scaled, middles), middles, axis=1)[line, station]
    path = path + lean * (along - middles[station])
    return Stations(
        profiles=profiles.astype(np.float64), line=line, column=column.astype(np.float64), along=along, path=path
    ).where(enough)


def _clear_rows(look: Look, plane: PlaneMap, scaled: Floats, others: Floats, height: int) -> NDArray[np.bool_]:
    """Rows of each line, shape (lines, height), that no line of the other axis crosses."""
    covered = np.zeros((len(scaled), height + 1), dtype=np.int64)
    if len(others):
        along = look.crossings(plane, scaled, others)
        line = np.repeat(np.arange(len(scaled)), len(others))
        start = np.clip(np.ceil(along - CROSSING_MARGIN), 0, height).astype(np.int64).ravel()
        stop = np.clip(np.floor(along + CROSSING_MARGIN) + 1, 0, height).astype(np.int64).ravel()
        np.add.at(covered, (line, start), 1)
        np.add.at(covered, (line, stop), -1)
    clear: NDArray[np.bool_] = np.cumsum(covered, axis=1)[:, :height] == 0
    return clear


def half_widths(look: Look, plane: PlaneMap, scaled: Floats, covered: Range) -> NDArray[np.int64]:
    """Half width of each line's window, so that it does not reach the next line."""
    middle = look.crossings(plane, scaled, np.array([0.5 * sum(covered)])).mean()
    spacing = np.abs(np.diff(look.paths(plane, scaled, np.array([middle]))[:, 0]))
    room = np.minimum(np.append(spacing, np.inf), np.insert(spacing, 0, np.inf))
    half: NDArray[np.int64] = np.clip(np.floor(np.minimum(room, 99.0) - 2.5), NARROWEST, WIDEST).astype(np.int64)
    return half


def fitted_stations(stations: Stations, half: int, shape: Shape) -> Centres:
    """The stroke fitted to each station's window; centres count from its column."""
    offsets = np.arange(-half, half + 1.0)
    profiles = stations.window(half)
    start = darkest_places(profiles, offsets, stations.path - stations.column, NEAR + 0.5)
    return fit_centres(profiles, offsets, shape, start)
