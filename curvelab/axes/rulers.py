"""Log rulers that the lines of a plot allow, without any label: the decade's length and the phase within it.

The gap of two neighbouring lines with supposed mantissas gives a ruler; how well it foresees all other lines, each as
exactly as that gap allows, ranks it. The best are then fitted to the lines, from the gap outwards.
"""

import numpy as np

from curvelab.axes.comb import Ruler
from curvelab.axes.likelihood import Laid, laid_log, line_terms
from curvelab.axes.pattern import MAIN
from curvelab.axes.seen import Seen
from curvelab.records.arrays import Floats

MOST_GAPS = 14
"""Gaps tried, the widest."""

MOST_FITTED = 10
"""Rulers fitted to all lines."""

MOST_DECADES = 16.0
LEAST_DECADES = 0.4
"""Decades that an axis shows at most and at least."""

CIRCLE = np.log10(np.append(MAIN, 10.0))
"""Places of the main lines within a decade, closed."""

FIT_ROUNDS = 5


def log_rulers(seen: Seen) -> list[Laid]:
    """Rulers fitted to the lines, best first; values rise with places, and are known but for the decade.

    An axis that falls with places gives rulers with a negative length of the decade.
    """
    if len(seen.at) < 3:
        return []
    supposed = [_supposed(seen, sign) for sign in (1.0, -1.0)]
    ranked = np.concatenate(supposed)
    best = ranked[np.argsort(-ranked[:, 0], kind="stable")][: 4 * MOST_FITTED]
    laid: list[Laid] = []
    tried: list[tuple[float, float]] = []
    for _, per_decade, origin, middle, error in best:
        if len(laid) >= MOST_FITTED:
            break
        if any(_alike(seen, (per_decade, origin), other) for other in tried):
            continue
        tried.append((per_decade, origin))
        ruler = fitted(seen, Ruler(origin=origin, per_scaled=per_decade), middle, error)
        laid.append(laid_log(seen, ruler))
    return sorted(laid, key=lambda each: -each.score)


def _supposed(seen: Seen, sign: float) -> Floats:
    """Rows (score, length of the decade, origin, middle of the gap, relative error) of supposed rulers."""
    at = seen.at
    ends = np.array([(i, j) for step in (1, 2) for i, j in zip(range(len(at)), range(step, len(at)), strict=False)])
    gap = at[ends[:, 1]] - at[ends[:, 0]]
    widest = np.argsort(-gap, kind="stable")[:MOST_GAPS]
    ends, gap = ends[widest], gap[widest]
    low, high = (index.ravel() for index in np.triu_indices(len(CIRCLE), 1))
    per_decade = (gap[:, None] / (CIRCLE[high] - CIRCLE[low])).ravel()
    # On a falling axis the higher mantissa stands first.
    first = CIRCLE[low] if sign > 0 else CIRCLE[high]
    origin = (at[ends[:, 0]][:, None] - sign * gap[:, None] / (CIRCLE[high] - CIRCLE[low]) * first).ravel()
    middle = np.repeat(at[ends].mean(axis=1), len(low))
    error = np.repeat(1.5 * seen.sd / gap, len(low))
    decades = seen.length / per_decade
    usable = (decades >= LEAST_DECADES) & (decades <= MOST_DECADES)
    per_decade, origin, middle, error = (part[usable] for part in (per_decade, origin, middle, error))
    phase = np.mod(sign * (at - origin[:, None]) / per_decade[:, None], 1.0)
    right = np.clip(np.searchsorted(CIRCLE, phase), 1, len(CIRCLE) - 1)
    distance = np.minimum(np.abs(phase - CIRCLE[right - 1]), np.abs(phase - CIRCLE[right])) * per_decade[:, None]
    sd = np.hypot(seen.sd, error[:, None] * np.abs(at - middle[:, None]))
    spacing = per_decade[:, None] / len(MAIN)
    score = np.maximum(line_terms(distance, sd, spacing), np.where(sd > 0.3 * spacing, 0.0, -np.inf)).sum(axis=1)
    return np.column_stack([score, sign * per_decade, origin, middle, error])


def _alike(seen: Seen, one: tuple[float, float], other: tuple[float, float]) -> bool:
    """Whether two rulers agree all over the plot, but for whole decades."""
    places = np.array(seen.span)
    if one[0] * other[0] < 0:
        return False
    turns = (places - one[1]) / one[0] - (places - other[1]) / other[0]
    return bool(np.abs(turns - np.round(turns[0])).max() * abs(one[0]) < 3.0 * seen.sd)


def fitted(seen: Seen, ruler: Ruler, middle: float, error: float) -> Ruler:
    """The ruler through the main lines next to it, from ``middle`` outwards as far as it is exact enough."""
    at = seen.at
    for _ in range(FIT_ROUNDS):
        scaled = ruler.scaled(at)
        phase = np.mod(scaled, 1.0)
        right = np.clip(np.searchsorted(CIRCLE, phase), 1, len(CIRCLE) - 1)
        left = CIRCLE[right - 1]
        near = np.where(phase - left <= CIRCLE[right] - phase, left, CIRCLE[right])
        room = 0.35 * (CIRCLE[right] - left) * abs(ruler.per_scaled)
        sd = np.hypot(seen.sd, error * np.abs(at - middle))
        good = (np.abs(phase - near) * abs(ruler.per_scaled) <= 3.0 * sd) & (
            3.0 * sd <= np.maximum(room, 2.0 * seen.sd)
        )
        if np.sum(good) < 3 or np.ptp(at[good]) <= 0:
            return ruler
        value = (np.floor(scaled) + near)[good]
        if np.ptp(value) <= 0:
            return ruler
        per_scaled, origin = np.polyfit(value, at[good], 1)
        ruler = Ruler(origin=float(origin), per_scaled=float(per_scaled))
        middle = float(at[good].mean())
        spread = float(np.sqrt(np.sum((at[good] - middle) ** 2)))
        error = 2.0 * seen.sd / spread
    return ruler
