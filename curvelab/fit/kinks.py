"""Where the tangent jumps: candidates for kinks, from parabolas fitted on either side of every place.

At a kink the jump of the slope stays the same however short the two parabolas are; on a smooth bend it shrinks with
the cube of their length. A candidate must be significant at one length and not shrink at the shorter ones.
"""

from dataclasses import dataclass

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view

from curvelab.fit.noise import Noise
from curvelab.fit.strand import Strand
from curvelab.records.arrays import Floats

SIGNIFICANT = 6.0
"""Standard deviations of the jump, and root of the misfit it saves."""

LEAST_JUMP = 0.02
"""Of dv/du; a smooth model rounds a smaller corner by less than a tenth of a pixel at 400 px a decade."""

MEMBERS = 20
"""Groups of points that a parabola is fitted to; at the shortest length a group is one point."""

STRIDE = 3
"""Of the places between groups, every so many-th is looked at: a jump stands out over many."""

FEWEST_MEMBERS = 6
LONGEST = 0.3
"""Decades that a parabola covers at most."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Jumps:
    """Two parabolas beside every place, against one parabola through both, for one length.

    ``jump`` of the slope with its ``sd``, infinite where the points do not tell. ``gain`` is the misfit (chi square)
    that two save against one, over what two leave by what they should leave: greatest at the kink itself, while beside
    it the jump overshoots and one parabola gains much by bending round the corner.
    """

    place: Floats
    jump: Floats
    sd: Floats
    gain: Floats
    length: float


def kink_candidates(strand: Strand, noise: Noise) -> list[float]:
    """Places u where the tangent jumps, in order."""
    scales: list[Jumps] = []
    found: list[float] = []
    group = 1
    while group * 2 * FEWEST_MEMBERS <= np.count_nonzero(strand.kept):
        groups = _Groups.of(strand, noise, group)
        jumps = slope_jumps(groups, noise)
        if scales and jumps.length > LONGEST:
            break
        found.extend(_new_kinks(groups, jumps, scales, found))
        scales.append(jumps)
        group *= 2
    return sorted(found)


def slope_jumps(groups: "_Groups", noise: Noise) -> Jumps:
    """Compare parabolas on either side of each place, leaving out what a corner's rounding reaches."""
    u, v, weight = groups.u, groups.v, groups.weight
    step = float(np.median(np.diff(u)))
    members = MEMBERS + int(np.ceil(groups.hole / max(step, 1e-12)))
    place = (0.5 * (u[1:] + u[:-1]))[::STRIDE]
    length = min(members * step, LONGEST)
    distance = _windows(u, members) - place[:, None]
    weights = _windows(np.where(weight > 0.0, weight, 0.0), members, ends=0.0)
    weights = np.where((np.abs(distance) >= groups.hole) & (np.abs(distance) <= 2.0 * length), weights, 0.0)
    level = _windows(v, members)
    level = level - level[:, members - 1 : members]
    left = _parabola(distance[:, :members] / length, level[:, :members], weights[:, :members])
    right = _parabola(distance[:, members:] / length, level[:, members:], weights[:, members:])
    both = _parabola(distance / length, level, weights)
    usable = left.usable & right.usable
    apart = left.misfit + right.misfit
    expected = np.maximum(np.count_nonzero(weights, axis=1) - 6, 1) / noise.inflation
    return Jumps(
        place=place,
        jump=np.where(usable, right.slope - left.slope, 0.0) / length,
        sd=np.where(usable, np.sqrt(left.variance + right.variance) / length, np.inf),
        gain=np.where(usable, (both.misfit - apart) / np.maximum(apart / expected, 1.0), 0.0),
        length=length,
    )


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Groups:
    """Means of neighbouring points and their weights (1 / variance of v); ``hole`` as far as a corner is rounded."""

    u: Floats
    v: Floats
    weight: Floats
    hole: float

    @staticmethod
    def of(strand: Strand, noise: Noise, group: int) -> "_Groups":
        kept = strand.kept
        count = int(np.count_nonzero(kept)) // group
        u, v = (column[kept][: count * group].reshape(count, group).mean(axis=1) for column in (strand.u, strand.v))
        # On average over directions, v scatters by sqrt(1.5) of what the normal does.
        variance = 1.5 * noise.inflation * (noise.scale * strand.sd[kept][: count * group]) ** 2
        return _Groups(u=u, v=v, weight=(1.0 / variance).reshape(count, group).sum(axis=1), hole=strand.blur)


