"""How far the plot reaches: the grid lines of each axis end at the frame, in the other axis's direction."""

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.paths import Look
from curvelab.axes.pattern import Range
from curvelab.axes.search import FAINT, LEAST_DARK
from curvelab.axes.strips import STRIP, Strips
from curvelab.records.arrays import Floats
from curvelab.records.axes import PlaneMap

THERE = 0.3
"""Share of the lines that must go on for the plot to go on."""

GAP = 3
"""Strips without lines that a plot may have inside: a label, a thick curve along the frame."""


def covered_range(look: Look, strips: Strips, plane: PlaneMap, scaled: Floats, seed: Range) -> Range:
    """Scaled range of the *other* axis over which lines run.

    Parameters
    ----------
    look, strips : Look, Strips
        Strips of the whole image.
    plane : PlaneMap
        Good to a pixel near ``seed``.
    scaled : array
        Lines of the looked-at axis that were found.
    seed : (float, float)
        Scaled range of the other axis that certainly lies in the plot.
    """
    paths = look.paths(plane, scaled, strips.along)
    places = look.places(paths, strips.along).reshape(-1, 2)
    other = plane.scaled(places)[:, 1 - look.axis].reshape(paths.shape)
    dark = _dark_along(strips, paths)
    inside = (other >= min(seed)) & (other <= max(seed))
    usual = np.array([np.median(row[within]) for row, within in zip(dark, inside, strict=True)])
    there = dark > np.maximum(FAINT * usual, LEAST_DARK)[:, None]
    step = abs(float(np.median(np.diff(other, axis=1))))
    bins = np.floor((other - other.min()) / step).astype(np.int64)
    share = np.bincount(bins.ravel(), there.ravel().astype(np.float64)) / np.maximum(np.bincount(bins.ravel()), 1)
    middle = int((0.5 * (seed[0] + seed[1]) - other.min()) / step)
    first, last = _run(share >= THERE, min(max(middle, 0), len(share) - 1))
    rough = (float(other.min() + first * step), float(other.min() + (last + 1) * step))
    return _sharpened(look, plane, scaled[usual > LEAST_DARK], rough, step)


def _dark_along(strips: Strips, paths: Floats) -> Floats:
    width = strips.dark.shape[1]
    columns = np.rint(paths).astype(np.int64)
    rows = np.arange(paths.shape[1])[None, :]
    near = [strips.dark[rows, np.clip(columns + k, 0, width - 1)] for k in (-1, 0, 1)]
    dark = np.max(near, axis=0).astype(np.float64)
    dark[(columns < 0) | (columns >= width)] = 0.0
    return dark


def _run(there: NDArray[np.bool_], middle: int) -> tuple[int, int]:
    """First and last bin of the run about the middle, over gaps of a few bins."""
    places = np.flatnonzero(there)
    if not places.size:
        return middle, middle
    near = int(np.argmin(np.abs(places - middle)))
    breaks = np.diff(places) > GAP + 1
    first = np.flatnonzero(breaks[:near])
    last = np.flatnonzero(breaks[near:])
    return int(places[first[-1] + 1 if first.size else 0]), int(places[near + last[0] if last.size else -1])


def _sharpened(look: Look, plane: PlaneMap, scaled: Floats, rough: Range, step: float) -> Range:
    """Ends to the pixel: the median over the lines of where each of them stops."""
    ends = []
    for end in rough:
        along = look.crossings(plane, scaled, np.array([end]))[:, 0]
        rows = np.rint(along)[:, None] + np.arange(-2 * STRIP, 2 * STRIP + 1)
        outwards = 1.0 if _grows(look, plane, scaled, rows, upper=end == rough[1]) else -1.0
        stops = _stops(look, plane, scaled, rows, outwards)
        if np.isnan(stops).all():
            ends.append(end)
            continue
        known = np.isfinite(stops)
        across = look.paths(plane, scaled[known], stops[known, None])
        other = plane.scaled(look.places(across, stops[known, None]).reshape(-1, 2))[:, 1 - look.axis]
        ends.append(float(np.median(other)) if abs(float(np.median(other)) - end) <= 3 * step else end)
    return min(ends), max(ends)


def _grows(look: Look, plane: PlaneMap, scaled: Floats, rows: Floats, *, upper: bool) -> bool:
    """Whether outwards is towards larger rows."""
    across = look.paths(plane, scaled[:1], rows[:1, [0, -1]])
    first, last = plane.scaled(look.places(across, rows[:1, [0, -1]]).reshape(-1, 2))[:, 1 - look.axis]
    return bool((last > first) == upper)


def _stops(look: Look, plane: PlaneMap, scaled: Floats, rows: Floats, outwards: float) -> Floats:
    """The row at which each line falls to half its darkness, going outwards; NaN where it never does."""
    height, width = look.image.shape
    columns = np.rint(look.paths(plane, scaled, rows)).astype(np.int64)
    inside = (rows >= 0) & (rows < height)
    r = np.clip(rows, 0, height - 1).astype(np.int64)
    window = look.image[r[..., None], np.clip(columns[..., None] + np.arange(-5, 6), 0, width - 1)].astype(np.float64)
    dark = np.where(inside, np.maximum(window[..., [0, 1, 9, 10]].mean(axis=-1) - window[..., 4:7].min(axis=-1), 0), 0.0)
    order = slice(None) if outwards > 0 else slice(None, None, -1)
    dark, rows = dark[:, order], rows[:, order]
    usual = np.median(dark[:, :STRIP], axis=1)
    there = dark > 0.5 * usual[:, None]
    last = dark.shape[1] - 1 - np.argmax(there[:, ::-1], axis=1)
    good = (usual > LEAST_DARK) & there.any(axis=1) & (last < dark.shape[1] - 1)
    return np.where(good, rows[np.arange(len(rows)), last] + 0.5 * outwards, np.nan)
