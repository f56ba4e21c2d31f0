"""The grid as a known nuisance: its predicted ink, from the lines the axes were calibrated on."""

from dataclasses import dataclass, replace

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, GridLine
from curvelab.records.sheet import Pixels
from curvelab.trace.ink import Image, Ink

BIN = 0.25
"""Width in px of the bins a line's profile is measured in."""
BINS = np.arange(-8.0, 8.0 + BIN / 2, BIN)
"""Distances in px a profile is kept at."""
NEAR_WHOLE = 1e-6
QUANTILE = 0.12
TWO_LEVEL_QUANTILE = 0.85
QUANTILE_OFFSET = 1.175
"""A low quantile along the line passes over curves that cross or follow it; in noise it lies 1.175 sd low."""
USUAL, HIDDEN = 0.6, 0.3
"""A line's usual ink along it, and the share of that beneath which nothing of the line is seen."""
SHORTEST_HIDDEN, WHOLE = 24, 0.9
"""px of a stretch that hides a line, and the share of it without ink."""
MOSTLY_HIDDEN = 0.7
"""A line that is seen along less than the rest is left as it is."""


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
    outermost: bool


def grid_lines(axes: Axes) -> tuple[GridLine, ...]:
    """The axes' grid lines without those that stand in one decade alone: upright or level curves taken for the grid."""
    kept = []
    for line in axes.grid:
        values = [other.value for other in axes.grid if other.axis == line.axis]
        scale = (axes.current if line.axis == "current" else axes.value).scale
        if scale != "log" or _repeats(line.value, np.array(values)):
            kept.append(line)
    return tuple(kept)


def _repeats(value: float, others: Floats) -> bool:
    """Whether a value is a whole multiple of a power of ten, or other decades have a line there too."""
    scaled = value / 10.0 ** np.floor(np.log10(value))
    if abs(scaled - np.round(scaled)) < NEAR_WHOLE:
        return True
    decades = [value * 10.0**k for k in range(-12, 13) if k and others.min() <= value * 10.0**k <= others.max()]
    return not decades or any(np.isclose(decade, others, rtol=1e-3).any() for decade in decades)


def predict_grid(ink: Ink, pixels: Pixels, grid: tuple[GridLine, ...]) -> GridInk:
    """Ink of every grid line as its own mean profile predicts it, the larger where lines cross."""
    values = {axis: [line.value for line in grid if line.axis == axis] for axis in ("current", "value")}
    courses = []
    for line in grid:
        course = _course(ink, pixels, line, line.value in (min(values[line.axis]), max(values[line.axis])))
        if course is not None:
            courses.append(course)
    if not ink.two_level:
        courses = [_seen_part(ink, course) for course in courses]
    profiles = [_profile(ink, course) for course in courses]
    limit = _common_limit(courses, profiles) if ink.two_level else np.ones(BINS.size)
    predicted = np.zeros(ink.dark.shape, dtype=np.float32)
    for course, profile in zip(courses, profiles, strict=True):
        allowed = profile if course.outermost else np.minimum(profile, limit)
        _draw(predicted if course.vertical else predicted.T, course, allowed)
    channels = ink.density.shape[2]
    tint = np.median([_tint(ink, course) for course in courses], axis=0) if courses else np.ones(channels)
    return GridInk(dark=predicted, tint=tint)


def _course(ink: Ink, pixels: Pixels, line: GridLine, outermost: bool) -> _Course | None:
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
    return _Course(along=positions[inside], centre=centre[inside], reach=reach, vertical=vertical, outermost=outermost)


def _seen_part(ink: Ink, course: _Course) -> _Course:
    """The line without stretches that a label or a box hides: there its ink is not to be expected."""
    dark = ink.dark if course.vertical else ink.dark.T
    columns = np.clip(np.round(course.centre).astype(int)[:, None] + np.array([-1, 0, 1]), 0, dark.shape[1] - 1)
    level = dark[course.along.astype(int)[:, None], columns].max(axis=1)
    usual = float(np.quantile(level, USUAL))
    bare = (level < max(HIDDEN * usual, 2.0 * ink.noise)).astype(np.float64)
    # hidden: bare over a whole stretch, and everything within that stretch
    width = min(SHORTEST_HIDDEN, level.size)
    whole = np.convolve(bare, np.ones(width), mode="valid") >= WHOLE * width
    hidden = np.zeros(level.size, dtype=bool)
    for start in np.flatnonzero(whole):
        hidden[start : start + width] |= bare[start : start + width] > 0
    if not hidden.any() or hidden.mean() > MOSTLY_HIDDEN:
        return course
    return replace(course, along=course.along[~hidden], centre=course.centre[~hidden])


def _pixels_along(course: _Course, breadth: int) -> tuple[np.ndarray, np.ndarray]:
    steps = np.arange(-course.reach, course.reach + 1)
    columns = np.clip(np.round(course.centre).astype(int)[:, None] + steps[None, :], 0, breadth - 1)
    rows = np.broadcast_to(course.along.astype(int)[:, None], columns.shape)
    return rows, columns


def _profile(ink: Ink, course: _Course) -> Floats:
    """The line's profile on ``BINS``: a low quantile of the ink at each distance, 0 beyond its reach."""
    seen = ink.dark if course.vertical else ink.dark.T
    rows, columns = _pixels_along(course, seen.shape[1])
    offset = columns - course.centre[:, None]
    centres, levels = [], []
    # a thin line comes and goes in a 1-bit scan: wherever it may be, the pixels beside it decide
    share, lift = (TWO_LEVEL_QUANTILE, 0.0) if ink.two_level else (QUANTILE, QUANTILE_OFFSET * ink.noise)
    # pixels lie one apart, so each column of offsets drifts slowly: its quantiles are taken over stretches of offset
    bins = np.round(offset / BIN).astype(int)
    values = seen[rows, columns]
    for k in range(int(bins.min()), int(bins.max()) + 1):
        members = bins == k
        if members.sum() >= 12:
            centres.append(float(offset[members].mean()))
            levels.append(float(np.quantile(values[members], share)) + lift)
    if len(centres) < 2:
        return np.zeros(BINS.size)
    profile: Floats = np.clip(np.interp(BINS, centres, levels, left=0.0, right=0.0), 0.0, 1.0)
    return profile


def _common_limit(courses: list[_Course], profiles: list[Floats]) -> Floats:
    """Ink that at least two lines inside the plot reach: a curve that follows one line all along is not its grid."""
    inner = [profile for course, profile in zip(courses, profiles, strict=True) if not course.outermost]
    if len(inner) < 2:
        return np.ones(BINS.size)
    limit: Floats = 1.1 * np.sort(np.array(inner), axis=0)[-2]
    return limit


def _draw(target: Image, course: _Course, profile: Floats) -> None:
    """Add a line to the predicted ink; the larger stays where lines cross."""
    rows, columns = _pixels_along(course, target.shape[1])
    level = np.interp(columns - course.centre[:, None], BINS, profile).astype(np.float32)
    target[rows, columns] = np.maximum(target[rows, columns], level)


def _tint(ink: Ink, course: _Course) -> Floats:
    columns = np.round(course.centre).astype(int)
    rows = course.along.astype(int)
    if not course.vertical:
        columns, rows = rows, columns
    levels = np.median(ink.density[rows, columns], axis=0).astype(np.float64)
    tint: Floats = levels / max(float(levels.mean()), 1e-3)
    return tint
