"""Stretches between kinks: fitted apart, so that nothing is smoothed through a kink, and joined where they cross."""

import math
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from curvelab.fit.noise import Noise, measured_noise
from curvelab.fit.strand import Strand
from curvelab.fit.stretch import Extent, Stretch, fit_stretch
from curvelab.records.arrays import Floats

MOST_NUMBERS = 60
"""Numbers that describe a curve at most."""

LEAST_STEP = 0.02
"""Decades between knots at least."""

POINTS_A_STEP = 8
FEWEST_POINTS = 4
KINK_PARAMETERS = 2.0
"""What a kink costs beyond the parameters of its two stretches: its place was searched for."""

CROSSING_REACH = 0.02
"""Decades beyond the last points within which two stretches must cross."""

APPROACH = 2e-3
"""Decades within which two stretches must come of each other to be tried again."""

SHARP = 0.3
"""Radians of a corner that candidates, significant as they are, need no further test for."""

REFINEMENTS = 3
"""Rounds in which kinks move to crossings and the points near them are shared out again, at most."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Segments:
    """Stretches of one run of points and the places u where neighbours cross, with the noise found.

    ``strand`` is the run with strays at its ends no longer kept.
    """

    strand: Strand
    stretches: tuple[Stretch, ...]
    vertices: tuple[float, ...]
    noise: Noise

    @property
    def bounds(self) -> list[tuple[Stretch, float, float]]:
        """Each stretch with the range of u it stands for."""
        first, last = self.stretches[0], self.stretches[-1]
        edges = [first.knots[first.degree], *self.vertices, last.knots[-last.degree - 1]]
        return list(zip(self.stretches, edges[:-1], edges[1:], strict=True))


def fit_segments(strand: Strand, noise: Noise, kinks: list[float], numbers: int = MOST_NUMBERS) -> Segments:
    """Fit all stretches, drop kinks the points do not need, and find the crossings.

    Parameters
    ----------
    strand : Strand
    noise : Noise
        First estimate; the segments carry the final one.
    kinks : list of float
        Candidates, places u in order.
    numbers : int
        How many numbers may describe the run.
    """
    kinks = _with_points(strand, kinks)
    stretches = _fitted(strand, noise, kinks, numbers, [])
    strand = _trimmed(strand, stretches)
    noise = _noise(strand, stretches)
    stretches = _fitted(strand, noise, kinks, numbers, stretches)
    kinks, stretches = _needed(strand, noise, kinks, stretches)
    for round_ in range(REFINEMENTS):
        crossings, _ = _crossed(strand, kinks, stretches, approach=True)
        settled = len(crossings) == len(kinks) and np.allclose(crossings, kinks, rtol=0.0, atol=0.5 * strand.spacing)
        if round_ > 0 and settled:
            break
        kinks, forms = crossings, stretches if len(crossings) == len(kinks) else []
        stretches = _fitted(strand, noise, kinks, numbers, forms, settled=True)
        noise = _noise(strand, stretches)
    vertices, joined = _crossed(strand, kinks, stretches)
    while len(joined) != len(stretches):
        stretches = _fitted(strand, noise, vertices, numbers, [], settled=True)
        vertices, joined = _crossed(strand, vertices, stretches)
    return Segments(strand=strand, stretches=tuple(joined), vertices=tuple(vertices), noise=noise)


def _trimmed(strand: Strand, stretches: list[Stretch]) -> Strand:
    """Without strays at the ends, which would decide how far the curve goes."""
    followed = strand.kept.copy()
    for stretch in (stretches[0], stretches[-1]):
        followed[stretch.first : stretch.last] &= stretch.followed
    true = np.flatnonzero(followed)
    kept = strand.kept.copy()
    kept[: true[0]] = False
    kept[true[-1] + 1 :] = False
    return replace(strand, kept=kept)


def _with_points(strand: Strand, kinks: list[float]) -> list[float]:
    """The kinks between which there are points enough for a stretch."""
    chosen: list[float] = []
    for kink in kinks:
        if _count(strand, chosen[-1] if chosen else None, kink) >= FEWEST_POINTS:
            chosen.append(kink)
    while chosen and _count(strand, chosen[-1], None) < FEWEST_POINTS:
        chosen.pop()
    return chosen


def _count(strand: Strand, after: float | None, before: float | None) -> int:
    first, last = _range(strand, after, before)
    return int(np.count_nonzero(strand.kept[first:last]))


def _range(strand: Strand, after: float | None, before: float | None) -> tuple[int, int]:
    """Points between two kinks, without those a corner's rounding reaches."""
    first = 0 if after is None else int(np.searchsorted(strand.u, after + strand.blur, side="left"))
    last = len(strand.u) if before is None else int(np.searchsorted(strand.u, before - strand.blur, side="right"))
    return first, max(last, first)


