"""Where the tangent jumps: candidates for kinks, from parabolas fitted on either side of every place.

At a kink the jump of the slope stays the same however short the two parabolas are; on a smooth bend it shrinks with
the cube of their length. A candidate must be significant at one length and not shrink at the shorter ones.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.fit.noise import Noise
from curvelab.fit.strand import Strand
from curvelab.records.arrays import Floats

SIGNIFICANT = 6.0
"""Standard deviations of the jump."""

LEAST_JUMP = 0.02
"""Of dv/du; a smooth model rounds a smaller corner by less than a tenth of a pixel at 400 px a decade."""

SHORTEST_POINTS = 14
LONGEST = 0.3
"""Length of a parabola: at least so many points, at most so many decades."""

MOST_PLACES = 900


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Jumps:
    """Jump of the slope and its standard deviation at every place, for one length of the parabolas."""

    place: Floats
    jump: Floats
    sd: Floats
    length: float

    @property
    def significance(self) -> Floats:
        """Jump over its standard deviation; 0 where the points do not tell."""
        return np.where(np.isfinite(self.sd), np.abs(self.jump) / self.sd, 0.0)


def kink_candidates(strand: Strand, noise: Noise, hole: float) -> list[float]:
    """Places u where the tangent jumps, in order; ``hole`` is the length about a corner that is not resolved."""
    reach = strand.u[-1] - strand.u[0]
    length = hole + SHORTEST_POINTS * strand.spacing
    scales: list[Jumps] = []
    found: list[float] = []
    while length <= min(LONGEST, reach / 2.0) and len(strand.u) >= 2 * SHORTEST_POINTS:
        jumps = slope_jumps(strand, noise, length=length, hole=hole)
        found.extend(_new_peaks(jumps, scales, found))
        scales.append(jumps)
        length *= 2.0
    return sorted(found)


def slope_jumps(strand: Strand, noise: Noise, *, length: float, hole: float) -> Jumps:
    """Compare parabolas over ``length`` on either side of each place, leaving out ``hole`` next to it."""
    cells = _Cells.of(strand, noise)
    left = cells.parabolas(-length, -hole)
    right = cells.parabolas(hole, length)
    return Jumps(
        place=cells.place,
        jump=right[0] - left[0],
        sd=np.sqrt(right[1] + left[1]),
        length=length,
    )


def _new_peaks(jumps: Jumps, finer: list[Jumps], found: list[float]) -> list[float]:
    """Peaks of significance at this length that no finer length has found and none contradicts."""
    strength = np.where(np.abs(jumps.jump) >= LEAST_JUMP, jumps.significance, 0.0)
    peaks: list[float] = []
    for k in np.argsort(-strength):
        if strength[k] < SIGNIFICANT:
            break
        place = float(jumps.place[k])
        if any(abs(place - other) < jumps.length for other in (*found, *peaks)):
            continue
        if all(_agrees(jumps.jump[k], place, scale) for scale in finer):
            peaks.append(place)
    return peaks


def _agrees(jump: float, place: float, finer: Jumps) -> bool:
    near = np.abs(finer.place - place) <= 0.5 * finer.length
    near &= np.isfinite(finer.sd)
    if not near.any():
        return True
    k = np.flatnonzero(near)[np.argmax(np.abs(finer.jump[near]))]
    return bool(abs(jump - finer.jump[k]) <= 0.3 * abs(jump) + 3.0 * finer.sd[k])


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Cells:
    """Points gathered in equal cells of u, so that sums over sliding windows are convolutions."""

    place: Floats
    step: float
    weight: Floats
    offset: Floats
    level: Floats

    @staticmethod
    def of(strand: Strand, noise: Noise) -> "_Cells":
        start, end = strand.u[0], strand.u[-1]
        count = int(np.clip((end - start) / max(strand.spacing, 1e-12), 16, MOST_PLACES))
        step = (end - start) / count
        cell = np.minimum(((strand.u - start) / step).astype(np.intp), count - 1)
        place = start + (np.arange(count) + 0.5) * step
        weight = np.where(strand.kept, 1.0 / (2.0 * noise.inflation * (noise.scale * strand.sd) ** 2), 0.0)
        total = np.bincount(cell, weight, count).astype(np.float64)
        safe = np.where(total > 0.0, total, 1.0)
        offset = np.bincount(cell, weight * (strand.u - place[cell]), count) / safe
        level = np.bincount(cell, weight * strand.v, count) / safe
        return _Cells(place=place, step=step, weight=total, offset=offset, level=level)

    def parabolas(self, start: float, end: float) -> tuple[Floats, Floats]:
        """Slope at every place, and its variance, of the parabola through the cells from start to end beside it."""
        cells = np.arange(round(start / self.step), round(end / self.step) + 1, dtype=np.float64)
        cells = cells[(cells * self.step > start - 0.5 * self.step) & (cells * self.step < end + 0.5 * self.step)]
        scale = max(abs(start), abs(end))
        moments = [self._windowed(self.weight, cells, power, scale) for power in range(5)]
        levels = [self._windowed(self.weight * self._centred(), cells, power, scale) for power in range(3)]
        normal = np.array([[moments[i + j] for j in range(3)] for i in range(3)]).transpose(2, 0, 1)
        occupied = self._windowed((self.weight > 0.0).astype(np.float64), cells, 0, scale)
        usable = occupied >= max(0.6 * len(cells), 5)
        usable &= np.linalg.cond(np.where(usable[:, None, None], normal, np.eye(3))) < 1e10
        inverse = np.linalg.inv(np.where(usable[:, None, None], normal, np.eye(3)))
        slope = (inverse @ np.array(levels).T[:, :, None])[:, 1, 0] / scale + self._tilt()
        return np.where(usable, slope, np.nan), np.where(usable, inverse[:, 1, 1], np.inf) / scale**2

    def _tilt(self) -> float:
        """Slope of the chord, taken out before sums are formed."""
        return float((self.level[-1] - self.level[0]) / (self.place[-1] - self.place[0]))

    def _centred(self) -> Floats:
        chord = self.level[0] + self._tilt() * (self.place + self.offset - self.place[0])
        return np.where(self.weight > 0.0, self.level - chord, 0.0)

    def _windowed(self, values: Floats, cells: Floats, power: int, scale: float) -> Floats:
        """Sum over the window's cells of values x (distance / scale)^power, at every place."""
        # Within a cell the points' mean distance counts: to first order, value x ((d + o) / s)^p.
        kernel = (cells * self.step / scale) ** power
        total = _correlated(values, cells, kernel)
        if power > 0:
            slope = power * (cells * self.step / scale) ** (power - 1) / scale
            total = total + _correlated(values * self.offset, cells, slope)
        return total


def _correlated(values: Floats, cells: Floats, kernel: Floats) -> Floats:
    """Sum of values[k + cells] x kernel at every k, 0 beyond the ends."""
    before, after = int(max(-cells[0], 0)), int(max(cells[-1], 0))
    padded = np.pad(values, (before, after))
    full = np.convolve(padded, kernel[::-1], mode="valid")
    first = before + int(cells[0])
    return full[first : first + len(values)]
