"""Strokes are cut where the page clips them, so that no line goes on where none is printed."""

import itertools
from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats, freeze

SLACK = 1e-3
"""Places this far outside still count as inside: a line drawn along the clip's own edge is kept."""

CORNER_SLACK = 1e-4
"""Corners of an upright rectangle agree to this: coordinates in a PDF's interpreter are single precision."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Clip:
    """An area bounded by closed polygons.

    Parameters
    ----------
    corners, nexts : array, shape (n, 2)
        Start and end of each side of all polygons together.
    """

    corners: Floats
    nexts: Floats

    def __post_init__(self) -> None:
        freeze(self, corners=self.corners, nexts=self.nexts)

    @property
    def box(self) -> tuple[Floats, Floats]:
        """Least and greatest x, y."""
        return self.corners.min(axis=0), self.corners.max(axis=0)

    @property
    def is_box(self) -> bool:
        """Whether the area is one upright rectangle."""
        upright = np.min(np.abs(self.nexts - self.corners), axis=1) <= CORNER_SLACK
        bounds = np.stack(self.box, axis=1)
        on_bounds = np.any(np.abs(self.corners[:, :, None] - bounds) <= CORNER_SLACK, axis=2)
        return bool(len(self.corners) in (4, 5) and upright.all() and on_bounds.all())


def clip_of(polygons: list[Floats]) -> Clip:
    """The area bounded by closed polygons, each of shape (n, 2)."""
    return Clip(
        corners=np.concatenate(polygons),
        nexts=np.concatenate([np.roll(polygon, -1, axis=0) for polygon in polygons]),
    )


def pieces_inside(points: Floats, clips: tuple[Clip, ...]) -> list[Floats]:
    """Pieces of a polyline, each of shape (n, 2) with n >= 2, that lie inside every clip."""
    pieces = [points]
    for clip in clips:
        pieces = [part for piece in pieces for part in _inside_one(piece, clip)]
    return pieces


def _inside_one(points: Floats, clip: Clip) -> list[Floats]:
    low, high = clip.box
    if np.any(points.max(axis=0) < low - SLACK) or np.any(points.min(axis=0) > high + SLACK):
        return []
    if not clip.is_box:
        return _joined(points, _spans_in_area(points, clip))
    if np.all(points >= low - SLACK) and np.all(points <= high + SLACK):
        return [points]
    return _joined(points, _spans_in_box(points, low - SLACK, high + SLACK))


def _joined(points: Floats, spans: Floats) -> list[Floats]:
    """Polylines of spans, shape (k, 3): number of the side, and the shares of it where the span begins and ends."""
    if len(spans) == 0:
        return []
    side, begin, end = spans[:, 0].astype(int), spans[:, 1:2], spans[:, 2:3]
    along = points[side + 1] - points[side]
    firsts = points[side] + begin * along
    lasts = np.where(end == 1.0, points[side + 1], points[side] + end * along)
    follows = (np.diff(side) == 1) & (end[:-1, 0] == 1.0) & (begin[1:, 0] == 0.0)
    starts = np.flatnonzero(np.concatenate([[True], ~follows]))
    stops = [*starts[1:], len(side)]
    return [np.vstack([firsts[a], lasts[a:b]]) for a, b in zip(starts, stops, strict=True)]


def _spans_in_box(points: Floats, low: Floats, high: Floats) -> Floats:
    """Spans of each side of a polyline inside an upright rectangle (Liang and Barsky 1984)."""
    start, along = points[:-1], np.diff(points, axis=0)
    with np.errstate(divide="ignore", invalid="ignore"):
        to_low, to_high = (low - start) / along, (high - start) / along
    level = along == 0.0
    within = (start >= low) & (start <= high)
    near = np.where(level, np.where(within, -np.inf, np.inf), np.minimum(to_low, to_high))
    far = np.where(level, np.where(within, np.inf, -np.inf), np.maximum(to_low, to_high))
    enter, leave = np.maximum(near.max(axis=1), 0.0), np.minimum(far.min(axis=1), 1.0)
    side = np.flatnonzero(enter < leave)
    return np.stack([side, enter[side], leave[side]], axis=1)


def _spans_in_area(points: Floats, clip: Clip) -> Floats:
    """Spans of each side of a polyline inside polygons, by the even-odd rule."""
    spans = [
        (number, enter, leave)
        for number, (start, end) in enumerate(itertools.pairwise(points))
        for enter, leave in _shares_in_area(start, end, clip)
    ]
    return np.reshape(np.array(spans, dtype=np.float64), (-1, 3))


def _shares_in_area(start: Floats, end: Floats, clip: Clip) -> list[tuple[float, float]]:
    along, sides, offset = end - start, clip.nexts - clip.corners, clip.corners - start
    cross = along[0] * sides[:, 1] - along[1] * sides[:, 0]
    with np.errstate(divide="ignore", invalid="ignore"):
        at = (offset[:, 0] * sides[:, 1] - offset[:, 1] * sides[:, 0]) / cross
        on_side = (offset[:, 0] * along[1] - offset[:, 1] * along[0]) / cross
    hits = at[(cross != 0) & (on_side >= 0) & (on_side <= 1) & (at > 0) & (at < 1)]
    cuts = np.unique(np.concatenate([[0.0], hits, [1.0]]))
    spans: list[tuple[float, float]] = []
    for enter, leave in itertools.pairwise(cuts):
        if not _is_inside(start + (enter + leave) / 2 * along, clip):
            continue
        if spans and spans[-1][1] == enter:
            spans[-1] = (spans[-1][0], float(leave))
        else:
            spans.append((float(enter), float(leave)))
    return spans


def _is_inside(place: Floats, clip: Clip) -> bool:
    (x, y), (x0, y0), (x1, y1) = place, clip.corners.T, clip.nexts.T
    crosses = (y0 > y) != (y1 > y)
    with np.errstate(divide="ignore", invalid="ignore"):
        right = x < x0 + (y - y0) * (x1 - x0) / (y1 - y0)
    return bool(np.count_nonzero(crosses & right) % 2)
