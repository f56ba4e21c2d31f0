"""How far the plot reaches: the grid lines of each axis end at the frame, in the other axis's direction."""

import numpy as np

from curvelab.axes.paths import Look
from curvelab.axes.pattern import Range
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

MOST_LINES = 24
"""Lines looked at; those with most room beside them."""

THERE = 0.4
"""Share, of what is dark inside the plot, that must be dark for the plot to go on."""

RUN = 16
"""Pixels over which darkness is averaged: more than a dash and the frame, less than a tick label."""

CROSSING = 3
"""Pixels over which a crossing line hides that the others go on."""

PAPER = (-5, -4, 4, 5)
INK = (-1, 0, 1)
LEAST_CONTRAST = 2.0
AT_LINE = 4.0
"""Pixels within which the plot's end is taken to be the line found there."""


def covered_range(look: Look, plane: PlaneMap, scaled: Floats, others: Floats, seed: Range) -> Range:
    """Scaled range of the *other* axis over which lines run.

    Parameters
    ----------
    look : Look
    plane : PlaneMap
    scaled : array, rising
        Lines of the looked-at axis that were found.
    others : array
        Lines of the other axis that were found; an end near one is that line.
    seed : (float, float)
        Scaled range of the other axis that certainly lies in the plot.
    """
    dark, other = _followed(look, plane, _roomy(look, plane, scaled))
    inside = (other >= min(seed)) & (other <= max(seed))
    usual = np.array(
        [np.median(row[within]) if within.any() else 0.0 for row, within in zip(dark, inside, strict=True)]
    )
    # Means, not extremes: noise then cancels where there is no line.
    strength = np.clip(dark / np.maximum(usual, LEAST_CONTRAST)[:, None], -1.0, 1.5)
    step = abs(float(np.median(np.diff(other, axis=1))))
    lowest = float(other.min())
    bins = np.floor((other - lowest) / step).astype(np.int64).ravel()
    share = np.bincount(bins, strength.ravel()) / np.maximum(np.bincount(bins), 1)
    first, last = (int(np.clip((value - lowest) / step, 0, len(share) - 1)) for value in (min(seed), max(seed)))
    ends = _ends(share, first, last)
    found = [lowest + (ends[0] + 0.5) * step, lowest + (ends[1] + 0.5) * step]
    for k in (0, 1):
        near = np.abs(others - found[k]) if len(others) else np.array([np.inf])
        if near.min() <= AT_LINE * step:
            found[k] = float(others[int(np.argmin(near))])
    return found[0], found[1]


def _roomy(look: Look, plane: PlaneMap, scaled: Floats) -> Floats:
    """The lines with most room beside them, in order."""
    across = look.paths(plane, scaled, np.array([plane.centre[1 - look.across]]))[:, 0]
    spacing = np.abs(np.diff(across))
    room = np.minimum(np.append(spacing, np.inf), np.insert(spacing, 0, np.inf))
    return scaled[np.sort(np.argsort(-room, kind="stable")[:MOST_LINES])]


def _followed(look: Look, plane: PlaneMap, scaled: Floats) -> tuple[Floats, Floats]:
    """Contrast of each line in every row of the image, and the other axis's scaled value there."""
    height, width = look.image.shape
    rows = np.arange(height)
    paths = look.paths(plane, scaled, rows[::64].astype(np.float64))
    paths = np.stack([np.interp(rows, rows[::64], path) for path in paths])
    other = plane.scaled(look.places(paths, rows.astype(np.float64)).reshape(-1, 2))[:, 1 - look.axis]
    columns = np.rint(paths).astype(np.int64)
    ink, paper = (
        look.image[rows[None, :, None], np.clip(columns[..., None] + np.array(part), 0, width - 1)].astype(np.float64)
        for part in (INK, PAPER)
    )
    dark = paper.mean(axis=-1) - ink.mean(axis=-1)
    dark[(columns < 0) | (columns >= width)] = 0.0
    return dark, other.reshape(paths.shape)


def _ends(share: Floats, first: int, last: int) -> tuple[int, int]:
    """First and last bin of the plot about the bins ``first`` to ``last``."""
    usual = float(np.median(share[first : last + 1]))
    least = THERE * usual

    def stop(start: int, step: int) -> int:
        # The mean of the run that lies ahead tells whether the lines go on; then pixel by pixel to the very end, over
        # the width of a line that crosses there.
        k = start
        while 0 <= k + step < len(share) and _ahead(share, k, step) >= least:
            k += step
        while 0 <= k - step < len(share) and share[k] < least:
            k -= step
        for _ in range(RUN):
            ahead = [j for j in range(k + step, k + step * (CROSSING + 2), step) if 0 <= j < len(share)]
            more = [j for j in ahead if share[j] >= least]
            if not more:
                break
            k = more[0]
        return k

    return stop(first, -1), stop(last, 1)


def _ahead(share: Floats, k: int, step: int) -> float:
    part = share[k : k + RUN] if step > 0 else share[max(k - RUN + 1, 0) : k + 1]
    return float(part.sum()) / RUN
