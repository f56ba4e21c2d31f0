"""Grid lines measured sub-pixel on untouched grey levels, once a map predicts them to about a pixel.

The stroke's centre is fitted to the mean profile of each station along a line. Stations off the line's own straight
line, or of another stroke (a curve that runs along the grid line, lettering), are left out.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.classes import stroke_classes
from curvelab.axes.paths import Look
from curvelab.axes.pattern import Range
from curvelab.axes.stations import NEAR, Stations, fitted_stations, half_widths, taken_stations
from curvelab.axes.straight import agreeing
from curvelab.axes.stroke import Centres, Shape
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

PLACES = 10
"""Places that a measured line is summarised by."""

LEAST_SPREAD = 0.01
"""Pixels: stations are never believed to scatter less."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Measured:
    """A line measured: its scaled value, a few places on the image and the standard deviation of each across.

    ``width`` and ``blur`` of the stroke are in pixels, ``darkness`` is the contrast from 0 to 1.
    """

    scaled: float
    points: Floats
    sd: float
    width: float
    blur: float
    darkness: float


def measure_lines(look: Look, plane: PlaneMap, scaled: Floats, others: Floats, covered: Range) -> list[Measured]:
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
    stations = taken_stations(look, plane, scaled, others, covered)
    half = half_widths(look, plane, scaled, covered)
    shapes, group = stroke_classes(stations, half, scaled)
    measured = []
    for k, shape in enumerate(shapes):
        for width in np.unique(half[group == k]):
            mine = (group == k) & (half == width)
            part = stations.where(mine[stations.line])
            centres = fitted_stations(part, int(width), shape)
            for line in np.flatnonzero(mine):
                result = _line(look, part, centres, shape, int(line), float(scaled[line]))
                if result is not None:
                    measured.append(result)
    return sorted(measured, key=lambda line: line.scaled)


def _line(look: Look, stations: Stations, centres: Centres, shape: Shape, line: int, scaled: float) -> Measured | None:
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
        blur=shape.blur,
        darkness=float(np.clip(usual / max(paper, 1.0), 0.0, 1.0)),
    )
