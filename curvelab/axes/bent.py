"""A first map of a page seen at an angle and curled: marks all over the plot, then lines followed strip by strip."""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.comb import Ruler
from curvelab.axes.marks import CLICK_SD, fitted_ruler, mark_values
from curvelab.axes.models import RICHER, Model
from curvelab.axes.paths import Look
from curvelab.axes.pattern import MAIN, linear_lines, log_lines
from curvelab.axes.planefit import Line, Scatter, fit_plane
from curvelab.axes.strips import Strips
from curvelab.axes.tracks import track_places
from curvelab.errors import AxesError
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis, PlaneMap

FANNED = (Model(projective=True, powers=(), lines=4),)
MARK_SCATTER = Scatter(lines=(CLICK_SD, CLICK_SD), place=CLICK_SD)
PIECE_SCATTER = Scatter(lines=(0.1, 0.1), place=0.3)

LEAST_STRIPS = 10
"""Strips in which a piece must be seen to shape the map."""

FURTHEST = 10.0
"""Pixels from where the marks have its line at which a piece is taken for it, at most; curl moves lines by some."""

ROOM = 0.3
"""The same as a share of the gap to the next line."""

PLACES = 10


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Sighted:
    """One axis on the image: its marks as (column, row), shape (n, 2), and strips of the whole image."""

    axis: Axis
    look: Look
    marks: Floats
    strips: Strips

    @property
    def ruler(self) -> Ruler:
        """Through the marks."""
        return fitted_ruler(self.marks[:, self.look.across], mark_values(self.axis))

    @property
    def lines(self) -> Floats:
        """Scaled values of the main lines between the outermost marks."""
        values = np.sort(mark_values(self.axis))
        ends = (float(values[0]) - 1e-9, float(values[-1]) + 1e-9)
        if self.axis.scale == "log":
            return log_lines(self.axis, ends, MAIN)
        return linear_lines(self.axis, ends, self.step)

    @property
    def step(self) -> float:
        """Step of a linear axis in its printed unit, as its marks have it; 0 on a log axis."""
        if self.axis.scale == "log":
            return 0.0
        printed = np.sort([mark.value for mark in self.axis.marks])
        return float(np.diff(printed).min())


def bent_plane(start: PlaneMap, sighted: tuple[Sighted, Sighted]) -> PlaneMap | None:
    """The map of a page whose marks say that it was seen at an angle; None where they do not.

    Parameters
    ----------
    start : PlaneMap
        Affine, through the marks.
    sighted : (Sighted, Sighted)
    """
    marks = [
        Line(axis=k, scaled=float(scaled), points=place[None, :])
        for k, each in enumerate(sighted)
        for scaled, place in zip(mark_values(each.axis), each.marks, strict=True)
    ]
    try:
        plane = fit_plane(start, marks, MARK_SCATTER, (), FANNED).map
    except AxesError:
        return None
    if not plane.projective[6:].any():
        return None
    pieces = [line for each in sighted for line in _pieces(plane, each)]
    if min(len({line.scaled for line in pieces if line.axis == k}) for k in (0, 1)) < FANNED[0].lines:
        return plane
    return fit_plane(plane, pieces, PIECE_SCATTER, (), RICHER).map


def _pieces(plane: PlaneMap, sighted: Sighted) -> list[Line]:
    """Pieces of the lines that the map foresees, by a few places each."""
    k, known = sighted.look.axis, sighted.lines
    if len(known) < 2:
        return []
    found = []
    for piece in track_places(sighted.strips, LEAST_STRIPS):
        places = sighted.look.places(piece[:, 0], piece[:, 1])
        scaled = float(np.median(plane.scaled(places)[:, k]))
        nearest = int(np.argmin(np.abs(known - scaled)))
        others = np.abs(np.delete(known, nearest) - known[nearest])
        steepness = float(np.median(np.linalg.norm(plane.jacobian(places)[:, k], axis=1)))
        allowed = min(FURTHEST * steepness, ROOM * float(others.min()))
        if abs(known[nearest] - scaled) <= allowed:
            summary = [part.mean(axis=0) for part in np.array_split(places, min(PLACES, len(places)))]
            found.append(Line(axis=k, scaled=float(known[nearest]), points=np.array(summary)))
    return found
