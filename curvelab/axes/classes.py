"""Classes of grid lines by their stroke: minor, major, frame; one shape each."""

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.stations import Stations, fitted_stations
from curvelab.axes.stroke import Shape, fit_shape
from curvelab.axes.widths import settled_width
from curvelab.records.arrays import Floats

CLASS_RATIO = 1.5
"""Lines whose strokes differ by more in ink per length are of different classes."""

SHAPE_PROFILES = 64
BLURS = (0.5, 0.05)
"""Where the fit of a stroke's shape starts: as a scan blurs, and as area coverage draws."""


def stroke_classes(
    stations: Stations, half: NDArray[np.int64], scaled: Floats
) -> tuple[list[Shape], NDArray[np.int64]]:
    """Stroke shapes of the classes of lines, and the class of each line, told by ink per length.

    Parameters
    ----------
    stations : Stations
    half : array, shape (lines,)
        Half width of each line's window.
    scaled : array, shape (lines,)
    """
    lines = len(scaled)
    ink = np.full(lines, np.nan)
    for line in range(lines):
        mine = stations.line == line
        if mine.any():
            ink[line] = np.median(_ink(stations.where(mine).window(int(half[line]))))
    order = np.argsort(ink)
    jumps = np.diff(np.log(np.maximum(ink[order], 1.0))) > np.log(CLASS_RATIO)
    group = np.zeros(lines, dtype=np.int64)
    group[order] = np.concatenate([[0], np.cumsum(jumps)])
    shapes = []
    for k in range(int(group.max()) + 1):
        shape = _shape(stations, half, group == k)
        shapes.append(_settled(stations, shape, int(half[group == k].min()), np.flatnonzero(group == k), scaled))
    return shapes, group


def _settled(stations: Stations, shape: Shape, half: int, members: NDArray[np.intp], scaled: Floats) -> Shape:
    """The shape with its width settled by where the class's lines lie, one profile of each."""
    chosen = []
    for line in members:
        mine = np.flatnonzero(stations.line == line)
        if len(mine):
            # The station nearest the line's usual profile: none that something else crosses.
            window = stations.profiles[mine]
            chosen.append(mine[np.argmin(np.sum((window - np.median(window, axis=0)) ** 2, axis=1))])
    part = stations.where(np.isin(np.arange(len(stations.line)), chosen))
    offsets = np.arange(-half, half + 1.0)
    return settled_width(shape, part.window(half), offsets, part.path - part.column, scaled[part.line])


def _ink(window: Floats) -> Floats:
    """Grey levels times pixels by which a window is darker than its lightest edge."""
    ink: Floats = np.sum(np.maximum(np.maximum(window[:, 0], window[:, -1])[:, None] - window, 0.0), axis=1)
    return ink


def _shape(stations: Stations, half: NDArray[np.int64], mine: NDArray[np.bool_]) -> Shape:
    """The stroke shape of a class, from its usual stations."""
    narrow = int(half[mine].min())
    part = stations.where(mine[stations.line])
    ink = _ink(part.window(narrow))
    usual = np.flatnonzero(np.abs(np.log(np.maximum(ink, 1.0) / max(float(np.median(ink)), 1.0))) < np.log(1.25))
    chosen = np.zeros(len(ink), dtype=bool)
    chosen[usual[:: max(1, len(usual) // SHAPE_PROFILES)]] = True
    part = part.where(chosen)
    darkest = max(float(np.median(np.ptp(part.profiles, axis=1))), 1.0) if chosen.any() else 1.0
    width = float(np.clip(np.median(ink) / darkest, 1.0, 2 * narrow - 2))
    starts = [Shape(width=width, blur=blur, amplitude=darkest) for blur in BLURS]
    if np.sum(chosen) < 5:
        return starts[0]
    centres = fitted_stations(part, narrow, starts[0])
    good = centres.misfit <= 2.5 * np.median(centres.misfit) + 0.5
    profiles = part.window(narrow)[good]
    offsets = np.arange(-narrow, narrow + 1.0)
    fits = [
        fit_shape(profiles, offsets, start, fitted_stations(part.where(good), narrow, start).centre) for start in starts
    ]
    return min(fits, key=lambda fit: fit[1])[0]