def _fitted(
    strand: Strand, noise: Noise, kinks: list[float], numbers: int, before: list[Stretch], *, settled: bool = False
) -> list[Stretch]:
    """Fit the stretches between the kinks.

    Those that were straight before leave their numbers to the others; ``settled`` keeps every form as it was before
    and makes every stretch monotone.
    """
    spans = list(pairwise([None, *kinks, None]))
    forms = [stretch.form for stretch in before] if len(before) == len(spans) else [None] * len(spans)
    extents = [_extent(strand, after, until) for after, until in spans]
    curved = [extent for extent, form in zip(extents, forms, strict=True) if form != "line"]
    fixed = 2 * len(kinks) + 2 * (len(spans) - len(curved)) + 6 * len(curved)
    length = sum(extent.end - extent.start for extent in curved)
    step = max(length / max(numbers - fixed, 4), LEAST_STEP, POINTS_A_STEP * strand.spacing)
    return [
        fit_stretch(strand, noise, replace(extent, step=step, form=form if settled else None, settled=settled))
        for extent, form in zip(extents, forms, strict=True)
    ]


def _extent(strand: Strand, after: float | None, until: float | None) -> Extent:
    first, last = _range(strand, after, until)
    kept = np.flatnonzero(strand.kept[first:last]) + first
    first, last = int(kept[0]), int(kept[-1]) + 1
    start = float(strand.u[first]) if after is None else after
    end = float(strand.u[last - 1]) if until is None else until
    return Extent(first=first, last=last, start=start, end=end, step=math.inf)


def _noise(strand: Strand, stretches: list[Stretch]) -> Noise:
    residuals = [stretch.residual[stretch.followed] for stretch in stretches]
    return measured_noise(residuals, sum(stretch.edf for stretch in stretches), strand.stated)


def _needed(
    strand: Strand, noise: Noise, kinks: list[float], stretches: list[Stretch]
) -> tuple[list[float], list[Stretch]]:
    """Merge neighbours, weakest corner first, while the Bayes information criterion falls."""
    kinks, stretches = list(kinks), list(stretches)
    turns = {kink: _turn(stretches[k], stretches[k + 1], kink) for k, kink in enumerate(kinks)}
    settled = {kink for kink, turn in turns.items() if turn > SHARP}
    while True:
        open_kinks = [k for k in range(len(kinks)) if kinks[k] not in settled]
        if not open_kinks:
            return kinks, stretches
        k = min(open_kinks, key=lambda i: _turn(stretches[i], stretches[i + 1], kinks[i]))
        merged = _merged(strand, noise, stretches[k], stretches[k + 1])
        if _prefers_merged(strand, noise, stretches[k], stretches[k + 1], merged):
            kinks[k : k + 1] = []
            stretches[k : k + 2] = [merged]
        else:
            settled.add(kinks[k])


def _turn(left: Stretch, right: Stretch, kink: float) -> float:
    place = np.array([kink])
    return float(abs(np.arctan(right.slope(place)[0]) - np.arctan(left.slope(place)[0])))


