"""Where dark lines run on an image: strips across it, the slope the lines share, and their darkness along the axis.

Everything here only searches; what is found is measured on the untouched grey levels afterwards.
"""

from dataclasses import dataclass
from functools import cached_property
from typing import Any

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Bytes, Floats

STRIP = 16
"""Rows averaged into one strip: short enough that a line 5 degrees askew moves less than its own width."""

PAPER_REACH = 25
"""Pixels across within which the lightest level is the paper."""

STEEPEST = 0.105
"""Largest slope searched, 6 degrees."""

MUCH_SHARPER = 1.15
"""Ratio of energies from which on a direction's own slope is taken."""

COARSE = 3
"""Strips joined, and pixels across joined, in the coarse search for the slope."""


LEAST_DARK = 4.0
"""Grey levels by which a line is darker than the paper in the profile, at least."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Strips:
    """Darkness against the paper nearby, of strips along the lines.

    Parameters
    ----------
    dark : array, shape (n, width), float32
        Grey levels darker than the paper, smoothed for the search.
    along : array, shape (n,)
        Places of the strips' middles.
    """

    dark: NDArray[np.float32]
    along: Floats

    @property
    def noise(self) -> float:
        """Standard deviation of the darkness where there is only paper, in grey levels."""
        some = self.dark[:: max(1, len(self.dark) // 40)]
        return 1.4826 * float(np.median(np.abs(some)))

    @property
    def middle(self) -> float:
        """The place along the lines about which slopes turn."""
        return float(self.along.mean())


CLEAR = 0.5
"""Share of a clear line's darkness from which on a peak of the profile is a line."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Profile:
    """Darkness at places ``first + step * k`` across, moved along the slope to ``middle``, in units of a clear line."""

    dark: Floats
    first: float
    step: float
    middle: float

    def at(self, across: Floats) -> Floats:
        """Strength of the line at places, 0 to 1; 0 beyond the ends."""
        places = self.first + self.step * np.arange(len(self.dark))
        return np.clip(np.interp(across, places, self.dark, left=0.0, right=0.0), 0.0, 1.0)

    @cached_property
    def peaks(self) -> Floats:
        """Places of the lines, between pixels."""
        left, top, right = self.dark[:-2], self.dark[1:-1], self.dark[2:]
        k = np.flatnonzero((top >= CLEAR) & (top > left) & (top >= right))
        bend = left[k] - 2 * top[k] + right[k]
        found: Floats = self.first + self.step * (k + 1 + 0.5 * (left[k] - right[k]) / bend)
        return found


