"""Grid lines measured sub-pixel on untouched grey levels, once a map predicts them to about a pixel.

Along each line the image is looked at in stations, short enough that the line hardly moves across within one. The
rows of a station where a line of the other axis crosses are left out, the rest are averaged, and the stroke's centre
is fitted to the mean profile. Stations off the line's own straight line, or of another stroke (a curve that runs
along the grid line, lettering), are left out.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.paths import Look
from curvelab.axes.straight import agreeing
from curvelab.axes.stroke import Centres, Shape, darkest_places, fit_centres, fit_shape
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

CLASS_RATIO = 1.5
"""Lines whose strokes differ by more in ink per length are of different classes."""

SHAPE_PROFILES = 64
BLURS = (0.5, 0.05)
"""Where the fit of a stroke's shape starts: as a scan blurs, and as area coverage draws."""

PLACES = 10
"""Places that a measured line is summarised by."""

LEAST_SPREAD = 0.01
"""Pixels: stations are never believed to scatter less."""

NEAR = 1.5
"""Pixels by which a line may lie off its prediction."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Measured:
    """A line measured: its scaled value, a few places on the image and the standard deviation of each across.

    ``width`` is in pixels, ``darkness`` the contrast from 0 to 1.
    """

    scaled: float
    points: Floats
    sd: float
    width: float
    darkness: float


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Stations:
    """Mean profiles of stations, shape (n, 2 WIDEST + 1), about whole columns; of which line and where along.

    ``path`` is where the line was predicted.
    """

    profiles: Floats
    line: NDArray[np.int64]
    column: Floats
    along: Floats
    path: Floats

    def where(self, which: NDArray[np.bool_]) -> "_Stations":
        return _Stations(
            profiles=self.profiles[which],
            line=self.line[which],
            column=self.column[which],
            along=self.along[which],
            path=self.path[which],
        )


def measure_lines(
    look: Look, plane: PlaneMap, scaled: Floats, others: Floats, covered: tuple[float, float]
) -> list[Measured]:
    """Measure lines that are there.

    Parameters
    ----------
    look : Look
    plane : PlaneMap
        Predicts the lines to about a pixel.
    scaled : array, rising
        Lines to measure.
    others : array
        Lines of the other axis, which cross.
    covered : (float, float)
        Scaled range of the other axis that the plot covers.
    """
    if not len(scaled):
        return []
    stations = _taken(look, plane, scaled, others, covered)
    half = _half_widths(look, plane, scaled, covered)
    shapes, group = _classes(stations, half, len(scaled))
    measured = []
    for k, shape in enumerate(shapes):
        for width in np.unique(half[group == k]):
            mine = (group == k) & (half == width)
            part = stations.where(mine[stations.line])
            centres = _fitted(part, int(width), shape)
            for line in np.flatnonzero(mine):
                result = _line(look, part, centres, shape, int(line), float(scaled[line]))
                if result is not None:
                    measured.append(result)
    return sorted(measured, key=lambda line: line.scaled)


def _taken(look: Look, plane: PlaneMap, scaled: Floats, others: Floats, covered: tuple[float, float]) -> _Stations:
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
    return _Stations(
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


def _half_widths(look: Look, plane: PlaneMap, scaled: Floats, covered: tuple[float, float]) -> NDArray[np.int64]:
    """Half width of each line's window, so that it does not reach the next line."""
    middle = look.crossings(plane, scaled, np.array([0.5 * sum(covered)])).mean()
    spacing = np.abs(np.diff(look.paths(plane, scaled, np.array([middle]))[:, 0]))
    room = np.minimum(np.append(spacing, np.inf), np.insert(spacing, 0, np.inf))
    half: NDArray[np.int64] = np.clip(np.floor(np.minimum(room, 99.0) - 2.5), NARROWEST, WIDEST).astype(np.int64)
    return half


def _fitted(stations: _Stations, half: int, shape: Shape) -> Centres:
    offsets = np.arange(-half, half + 1.0)
    profiles = stations.profiles[:, WIDEST - half : WIDEST + half + 1]
    start = darkest_places(profiles, offsets, stations.path - stations.column, NEAR + 0.5)
    return fit_centres(profiles, offsets, shape, start)


