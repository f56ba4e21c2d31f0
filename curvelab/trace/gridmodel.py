"""The grid as a known nuisance: its predicted ink, from the lines the axes were calibrated on."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import GridLine
from curvelab.records.sheet import Pixels
from curvelab.trace.ink import Image, Ink

BIN = 0.25
"""Width in px of the bins a line's profile is measured in."""
QUANTILE = 0.35
QUANTILE_OFFSET = 0.385
"""A low quantile along the line passes over curves that cross or follow it; in noise it lies 0.385 sd below the middle."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class GridInk:
    """Predicted ink of the grid.

    Parameters
    ----------
    dark : array, shape (height, width), float32
        Ink of the grid, mean of the channels, on the pixels of ``Ink``.
    tint : array, shape (channels,)
        Ink of each channel relative to that mean.
    """

    dark: Image
    tint: Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Course:
    """Where one grid line runs: its centre at each pixel along it."""

    along: Floats
    centre: Floats
    reach: int
    vertical: bool


def predict_grid(ink: Ink, pixels: Pixels, grid: tuple[GridLine, ...]) -> GridInk:
    """Ink of every grid line as its own mean profile predicts it, the larger where lines cross."""
    predicted = np.zeros(ink.dark.shape, dtype=np.float32)
    tints = []
    for line in grid:
        course = _course(ink, pixels, line)
        if course is None:
            continue
        seen = ink.dark if course.vertical else ink.dark.T
        target = predicted if course.vertical else predicted.T
        rows, columns = _pixels_along(course, seen.shape[1])
        offset = columns - course.centre[:, None]
        profile = _profile(seen[rows, columns], offset, course.reach, ink.noise)
        ink_there = np.interp(offset, *profile)
        np.maximum.at(target, (rows, columns), ink_there.astype(np.float32))
        if ink.density.shape[2] == 3:
            tints.append(_tint(ink, course))
    channels = ink.density.shape[2]
    tint = np.median(tints, axis=0) if tints else np.ones(channels)
    return GridInk(dark=predicted, tint=tint)


def _course(ink: Ink, pixels: Pixels, line: GridLine) -> _Course | None:
    if len(line.points) < 2:
        return None
    places = pixels.columns_rows(line.points) - np.array(ink.origin)
    span = np.ptp(places, axis=0)
    vertical = bool(span[1] > span[0])
    along, across = (places[:, 1], places[:, 0]) if vertical else (places[:, 0], places[:, 1])
    order = np.argsort(along)
    along, across = along[order], across[order]
    height, width = ink.dark.shape
    length, breadth = (height, width) if vertical else (width, height)
    positions = np.arange(length, dtype=np.float64)
    slope = (across[-1] - across[0]) / max(along[-1] - along[0], 1.0)
    centre = np.interp(positions, along, across)
    centre += slope * (np.minimum(positions - along[0], 0.0) + np.maximum(positions - along[-1], 0.0))
    reach = int(np.ceil(0.5 * line.width / pixels.size_in_places + 2.5))
    inside = (centre > reach + 1) & (centre < breadth - reach - 2)
    if not inside.any():
        return None
    return _Course(along=positions[inside], centre=centre[inside], reach=reach, vertical=vertical)


def _pixels_along(course: _Course, breadth: int) -> tuple[np.ndarray, np.ndarray]:
    steps = np.arange(-course.reach, course.reach + 1)
    columns = np.clip(np.round(course.centre).astype(int)[:, None] + steps[None, :], 0, breadth - 1)
    rows = np.broadcast_to(course.along.astype(int)[:, None], columns.shape)
    return rows, columns


def _profile(seen: Image, offset: Floats, reach: int, noise: float) -> tuple[Floats, Floats]:
    """The line's profile: a low quantile of the ink in bins of the distance from the centre."""
    bins = np.round(offset / BIN).astype(int)
    low = int(-np.ceil((reach + 1) / BIN))
    centres, levels = [], []
    flat_bins, flat_seen = bins.ravel(), seen.ravel()
    order = np.argsort(flat_bins, kind="stable")
    edges = np.searchsorted(flat_bins[order], np.arange(low, -low + 2))
    for k in range(edges.size - 1):
        members = order[edges[k] : edges[k + 1]]
        if members.size >= 12:
            centres.append(float(np.mean(offset.ravel()[members])))
            levels.append(float(np.quantile(flat_seen[members], QUANTILE)) + QUANTILE_OFFSET * noise)
    if len(centres) < 2:
        return np.array([-reach, reach], dtype=float), np.zeros(2)
    profile = np.clip(np.array(levels), 0.0, 1.0)
    return np.array(centres), profile


def _tint(ink: Ink, course: _Course) -> Floats:
    columns = np.round(course.centre).astype(int)
    rows = course.along.astype(int)
    if not course.vertical:
        columns, rows = rows, columns
    levels = np.median(ink.density[rows, columns], axis=0).astype(np.float64)
    tint: Floats = levels / max(float(levels.mean()), 1e-3)
    return tint
