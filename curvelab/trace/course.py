"""Course of a line over the pixels: one node in each column where it runs flat, in each row where it runs steep.

So every pixel near the line belongs to one node and is used once, where it lies; nothing is resampled.
"""

from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray
from scipy.ndimage import gaussian_filter1d

from curvelab.records.arrays import Floats

DENSE = 0.25
"""px between the places of a smoothed walk."""
WALK_SMOOTHING = 2.0
"""px: Gaussian that takes the steps out of thinned pixels."""
LEG = 9.0
"""px of line on either side that a kink's angle is measured over."""
KINK_DEG = 22.0
DECIDED = 1.15
"""Ratio of the steps across and down from which a line is flat or steep."""
LOCAL = 4.0
"""Nodes: Gaussian of the local straight fit that gives direction and centre line."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Course:
    """Nodes along a line.

    Parameters
    ----------
    along : array of int
        Column of each node where ``flat``, row where not.
    across : array
        Row of the line's centre there (column where steep).
    slope : array
        d across / d along.
    flat : array of bool
    run : array of int
        Number of the stretch without kink or change between flat and steep.
    arc : array
        Length along the line in px.
    near_kink : array of bool
        Within the reach of a kink, where a stroke's own corner pulls the centre aside.
    """

    along: NDArray[np.intp]
    across: Floats
    slope: Floats
    flat: NDArray[np.bool_]
    run: NDArray[np.intp]
    arc: Floats
    near_kink: NDArray[np.bool_]

    @property
    def cosine(self) -> Floats:
        """Distance along the normal for a unit step across."""
        result: Floats = 1.0 / np.hypot(1.0, self.slope)
        return result

    def places(self, across: Floats) -> Floats:
        """Column and row of each node with its centre at ``across``."""
        return np.stack([np.where(self.flat, self.along, across), np.where(self.flat, across, self.along)], axis=1)


def course_of(walked: Floats, width: float, overshoot: float) -> Course:
    """Nodes of a walked line, drawn on by ``overshoot`` px at both ends."""
    dense, arc = _smoothed(walked, overshoot)
    kinks = _kinks(dense, arc)
    tangent = _tangents(dense, arc, kinks)
    flat = _flat(tangent)
    run = _runs(flat, arc, kinks)
    along = np.where(flat, dense[:, 0], dense[:, 1])
    across = np.where(flat, dense[:, 1], dense[:, 0])
    low, high = np.minimum(along[:-1], along[1:]), np.maximum(along[:-1], along[1:])
    whole = np.ceil(low)
    crossing = np.flatnonzero((whole < high) & (run[:-1] == run[1:]))
    position = whole[crossing]
    part = (position - along[crossing]) / (along[crossing + 1] - along[crossing])
    at = along[crossing + 1] - along[crossing]
    course = Course(
        along=position.astype(np.intp),
        across=across[crossing] + part * (across[crossing + 1] - across[crossing]),
        slope=(across[crossing + 1] - across[crossing]) / at,
        flat=flat[crossing],
        run=run[crossing],
        arc=arc[crossing] + part * (arc[crossing + 1] - arc[crossing]),
        near_kink=np.zeros(crossing.size, dtype=bool),
    )
    near = np.zeros(crossing.size, dtype=bool)
    for kink, turn in kinks:
        near |= np.abs(course.arc - kink) < _kink_reach(turn, width)
    return replace(course, near_kink=near)


def recentred(course: Course, across: Floats, weight: Floats) -> Course:
    """The course through new centres: a local straight fit within each run, weighted."""
    centre, slope = np.empty_like(across), np.empty_like(across)
    for number in np.unique(course.run):
        members = np.flatnonzero(course.run == number)
        centre[members], slope[members] = _local_line(
            course.along[members].astype(np.float64), across[members], weight[members]
        )
    return replace(course, across=centre, slope=slope)


def _local_line(along: Floats, across: Floats, weight: Floats) -> tuple[Floats, Floats]:
    start = along - along[0]
    weight = np.maximum(weight, 1e-9)

    def total(values: Floats) -> Floats:
        result: Floats = gaussian_filter1d(values, LOCAL, mode="constant", truncate=3.0)
        return result

    w, x, y = total(weight), total(weight * start), total(weight * across)
    xx, xy = total(weight * start**2), total(weight * start * across)
    spread = np.maximum(w * xx - x * x, 0.0)
    slope = np.where(spread > 1e-9 * np.maximum(w * xx, 1e-12), (w * xy - x * y) / np.maximum(spread, 1e-12), 0.0)
    slope = np.clip(slope, -3.0, 3.0)
    return (y + slope * (w * start - x)) / w, slope


def _smoothed(walked: Floats, overshoot: float) -> tuple[Floats, Floats]:
    step = np.hypot(*np.diff(walked, axis=0).T)
    walked = walked[np.r_[True, step > 0]]
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(walked, axis=0).T))]
    ends = []
    for near in (walked[:16], walked[::-1][:16]):
        outward = near[min(2, len(near) - 1)] - near[-1]
        ends.append(outward / max(float(np.hypot(*outward)), 1e-9))
    first, last = walked[0] + overshoot * ends[0], walked[-1] + overshoot * ends[1]
    points = np.concatenate([first[None], walked, last[None]])
    run = np.r_[0.0, run + overshoot, run[-1] + 2.0 * overshoot]
    arc = np.arange(0.0, run[-1], DENSE)
    dense = np.stack([np.interp(arc, run, points[:, 0]), np.interp(arc, run, points[:, 1])], axis=1)
    return _slid(dense, WALK_SMOOTHING / DENSE), arc


def _slid(dense: Floats, sigma: float) -> Floats:
    """Gaussian smoothing that keeps the ends where they are (odd reflection)."""
    pad = min(int(4 * sigma), len(dense) - 1)
    before = 2.0 * dense[0] - dense[pad:0:-1]
    after = 2.0 * dense[-1] - dense[-2 : -pad - 2 : -1]
    smooth = gaussian_filter1d(np.concatenate([before, dense, after]), sigma, axis=0)
    result: Floats = smooth[pad : pad + len(dense)]
    return result


def _kinks(dense: Floats, arc: Floats) -> list[tuple[float, float]]:
    """Arc and turn in rad of every kink."""
    near, far = int(2.0 / DENSE), int(LEG / DENSE)
    if len(dense) < 2 * far + 2:
        return []
    middle = np.arange(far, len(dense) - far)
    before = dense[middle - near] - dense[middle - far]
    after = dense[middle + far] - dense[middle + near]
    turn = np.abs(np.arctan2(before[:, 0] * after[:, 1] - before[:, 1] * after[:, 0], (before * after).sum(axis=1)))
    found = []
    while turn.size and turn.max() > np.radians(KINK_DEG):
        top = int(turn.argmax())
        # a plateau belongs to one kink: its middle
        level = np.flatnonzero(turn > 0.9 * turn[top])
        level = level[np.abs(level - top) < far]
        at = round(float(level.mean()))
        found.append((float(arc[middle[at]]), float(turn[top])))
        turn[max(0, at - far) : at + far] = 0.0
    return sorted(found)


def _tangents(dense: Floats, arc: Floats, kinks: list[tuple[float, float]]) -> Floats:
    tangent = np.gradient(dense, axis=0)
    cuts = [0, *np.searchsorted(arc, [kink for kink, _ in kinks]).tolist(), len(arc)]
    for low, high in pairwise(cuts):
        if high - low > 1:
            tangent[low:high] = gaussian_filter1d(tangent[low:high], 4.0 / DENSE, axis=0, mode="nearest")
    return tangent


def _flat(tangent: Floats) -> NDArray[np.bool_]:
    """Where the line runs flat; near 45 degrees as it ran before, so that it does not change to and fro."""
    across, down = np.abs(tangent).T
    decided = np.flatnonzero(np.maximum(across, down) > DECIDED * np.minimum(across, down))
    if decided.size == 0:
        return np.full(len(tangent), bool(across.sum() >= down.sum()))
    last = np.searchsorted(decided, np.arange(len(tangent)), side="right") - 1
    at = decided[np.maximum(last, 0)]
    flat: NDArray[np.bool_] = across[at] >= down[at]
    return flat


def _runs(flat: NDArray[np.bool_], arc: Floats, kinks: list[tuple[float, float]]) -> NDArray[np.intp]:
    change = np.r_[False, flat[1:] != flat[:-1]]
    for kink, _ in kinks:
        change[min(int(np.searchsorted(arc, kink)), len(arc) - 1)] = True
    return np.cumsum(change).astype(np.intp)


def _kink_reach(turn: float, width: float) -> float:
    """Length of either leg on which the other leg's stroke lies within the profile."""
    inside = max(np.pi - turn, 0.2)
    return float(np.clip((0.5 * width + 1.0) / np.tan(inside / 2) + 1.5, 0.5 * width + 1.0, 5.0 * width + 3.0))