def _merged(strand: Strand, noise: Noise, left: Stretch, right: Stretch) -> Stretch:
    steps = [
        (stretch.knots[-stretch.degree - 1] - stretch.knots[stretch.degree]) / max(len(stretch.coefficients) - 3, 1)
        for stretch in (left, right)
        if stretch.form == "spline"
    ]
    start, end = float(left.knots[left.degree]), float(right.knots[-right.degree - 1])
    step = max(min(steps, default=(end - start) / 20.0), (end - start) / (MOST_NUMBERS - 5))
    return fit_stretch(strand, noise, Extent(first=left.first, last=right.last, start=start, end=end, step=step))


def _prefers_merged(strand: Strand, noise: Noise, left: Stretch, right: Stretch, merged: Stretch) -> bool:
    """Compare on the points away from the corner, which both describe."""
    away = np.ones(merged.last - merged.first, dtype=bool)
    away[left.last - left.first : right.first - left.first] = False
    kept = strand.kept[merged.first : merged.last] & away
    count = np.count_nonzero(kept) / noise.inflation
    price = math.log(max(count, 2.0))
    apart = left.misfit + right.misfit + price * (left.edf + right.edf + KINK_PARAMETERS)
    return noise.misfit(merged.residual[kept]) + price * merged.edf <= apart


def _crossed(
    strand: Strand, kinks: list[float], stretches: list[Stretch], *, approach: bool = False
) -> tuple[list[float], list[Stretch]]:
    """Move every kink to where its stretches cross; one whose stretches do not, or that leaves none, is dropped.

    The stretches that remain valid come with the kinks, or none where kinks were lost for want of points.
    """
    moved: list[float] = []
    joined = [stretches[0]]
    for kink, right in zip(kinks, stretches[1:], strict=True):
        place = _crossing(strand, joined[-1], right, kink, approach=approach)
        if place is None or (moved and place <= moved[-1]):
            continue
        moved.append(place)
        joined.append(right)
    usable = _with_points(strand, moved)
    return (moved, joined) if len(usable) == len(moved) else (usable, [])


def _crossing(strand: Strand, left: Stretch, right: Stretch, near: float, *, approach: bool) -> float | None:
    """The crossing nearest to a place, between the points on either side or shortly beyond them.

    Without one, ``approach`` takes the place where they come closest, from which a further round may find it.
    """
    reach = max(CROSSING_REACH, 2.0 * strand.blur, 4.0 * strand.spacing)
    start = max(strand.u[left.last - 1] - reach, 0.5 * (strand.u[left.first] + strand.u[left.last - 1]))
    end = min(strand.u[right.first] + reach, 0.5 * (strand.u[right.first] + strand.u[right.last - 1]))
    grid = np.linspace(start, end, 65)
    difference = right.value(grid) - left.value(grid)
    changes = np.flatnonzero(np.sign(difference[:-1]) != np.sign(difference[1:]))
    if changes.size == 0:
        closest = int(np.argmin(np.abs(difference)))
        return float(grid[closest]) if approach and abs(difference[closest]) <= APPROACH else None
    k = changes[np.argmin(np.abs(grid[changes] - near))]
    return _root(left, right, grid[k], grid[k + 1])


def _root(left: Stretch, right: Stretch, low: float, high: float) -> float:
    """Regula falsi between two places; both models are nearly straight there."""
    ends = np.array([low, high])
    for _ in range(4):
        apart: Floats = right.value(ends) - left.value(ends)
        if apart[0] == apart[1]:
            break
        place = float(np.clip(ends[0] - apart[0] * (ends[1] - ends[0]) / (apart[1] - apart[0]), low, high))
        here = float((right.value(np.array([place])) - left.value(np.array([place])))[0])
        ends = np.array([place, ends[1]]) if here * apart[0] > 0 else np.array([ends[0], place])
        if abs(here) < 1e-14:
            break
    return place
