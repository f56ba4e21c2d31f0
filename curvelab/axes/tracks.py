"""Straight dark lines of an image as pieces: the peaks of strips, linked from strip to strip.

Every piece has its own slope, so that pages that are turned, taken at an angle or curled are followed as well. Lines
are looked for here, never measured: what is found is measured on the untouched grey levels afterwards.
"""

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.ends import line_end
from curvelab.axes.segments import Segments
from curvelab.axes.strips import STRIP, Strips, strips_of
from curvelab.records.arrays import Bytes, Floats

LEAST_DARK = 6.0
"""Grey levels by which a line is darker than the paper at least, in one strip."""

ABOVE_NOISE = 4.0
"""The same in standard deviations of the paper's noise."""

FIRST_REACH, REACH = 2.6, 1.6
"""Pixels from where a piece is expected in the next strip: while its slope is not known yet, and afterwards."""

STEEPEST = 0.12
"""Largest slope of a line, across by along."""

GAP_STRIPS = 3
"""A piece goes on after as many strips in which it is not seen."""

LEAST_STRIPS = 4
"""Shorter pieces are lettering, as a rule."""

LONG_STRIPS = 8
"""Strips from which on a piece's ends are looked for to the pixel,"""

AT_END = 6
"""following the direction of so many strips there."""

OFF, FADED, DARKER = 0.8, 0.2, 2.0
"""Pixels off a piece's own parabola, and shares of its usual darkness, beyond which a strip is not its end.

On a tinted or hatched ground a line is fainter than elsewhere; lettering is darker.
"""

BESIDE = (4, 5, 6, 7)
BESIDE_DARK = 0.5
"""Pixels beside a piece one of which is lighter than this share of it, on both sides: rows of letters are not."""

SETTLED = 4
"""Strips after which a piece's slope is known."""

Ints = NDArray[np.int64]


@dataclass(slots=True)
class _Active:
    """Pieces that may go on: place, slope, strip last seen in, strips seen, and number; arrays of the same length."""

    place: Floats = field(default_factory=lambda: np.zeros(0))
    slope: Floats = field(default_factory=lambda: np.zeros(0))
    last: Ints = field(default_factory=lambda: np.zeros(0, dtype=np.int64))
    count: Ints = field(default_factory=lambda: np.zeros(0, dtype=np.int64))
    number: Ints = field(default_factory=lambda: np.zeros(0, dtype=np.int64))

    def keep(self, which: NDArray[np.bool_]) -> None:
        """Forget the others."""
        self.place, self.slope = self.place[which], self.slope[which]
        self.last, self.count, self.number = self.last[which], self.count[which], self.number[which]

    def add(self, places: Floats, slope: float, strip: int, first_number: int) -> None:
        """Start a piece at each place."""
        n = len(places)
        self.place, self.slope = np.append(self.place, places), np.append(self.slope, np.full(n, slope))
        self.last = np.append(self.last, np.full(n, strip))
        self.count = np.append(self.count, np.ones(n, dtype=np.int64))
        self.number = np.append(self.number, first_number + np.arange(n))

    @property
    def usual_slope(self) -> float:
        """Median slope of the pieces that are known well; 0 before there are any."""
        known = self.count >= 2 * SETTLED
        return float(np.median(self.slope[known])) if known.any() else 0.0


def track_lines(image: Bytes) -> Segments:
    """Pieces of lines that run down the rows of an image.

    ``across``, ``first`` and ``last`` are in pixels; the ends of long pieces are known to about a pixel.
    """
    strips = strips_of(image, (0, image.shape[0]))
    strip, place, dark = _peaks(strips)
    number = _linked(strip, place, len(strips.along))
    return _segments(image, strips, strip, place, dark, number)


def track_places(strips: Strips, least: int) -> list[Floats]:
    """Places (across, along), shape (n, 2), of each piece seen in at least so many strips."""
    strip, place, _ = _peaks(strips)
    number = _linked(strip, place, len(strips.along))
    order = np.argsort(number, kind="stable")
    parts = np.split(order, np.flatnonzero(np.diff(number[order])) + 1) if len(order) else []
    return [np.stack([place[part], strips.along[strip[part]]], axis=1) for part in parts if len(part) >= least]


def _peaks(strips: Strips) -> tuple[Ints, Floats, Floats]:
    """Strip, place and darkness of every local maximum, in order of strips and places."""
    dark = strips.dark
    least = max(LEAST_DARK, ABOVE_NOISE * strips.noise)
    middle = dark[:, 1:-1]
    top = (middle >= least) & (middle > dark[:, :-2]) & (middle >= dark[:, 2:])
    strip, column = np.nonzero(top)
    left, peak, right = (dark[strip, column + k].astype(np.float64) for k in (0, 1, 2))
    place = column + 1 + 0.5 * (left - right) / (left - 2 * peak + right)
    return strip, place, peak


def _linked(strip: Ints, place: Floats, strips: int) -> Ints:
    """The number of the piece each peak belongs to."""
    number = np.empty(len(strip), dtype=np.int64)
    starts = np.searchsorted(strip, np.arange(strips + 1))
    active, pieces = _Active(), 0
    for k in range(strips):
        peaks = place[starts[k] : starts[k + 1]]
        mine = _continued(active, peaks, k)
        fresh = np.flatnonzero(mine < 0)
        mine[fresh] = pieces + np.arange(len(fresh))
        active.keep(active.last > k - 1 - np.where(active.count >= SETTLED, GAP_STRIPS, 1))
        active.add(peaks[fresh], active.usual_slope, k, pieces)
        number[starts[k] : starts[k + 1]] = mine
        pieces += len(fresh)
    return number


