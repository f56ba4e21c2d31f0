"""A page seen at an angle made flat: the map under which the lines of each direction are parallel again.

The lines of a direction meet in one vanishing point; both points span the plane's vanishing line, which the map sends
to infinity (Hartley and Zisserman, Multiple View Geometry, 2nd ed. 2004, section 2.7). Only places of the search are
mapped, never pixels.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.fan import Fan, fanned, parallel
from curvelab.axes.segments import Segments
from curvelab.records.arrays import Floats

LONG = 0.3
"""Share of the longest piece from which on a piece tells the slope of its line."""

PLACE_SD = 0.6
"""Pixels by which places are off in the search."""

FEWEST = 5
"""Long pieces of a direction without which it is taken to be parallel."""

NOTICED = 1.5
"""Pixels by which lines must fan out over the page before it is made flat."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Flattening:
    """flat - centre = (place - centre) / (1 + far . (place - centre)); ``far`` is zero for a page seen straight."""

    centre: Floats
    far: Floats

    @property
    def is_straight(self) -> bool:
        """Whether nothing is moved."""
        return not self.far.any()

    def flat(self, places: Floats) -> Floats:
        """Flat places, shape (n, 2)."""
        offset = places - self.centre
        moved: Floats = self.centre + offset / (1.0 + offset @ self.far)[:, None]
        return moved

    def seen(self, flat: Floats) -> Floats:
        """Places as they are on the page, shape (n, 2), of flat ones."""
        offset = flat - self.centre
        moved: Floats = self.centre + offset / (1.0 - offset @ self.far)[:, None]
        return moved

    def segments(self, segments: Segments, across: int) -> Segments:
        """Pieces on the flat page."""
        if self.is_straight:
            return segments
        middle = 0.5 * (segments.first + segments.last)
        ends = [self._end(segments, along - middle, along, across) for along in (segments.first, segments.last)]
        run = ends[1] - ends[0]
        return Segments(
            across=0.5 * (ends[0] + ends[1])[:, across],
            first=ends[0][:, 1 - across],
            last=ends[1][:, 1 - across],
            lean=run[:, across] / run[:, 1 - across],
            width=segments.width,
            darkness=segments.darkness,
        )

    def _end(self, segments: Segments, run: Floats, along: Floats, across: int) -> Floats:
        place = segments.across + segments.lean * run
        return self.flat(np.stack([place, along] if across == 0 else [along, place], axis=1))


def flattening(upright: Segments, level: Segments, size: tuple[float, float]) -> Flattening:
    """The map of a page from the slopes of its long pieces."""
    centre = 0.5 * np.array(size)
    first, second = _fan(upright, centre, 0), _fan(level, centre, 1)
    by_across, by_down = first.growth, second.growth
    if max(abs(by_across), abs(by_down)) * 0.25 * size[0] * size[1] < NOTICED:
        return Flattening(centre=centre, far=np.zeros(2))
    below = 1.0 - first.slope * second.slope
    far = np.array([by_down - by_across * second.slope, by_across - first.slope * by_down]) / below
    return Flattening(centre=centre, far=far)


def _fan(segments: Segments, centre: Floats, across: int) -> Fan:
    """How the long pieces lean, places counted from the page's centre."""
    long = segments.where(segments.length >= LONG * segments.length.max(initial=0.0))
    at = long.across - long.lean * (0.5 * (long.first + long.last) - centre[1 - across]) - centre[across]
    if len(at) < FEWEST:
        return parallel(long.lean, long.length, PLACE_SD)
    return fanned(at, long.lean, long.length, PLACE_SD)
