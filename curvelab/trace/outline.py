"""Filled shapes of a vector page: a thin one is a stroke turned into its outline, a wide one has edges."""

import numpy as np

from curvelab.records.arrays import Floats

WIDEST_STROKE = 5.0
"""pt: a filled shape thinner than this is a line."""
SLENDER = 8.0
"""Least length of a line in widths."""


def mean_width(outline: Floats) -> float:
    """Width of the rectangle of the outline's area and perimeter."""
    x, y = outline[:, 0], outline[:, 1]
    area = 0.5 * abs(float(np.dot(x, np.roll(y, -1)) - np.dot(y, np.roll(x, -1))))
    perimeter = float(np.hypot(*(np.roll(outline, -1, axis=0) - outline).T).sum())
    half = 0.5 * perimeter
    return 0.5 * (half - float(np.sqrt(max(half**2 - 4.0 * area, 0.0))))


def is_line(outline: Floats) -> bool:
    """Whether a filled outline is a line drawn as a shape."""
    width = mean_width(outline)
    perimeter = float(np.hypot(*(np.roll(outline, -1, axis=0) - outline).T).sum())
    return bool(0.0 < width < WIDEST_STROKE and perimeter > 2.0 * SLENDER * width)


def middle_line(outline: Floats) -> Floats:
    """Middle line of a thin outline: midpoints between each point of one side and the nearest of the other."""
    one, two = _sides(outline)
    middles = np.concatenate([_midpoints(one, two), _midpoints(two, one)])
    run = np.concatenate([_share(one), _share(two)])
    order = np.argsort(run, kind="stable")
    result: Floats = middles[order]
    return result


def _share(side: Floats) -> Floats:
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(side, axis=0).T))]
    share: Floats = run / max(run[-1], 1e-12)
    return share


def _sides(outline: Floats) -> tuple[Floats, Floats]:
    """Both sides from end to end: the split at which points at equal shares of their length lie closest."""
    closed = np.concatenate([outline, outline[:1]])
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(closed, axis=0).T))]
    total = run[-1]
    shares = np.linspace(0.0, 1.0, 41)

    def at(arc: Floats) -> Floats:
        return np.stack([np.interp(arc % total, run, closed[:, k]) for k in (0, 1)], axis=1)

    starts = np.linspace(0.0, 0.5 * total, 401)
    spread = [np.hypot(*(at(s + shares * total / 2) - at(s - shares * total / 2)).T).mean() for s in starts]
    start = float(starts[int(np.argmin(spread))])
    dense = np.unique(np.r_[(run - start) % total, 0.0, total / 2])
    one = dense[dense <= total / 2]
    two = dense[dense >= total / 2]
    return at(start + one), at(start + two)[::-1]


def _midpoints(side: Floats, other: Floats) -> Floats:
    starts, steps = other[:-1], np.diff(other, axis=0)
    lengths = np.maximum((steps**2).sum(axis=1), 1e-18)
    result = np.empty_like(side)
    for k, point in enumerate(side):
        part = np.clip(((point - starts) * steps).sum(axis=1) / lengths, 0.0, 1.0)
        feet = starts + part[:, None] * steps
        result[k] = 0.5 * (point + feet[int(((feet - point) ** 2).sum(axis=1).argmin())])
    return result