def _continued(active: _Active, peaks: Floats, strip: int) -> Ints:
    """The piece that each peak of a strip continues, -1 for none; the pieces move on."""
    mine = np.full(len(peaks), -1, dtype=np.int64)
    if not len(peaks) or not len(active.place):
        return mine
    run = STRIP * (strip - active.last).astype(np.float64)
    expected = active.place + active.slope * run
    right = np.clip(np.searchsorted(peaks, expected), 1, max(len(peaks) - 1, 1))
    left = right - 1
    right = np.minimum(right, len(peaks) - 1)
    nearest = np.where(np.abs(peaks[left] - expected) <= np.abs(peaks[right] - expected), left, right)
    off = peaks[nearest] - expected
    good = np.flatnonzero(np.abs(off) <= np.where(active.count >= SETTLED, REACH, FIRST_REACH))
    # Of pieces that want the same peak the longest goes on, then the nearest.
    good = good[np.lexsort((np.abs(off[good]), -np.minimum(active.count[good], SETTLED)))]
    _, chosen = np.unique(nearest[good], return_index=True)
    on = good[chosen]
    mine[nearest[on]] = active.number[on]
    gain = np.maximum(1.0 / (active.count[on] + 1.0), 0.06)
    active.slope[on] = np.clip(active.slope[on] + gain * off[on] / run[on], -STEEPEST, STEEPEST)
    active.place[on] = expected[on] + np.maximum(gain, 0.4) * off[on]
    active.last[on] = strip
    active.count[on] += 1
    return mine


def _segments(image: Bytes, strips: Strips, strip: Ints, place: Floats, dark: Floats, number: Ints) -> Segments:
    """Straight lines through the peaks of each piece that is long enough."""
    count = np.bincount(number)
    along = strips.along[strip]
    with np.errstate(invalid="ignore", divide="ignore"):
        middle = np.bincount(number, along) / count
        across = np.bincount(number, place) / count
        run = along - middle[number]
        spread = np.bincount(number, run**2)
        lean = np.bincount(number, run * (place - across[number])) / np.where(spread > 0, spread, 1.0)
    darkness = np.bincount(number, dark) / np.maximum(count, 1)
    # Lettering that stands in line with a line seems to prolong it, but not as exactly nor as darkly.
    off = np.abs(_off_parabola(number, run, place - across[number] - lean[number] * run))
    share = dark / darkness[number]
    own = (off <= OFF) & (share >= FADED) & (share <= DARKER)
    first = np.full(len(count), np.inf)
    last = np.full(len(count), -np.inf)
    np.minimum.at(first, number[own], along[own])
    np.maximum.at(last, number[own], along[own])
    first, last = np.where(first > last, middle, first), np.where(first > last, middle, last)
    # Gaps are allowed, but a piece is there more often than not.
    kept = (count >= LEAST_STRIPS) & (count * STRIP >= 0.5 * (last - first))
    kept &= _beside(strips, strip, place, number) <= BESIDE_DARK * darkness
    for piece in np.flatnonzero(kept & (count >= LONG_STRIPS)):
        mine = np.flatnonzero((number == piece) & own)
        ends = _ends(image, along[mine], place[mine])
        if ends[1] - ends[0] >= LEAST_STRIPS * STRIP:
            first[piece], last[piece] = ends[0] + 0.5 * STRIP, ends[1] - 0.5 * STRIP
    centre = 0.5 * (first + last)
    return Segments(
        across=across + lean * (centre - middle),
        first=first - 0.5 * STRIP,
        last=last + 0.5 * STRIP,
        lean=lean,
        width=np.ones(len(count)),
        darkness=np.clip(darkness / 255.0, 0.0, 1.0),
    ).where(kept)


def _ends(image: Bytes, along: Floats, place: Floats) -> tuple[float, float]:
    """First and last row of a piece, from its strips' places in order."""
    few = min(AT_END, len(along))
    ends = []
    for part, at, direction in ((slice(0, few), along[0], -1), (slice(-few, None), along[-1], 1)):
        slope, column = np.polyfit(along[part] - at, place[part], 1)
        end = at + direction * 0.5 * STRIP
        ends.append(line_end(image, (float(column + slope * (end - at)), float(end)), float(slope), direction))
    return ends[0], ends[1]


def _beside(strips: Strips, strip: Ints, place: Floats, number: Ints) -> Floats:
    """How dark the lightest row of pixels is beside each piece, on the darker side."""
    column = np.rint(place).astype(np.int64)
    count = np.maximum(np.bincount(number), 1)
    width = strips.dark.shape[1]
    sides = [
        np.min(
            [
                np.bincount(number, strips.dark[strip, np.clip(column + side * off, 0, width - 1)]) / count
                for off in BESIDE
            ],
            axis=0,
        )
        for side in (-1, 1)
    ]
    beside: Floats = np.maximum(*sides)
    return beside


def _off_parabola(number: Ints, run: Floats, off: Floats) -> Floats:
    """What is left of distances from straight lines once each piece may bend a little."""
    count = np.maximum(np.bincount(number), 1)
    second, third = np.bincount(number, run**2) / count, np.bincount(number, run**3) / count
    bow = run**2 - second[number] - (third / np.maximum(second, 1e-9))[number] * run
    spread = np.bincount(number, bow**2)
    bend = np.bincount(number, bow * off) / np.maximum(spread, 1e-9)
    left: Floats = off - bend[number] * bow
    return left
