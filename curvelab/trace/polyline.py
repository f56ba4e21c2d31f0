"""Polylines in places: distance to a place, filling in, clipping to the plot."""

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.window import PlotWindow


def distance_to(points: Floats, place: Floats) -> float:
    """Distance from a place to a polyline."""
    return float(np.min(np.hypot(*(nearest_on(points, place) - place).T)))


def nearest_on(points: Floats, place: Floats) -> Floats:
    """Foot of a place on each segment, shape (n - 1, 2)."""
    steps = np.diff(points, axis=0)
    part = ((place - points[:-1]) * steps).sum(axis=1) / np.maximum((steps**2).sum(axis=1), 1e-18)
    feet: Floats = points[:-1] + np.clip(part, 0.0, 1.0)[:, None] * steps
    return feet


def filled_in(points: Floats, spacing: float) -> Floats:
    """The vertices, each once, with points between them so that none lie further apart than the spacing."""
    lengths = np.hypot(*np.diff(points, axis=0).T)
    pieces = [points[:1]]
    for start, end, length in zip(points[:-1], points[1:], lengths, strict=True):
        count = int(np.ceil(length / spacing))
        pieces.append(start + (end - start) * np.arange(1, count + 1)[:, None] / count)
    return np.concatenate(pieces)


def clipped(points: Floats, window: PlotWindow, slack: float) -> list[Floats]:
    """Parts of a polyline inside the plot, cut where it crosses the frame."""
    depth = window.depth(points) + slack
    parts: list[Floats] = []
    current: list[Floats] = []
    for k, point in enumerate(points):
        if k and (depth[k] >= 0) != (depth[k - 1] >= 0):
            share = depth[k - 1] / (depth[k - 1] - depth[k])
            cut = points[k - 1] + share * (point - points[k - 1])
            current.append(cut)
            if depth[k] < 0:
                parts.append(np.array(current))
                current = []
        if depth[k] >= 0:
            current.append(point)
    if current:
        parts.append(np.array(current))
    return [part for part in parts if len(part) > 1]