def _windows(values: Floats, members: int, ends: float | None = None) -> Floats:
    """The ``members`` values on either side of every ``STRIDE``-th place between two, shape (places, 2 members)."""
    if ends is None:
        padded = np.pad(values, members - 1, mode="edge")
    else:
        padded = np.pad(values, members - 1, constant_values=ends)
    return sliding_window_view(padded, 2 * members)[::STRIDE]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Parabola:
    """At every place: whether there are points enough, slope, its variance, the misfit (chi square)."""

    usable: np.ndarray
    slope: Floats
    variance: Floats
    misfit: Floats


def _parabola(distance: Floats, level: Floats, weight: Floats) -> _Parabola:
    """Weighted least squares row by row."""
    usable = np.count_nonzero(weight, axis=1) >= FEWEST_MEMBERS
    powers = [weight]
    for _ in range(4):
        powers.append(powers[-1] * distance)
    moments = [power.sum(axis=1) for power in powers]
    levels = np.stack([(power * level).sum(axis=1) for power in powers[:3]], axis=1)
    normal = np.array([[moments[i + j] for j in range(3)] for i in range(3)]).transpose(2, 0, 1)
    inverse = np.linalg.inv(np.where(usable[:, None, None], normal, np.eye(3)))
    coefficients = (inverse @ levels[:, :, None])[:, :, 0]
    model = coefficients[:, :1] + distance * (coefficients[:, 1:2] + distance * coefficients[:, 2:])
    return _Parabola(
        usable=usable,
        slope=coefficients[:, 1],
        variance=np.maximum(inverse[:, 1, 1], 0.0),
        misfit=(weight * (level - model) ** 2).sum(axis=1),
    )


def _new_kinks(groups: "_Groups", jumps: Jumps, finer: list[Jumps], found: list[float]) -> list[float]:
    """Kinks at this length that no finer length has found and none contradicts, the clearest first."""
    seen: list[float] = []
    kinks: list[float] = []
    for k in np.argsort(-jumps.gain):
        if jumps.gain[k] < SIGNIFICANT**2:
            break
        place = float(jumps.place[k])
        if any(abs(place - other) < jumps.length for other in (*found, *seen)):
            continue
        seen.append(place)
        kink = _best_split(groups, place, jumps.length)
        if kink is None or any(abs(kink.place - other) < 0.5 * jumps.length for other in (*found, *kinks)):
            continue
        if all(_agrees(kink.jump, kink.place, scale) for scale in finer):
            kinks.append(kink.place)
    return kinks


@dataclass(frozen=True, kw_only=True, slots=True)
class _Split:
    place: float
    jump: float


def _best_split(groups: "_Groups", near: float, length: float) -> _Split | None:
    """The place about which two parabolas fit the points around ``near`` best; None without a significant jump there.

    The points stay the same for every place tried, unlike in sliding windows, so that their misfits compare.
    """
    inside = np.flatnonzero(np.abs(groups.u - near) <= 1.5 * length)
    if len(inside) < 2 * FEWEST_MEMBERS:
        return None
    u, v, weight = groups.u[inside], groups.v[inside], groups.weight[inside]
    place = 0.5 * (u[FEWEST_MEMBERS : 1 - FEWEST_MEMBERS] + u[FEWEST_MEMBERS - 1 : -FEWEST_MEMBERS])
    distance = (u[None, :] - place[:, None]) / length
    level = np.broadcast_to(v - v[len(v) // 2], distance.shape)
    hole = groups.hole / length
    left = _parabola(distance, level, np.where(distance <= -hole, weight, 0.0))
    right = _parabola(distance, level, np.where(distance >= hole, weight, 0.0))
    # What the hole leaves out must not count as fitted: every point left out is taken to miss by what others do.
    used = np.count_nonzero(np.abs(distance) >= hole, axis=1)
    misfit = np.where(left.usable & right.usable, (left.misfit + right.misfit) / np.maximum(used - 6, 1), np.inf)
    k = int(np.argmin(misfit))
    jump = (right.slope[k] - left.slope[k]) / length
    sd = np.sqrt(left.variance[k] + right.variance[k]) / length
    if not np.isfinite(misfit[k]) or abs(jump) < max(LEAST_JUMP, SIGNIFICANT * sd):
        return None
    return _Split(place=float(place[k]), jump=float(jump))


def _agrees(jump: float, place: float, finer: Jumps) -> bool:
    """Whether parabolas of a shorter length see the same jump somewhere near, or cannot tell."""
    near = (np.abs(finer.place - place) <= 0.5 * finer.length) & np.isfinite(finer.sd)
    alike = np.abs(jump - finer.jump[near]) <= 0.3 * abs(jump) + 3.0 * finer.sd[near]
    return bool(alike.any() or not near.any())
