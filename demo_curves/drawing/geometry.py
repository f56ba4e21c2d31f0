"""Cutting polylines at boxes, hatching polygons, and measuring along lines."""

from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

Box = tuple[float, float, float, float]
Points = NDArray[np.float64]


def lengths(points: Points) -> Points:
    """Length along the polyline at each vertex."""
    return np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])


def at_length(points: Points, along: Points) -> Points:
    """Points at given lengths along the polyline, (n, 2)."""
    measured = lengths(points)
    return np.column_stack([np.interp(along, measured, points[:, axis]) for axis in (0, 1)])


def densified(points: Points, step: float) -> Points:
    """The polyline with further vertices, no more than `step` apart; its own vertices stay."""
    pieces = []
    for start, end in pairwise(points):
        count = max(1, int(np.ceil(np.hypot(*(end - start)) / step)))
        pieces.append(start + (end - start) * (np.arange(count) / count)[:, None])
    return np.vstack([*pieces, points[-1:]])


def _inside_share(start: Points, end: Points, box: Box) -> tuple[float, float] | None:
    """The shares of a segment between which it lies in the box (Liang-Barsky), or None."""
    first, last = 0.0, 1.0
    delta = end - start
    for axis in (0, 1):
        low, high = box[axis] - start[axis], box[axis + 2] - start[axis]
        if delta[axis] == 0.0:
            if low > 0 or high < 0:
                return None
            continue
        near, far = sorted((low / delta[axis], high / delta[axis]))
        first, last = max(first, near), min(last, far)
    return (first, last) if first < last else None


def clipped(points: Points, box: Box) -> list[Points]:
    """The runs of a polyline that lie inside a box."""
    runs: list[list[Points]] = []
    open_run = False
    for start, end in pairwise(points):
        share = _inside_share(start, end, box)
        if share is None:
            open_run = False
            continue
        enter, leave = (start + (end - start) * part for part in share)
        if open_run and share[0] == 0.0:
            runs[-1].append(leave)
        else:
            runs.append([enter, leave])
        open_run = share[1] == 1.0
    return [np.array(run) for run in runs]


def split_at_boxes(points: Points, boxes: list[Box]) -> tuple[Points, NDArray[np.bool_]]:
    """The polyline with vertices added where it enters or leaves a box, and whether each segment is outside all."""
    vertices = [points[:1]]
    for start, end in pairwise(points):
        shares = {part for box in boxes for part in (_inside_share(start, end, box) or ())}
        cuts = sorted(share for share in shares if 1e-9 < share < 1 - 1e-9)
        vertices.append(np.array([start + (end - start) * share for share in [*cuts, 1.0]]))
    split = np.vstack(vertices)
    middle = (split[:-1] + split[1:]) / 2
    hidden = np.zeros(len(middle), dtype=bool)
    for left, top, right, bottom in boxes:
        hidden |= (middle[:, 0] > left) & (middle[:, 0] < right) & (middle[:, 1] > top) & (middle[:, 1] < bottom)
    return split, ~hidden


def hatching(polygon: Points, spacing: float, angle_deg: float = 45.0) -> list[Points]:
    """Parallel segments `spacing` apart inside a polygon (even-odd rule)."""
    turn = np.deg2rad(angle_deg)
    rotation = np.array([[np.cos(turn), np.sin(turn)], [-np.sin(turn), np.cos(turn)]])
    turned = polygon @ rotation.T
    ends = np.roll(turned, -1, axis=0)
    segments = []
    for level in np.arange(turned[:, 1].min() + spacing / 2, turned[:, 1].max(), spacing):
        crosses = (turned[:, 1] <= level) != (ends[:, 1] <= level)
        share = (level - turned[crosses, 1]) / (ends[crosses, 1] - turned[crosses, 1])
        across = np.sort(turned[crosses, 0] + share * (ends[crosses, 0] - turned[crosses, 0]))
        for left, right in zip(across[::2], across[1::2], strict=True):
            segments.append(np.array([[left, level], [right, level]]) @ rotation)
    return segments
