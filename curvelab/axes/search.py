"""Lines looked for near where a rough map has them, good to a fraction of a pixel: enough to refine the map."""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.paths import Look
from curvelab.axes.straight import near_straight
from curvelab.axes.strips import Strips
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

FAINT = 0.35
"""Share of a line's usual darkness below which it is not there."""

LEAST_DARK = 2.0
"""Grey levels by which a line is darker than the paper at least."""

ABOVE_NOISE = 3.0
"""The same in standard deviations of the paper's noise; the darkest of a few pixels is rarely above."""

STRAIGHT = 1.0
"""Pixels by which the strips of a line may leave its own straight line."""

PLACES = 10
"""Places that a line is summarised by."""

LEAST_STRIPS = 4
LEAST_SHARE = 0.4


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Found:
    """A line found: its scaled value, places on the image, and how much darker than the paper it is."""

    scaled: float
    points: Floats
    dark: float


def search_lines(look: Look, strips: Strips, plane: PlaneMap, scaled: Floats, reach: float) -> list[Found]:
    """Lines clearly darker than the paper within ``reach`` pixels of their predicted paths."""
    if not len(scaled):
        return []
    paths = look.paths(plane, scaled, strips.along)
    spacing = np.abs(np.diff(paths.mean(axis=1)))
    room = np.minimum(np.append(spacing, np.inf), np.insert(spacing, 0, np.inf))
    least = max(LEAST_DARK, ABOVE_NOISE * strips.noise)
    across, dark = _darkest(strips, paths, np.minimum(reach, 0.45 * room))
    good = dark > np.maximum(least, FAINT * np.median(dark, axis=1))[:, None]
    good &= near_straight(strips.along, across - paths, good, STRAIGHT)
    enough = good.sum(axis=1) >= max(LEAST_STRIPS, LEAST_SHARE * paths.shape[1])
    return [
        Found(
            scaled=float(scaled[k]),
            points=_summary(look.places(across[k, good[k]], strips.along[good[k]])),
            dark=float(np.median(dark[k, good[k]])),
        )
        for k in np.flatnonzero(enough)
    ]


def _darkest(strips: Strips, paths: Floats, reach: Floats) -> tuple[Floats, Floats]:
    """Place and darkness of the darkest pixel near each path in each strip, refined by a parabola; shapes (n, m).

    A pixel at the window's end that leads up to something darker outside belongs to another line: darkness 0.
    """
    width = strips.dark.shape[1]
    widest = int(np.ceil(reach.max()))
    window = np.arange(-widest, widest + 1)
    columns = np.clip(np.rint(paths).astype(np.int64)[..., None] + window, 1, width - 2)
    rows = np.arange(paths.shape[1])
    levels = strips.dark[rows[None, :, None], columns]
    levels = np.where(np.abs(window) <= np.ceil(reach)[:, None, None], levels, -np.inf)
    best = np.take_along_axis(columns, np.argmax(levels, axis=2)[..., None], axis=2)[..., 0]
    left, top, right = (strips.dark[rows, best + k].astype(np.float64) for k in (-1, 0, 1))
    peak = (top >= left) & (top >= right) & (left + right < 2 * top)
    shift = 0.5 * (left - right) / np.where(peak, left - 2 * top + right, 1.0)
    return np.where(peak, best + shift, paths), np.where(peak, top, 0.0)


def _summary(points: Floats) -> Floats:
    """Means of neighbouring places, a few for the whole line."""
    return np.array([part.mean(axis=0) for part in np.array_split(points, min(PLACES, len(points)))])