def _classes(stations: _Stations, half: NDArray[np.int64], lines: int) -> tuple[list[Shape], NDArray[np.int64]]:
    """Stroke shapes of the classes of lines, and the class of each line, told by ink per length."""
    ink = np.full(lines, np.nan)
    for line in range(lines):
        mine = stations.line == line
        if mine.any():
            ink[line] = np.median(_ink(stations.profiles[mine], int(half[line])))
    order = np.argsort(ink)
    jumps = np.diff(np.log(np.maximum(ink[order], 1.0))) > np.log(CLASS_RATIO)
    group = np.zeros(lines, dtype=np.int64)
    group[order] = np.concatenate([[0], np.cumsum(jumps)])
    shapes = [_shape(stations, half, group == k) for k in range(int(group.max()) + 1)]
    return shapes, group


def _ink(profiles: Floats, half: int) -> Floats:
    """Grey levels times pixels by which a window is darker than its lightest edge."""
    window = profiles[:, WIDEST - half : WIDEST + half + 1]
    ink: Floats = np.sum(np.maximum(np.maximum(window[:, 0], window[:, -1])[:, None] - window, 0.0), axis=1)
    return ink


def _shape(stations: _Stations, half: NDArray[np.int64], mine: NDArray[np.bool_]) -> Shape:
    """The stroke shape of a class, from its usual stations."""
    narrow = int(half[mine].min())
    part = stations.where(mine[stations.line])
    ink = _ink(part.profiles, narrow)
    usual = np.flatnonzero(np.abs(np.log(np.maximum(ink, 1.0) / max(float(np.median(ink)), 1.0))) < np.log(1.25))
    chosen = np.zeros(len(ink), dtype=bool)
    chosen[usual[:: max(1, len(usual) // SHAPE_PROFILES)]] = True
    part = part.where(chosen)
    darkest = max(float(np.median(np.ptp(part.profiles, axis=1))), 1.0) if chosen.any() else 1.0
    width = float(np.clip(np.median(ink) / darkest, 1.0, 2 * narrow - 2))
    starts = [Shape(width=width, blur=blur, amplitude=darkest) for blur in BLURS]
    if np.sum(chosen) < 5:
        return starts[0]
    centres = _fitted(part, narrow, starts[0])
    good = centres.misfit <= 2.5 * np.median(centres.misfit) + 0.5
    profiles = part.profiles[good, WIDEST - narrow : WIDEST + narrow + 1]
    offsets = np.arange(-narrow, narrow + 1.0)
    fits = [fit_shape(profiles, offsets, start, _fitted(part.where(good), narrow, start).centre) for start in starts]
    return min(fits, key=lambda fit: fit[1])[0]


def _line(look: Look, stations: _Stations, centres: Centres, shape: Shape, line: int, scaled: float) -> Measured | None:
    """One line's places from its stations; None where too few agree."""
    mine = np.flatnonzero(stations.line == line)
    across = stations.column[mine] + centres.centre[mine]
    offset = across - stations.path[mine]
    amplitude = centres.amplitude[mine]
    usual = float(np.median(amplitude))
    good = (np.abs(offset) <= NEAR) & (amplitude > 0.5 * usual) & (amplitude < 1.6 * usual)
    good &= centres.misfit[mine] <= 2.5 * np.median(centres.misfit[mine]) + 0.02 * usual
    if len(mine) < 4 or usual < 2.0 or np.sum(good) < max(4, 0.3 * len(mine)):
        return None
    along = stations.along[mine]
    good, scatter = agreeing(along, offset, good, LEAST_SPREAD)
    if np.sum(good) < 4:
        return None
    groups = [part for part in np.array_split(np.flatnonzero(good), min(PLACES, int(np.sum(good)))) if len(part)]
    mean = np.array([[offset[part].mean(), stations.path[mine][part].mean(), along[part].mean()] for part in groups])
    points = look.places(mean[:, 0] + mean[:, 1], mean[:, 2])
    paper = float(np.median(centres.paper[mine][good]))
    return Measured(
        scaled=scaled,
        points=points,
        sd=scatter / np.sqrt(np.sum(good) / len(groups)),
        width=shape.width,
        darkness=float(np.clip(usual / max(paper, 1.0), 0.0, 1.0)),
    )