def strips_of(image: Bytes, rows: tuple[int, int]) -> Strips:
    """Strips of ``image`` (lines run down its rows) between two rows."""
    count = max(1, (rows[1] - rows[0]) // STRIP)
    part = image[rows[0] : rows[0] + count * STRIP]
    means = part.reshape(count, -1, image.shape[1]).mean(axis=1, dtype=np.float32)
    paper = cv2.morphologyEx(means, cv2.MORPH_CLOSE, np.ones((1, PAPER_REACH), np.uint8))
    dark: Any = cv2.GaussianBlur(paper - means, (0, 0), sigmaX=1.0, sigmaY=0.01)
    dark -= np.median(dark, axis=1, keepdims=True)
    along = rows[0] - 0.5 + STRIP * np.arange(0.5, count, dtype=np.float64)
    return Strips(dark=dark, along=along)


def shared_slopes(first: Strips, second: Strips) -> tuple[float, float]:
    """Slopes (across by along) of the lines of both directions.

    A turned page gives both directions opposite slopes: that joins their evidence. Each is then refined by itself,
    as paper and scanners also shear a little; where pixels are not square, a direction's own slope is much sharper
    and is taken.
    """
    length = max(np.ptp(first.along), np.ptp(second.along), 1.0)
    steps = int(np.ceil(STEEPEST * length / 3.0))
    slopes = np.arange(-steps, steps + 1) * STEEPEST / max(steps, 1)
    energies = [_energies(_coarse(first), slopes, COARSE), _energies(_coarse(second), -slopes, COARSE)]
    joint = sum(energy / max(energy.max(), 1e-12) for energy in energies)
    best = int(np.argmax(joint))
    turned = (slopes, -slopes)
    found = [
        _sharpest(strips, turned[k][[best, int(np.argmax(energies[k]))]]) for k, strips in enumerate((first, second))
    ]
    return found[0], found[1]


def profile_along(strips: Strips, slope: float) -> Profile:
    """Strength of lines of one slope: the median over the strips, so that curves and lettering do not count."""
    moved = _moved(strips.dark, slope * (strips.along - strips.middle))
    dark = np.median(moved, axis=0)
    floor = float(np.median(dark))
    peaks = dark[1:-1][(dark[1:-1] > dark[:-2]) & (dark[1:-1] >= dark[2:])] - floor
    noise = 1.4826 * float(np.median(np.abs(dark - floor)))
    # A faint line counts as much as a dark one, once it is clearly above noise and the rings beside dark lines.
    strong = float(np.quantile(peaks, 0.98)) if peaks.size else 0.0
    full = max(8 * noise, LEAST_DARK, 0.05 * strong)
    return Profile(dark=((dark - floor) / full).astype(np.float64), first=0.0, step=1.0, middle=strips.middle)


def _coarse(strips: Strips) -> Strips:
    n, width = strips.dark.shape[0] // COARSE, strips.dark.shape[1] // COARSE
    if n < 3:
        return Strips(dark=strips.dark[:, : width * COARSE].reshape(-1, width, COARSE).mean(axis=2), along=strips.along)
    dark = strips.dark[: n * COARSE, : width * COARSE].reshape(n, COARSE, width, COARSE).mean(axis=(1, 3))
    return Strips(dark=dark, along=strips.along[: n * COARSE].reshape(n, COARSE).mean(axis=1))


def _energies(strips: Strips, slopes: Floats, pixel: int) -> Floats:
    """How sharply the strips add up when moved along each slope."""
    offset = strips.along - strips.along.mean()
    capped = np.clip(strips.dark, 0.0, max(float(np.quantile(strips.dark, 0.98)), LEAST_DARK))
    sums = (_summed(capped, slope * offset / pixel) / len(capped) for slope in slopes)
    return np.array([float(total @ total) for total in sums])


def _sharpest(strips: Strips, slopes: Floats) -> float:
    """The first slope refined, or the second where it is much sharper."""
    shared, shared_energy = _refined(strips, float(slopes[0]))
    if slopes[0] == slopes[1]:
        return shared
    own, own_energy = _refined(strips, float(slopes[1]))
    return own if own_energy > MUCH_SHARPER * shared_energy else shared


def _refined(strips: Strips, slope: float) -> tuple[float, float]:
    """The sharpest slope near one, and its energy."""
    half = float(np.ptp(strips.along)) / 2 + 1.0
    step = 0.5 / half
    slopes = slope + step * np.arange(-8.0, 9.0, dtype=np.float64)
    energy = _energies(strips, slopes, 1)
    k = int(np.clip(np.argmax(energy), 1, len(slopes) - 2))
    below, top, above = energy[k - 1 : k + 2]
    bend = below - 2 * top + above
    return float(slopes[k] + (step * 0.5 * (below - above) / bend if bend < 0 else 0.0)), float(top)


def _summed(dark: NDArray[np.float32], shifts: Floats) -> NDArray[np.float32]:
    """Sum of the rows moved left by whole pixels, slice by slice: much faster than moving them all first."""
    width = dark.shape[1]
    total = np.zeros(width, dtype=np.float32)
    for row, shift in zip(dark, np.rint(shifts).astype(int).tolist(), strict=True):
        first, last = max(0, -shift), min(width, width - shift)
        if first < last:
            total[first:last] += row[first + shift : last + shift]
    return total


def _moved(dark: NDArray[np.float32], shifts: Floats) -> NDArray[np.float32]:
    """Rows moved left by whole pixels, zero where nothing is known."""
    width = dark.shape[1]
    columns = np.arange(width)[None, :] + np.rint(shifts).astype(np.int64)[:, None]
    inside = (columns >= 0) & (columns < width)
    moved = np.take_along_axis(dark, np.clip(columns, 0, width - 1), axis=1)
    return np.where(inside, moved, np.float32(0.0))
