"""Lines and labels together decide the ruler of an axis: its scale, direction, and which decade is which."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from itertools import combinations

import numpy as np

from curvelab.axes.comb import Ruler
from curvelab.axes.labels import Label
from curvelab.axes.likelihood import Laid, laid_linear, laid_log
from curvelab.axes.pattern import STEPS
from curvelab.axes.rulers import fitted, log_rulers
from curvelab.axes.seen import Seen
from curvelab.records.arrays import Floats
from curvelab.records.axes import Scale

LABEL_SD = 0.35
"""Standard deviation of a label's middle from its line, in half heights."""

MISREAD = 0.03
"""Least chance that a label says something else or belongs to no line."""

AGREEING = 1.3
"""Half heights from its value's place within which a label agrees."""

MOST_LABELS = 8
"""Labels whose pairs are tried as rulers; the surest."""

MOST_PAIRS = 6
FEW_LINES = 12
"""Lines up to which each label's own line is taken for the ruler: too few to find their pattern by themselves."""

LINEAR_SHARE = 0.5
"""Share of the labels that must lie on one linear ruler for the scale to be linear at all."""

TRIED_DECADES = 4
LOG_LIKELIER = 2.0
"""Nats by which a log scale is likelier on a time-current sheet before anything is seen."""

USUAL_DIRECTION = 5.0
"""Nats by which values that rise to the right and upwards are likelier before anything is seen."""

Factor = Callable[[str | None], float]
"""Factor from a label's unit to the axis's."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Agreed:
    """A label that agrees: its printed value and own unit, and the scaled value in the axis's printed unit."""

    label: Label
    value: float
    unit: str | None
    scaled: float


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Ruling:
    """A ruler of one axis as lines and labels have it.

    Parameters
    ----------
    scale : "log" or "linear"
    ruler : Ruler
        Across at the lines' middle, by scaled value in the axis's printed unit.
    laid : Laid
        The pattern on the lines.
    agreeing, contrary : tuple of Agreed, and of Label
        Labels that agree, and labels that do not.
    score : float
        Log likelihood ratio in nats.
    margin : float
        Nats by which it is better than the best that differs.
    """

    scale: Scale
    ruler: Ruler
    laid: Laid
    agreeing: tuple[Agreed, ...]
    contrary: tuple[Label, ...]
    score: float
    margin: float = 0.0


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Readings:
    """All readings of all labels, flat: label number, value in the axis's unit, own value, unit, chance."""

    labels: tuple[Label, ...]
    owner: "np.ndarray[tuple[int], np.dtype[np.int64]]"
    value: Floats
    chance: Floats
    printed: tuple[tuple[float, str | None], ...]
    at: Floats
    sd: Floats

    @classmethod
    def of(cls, labels: list[Label], factor: Factor, line_sd: float) -> "_Readings":
        rows = [(k, reading) for k, label in enumerate(labels) for reading in label.readings]
        return cls(
            labels=tuple(labels),
            owner=np.array([k for k, _ in rows], dtype=np.int64),
            value=np.array([reading.value * factor(reading.unit) for _, reading in rows], dtype=np.float64),
            chance=np.array([reading.chance * (1 - MISREAD) for _, reading in rows], dtype=np.float64),
            printed=tuple((reading.value, reading.unit) for _, reading in rows),
            at=np.array([label.at for label in labels], dtype=np.float64),
            sd=np.array([np.hypot(LABEL_SD * label.half, line_sd) for label in labels], dtype=np.float64),
        )

    def scaled(self, scale: Scale) -> Floats:
        """Scaled values in the axis's printed unit."""
        return np.log10(self.value) if scale == "log" else self.value


def rule(seen: Seen, labels: list[Label], factor: Factor, scales: tuple[Scale, ...]) -> Ruling | None:
    """The best ruling of an axis with its margin over the best that differs; None where there are no labels.

    Parameters
    ----------
    seen : Seen
    labels : list of Label
    factor : callable
        Factor from a label's own unit (None for none) to the axis's.
    scales : tuple
        What the scale may be.
    """
    readings = _Readings.of(labels, factor, seen.sd)
    if not len(readings.value):
        return None
    found: list[_Scored] = []
    if "log" in scales:
        found += _scored_logs(seen, log_rulers(seen), readings)
        if not any(_settles(each, readings) for each in found):
            found += _scored_logs(seen, _paired(seen, readings, log=True), readings)
    if "linear" in scales:
        found += [_scored(seen, laid, readings, "linear") for laid in _paired(seen, readings, log=False)]
    if not found:
        return None
    best = max(found, key=lambda each: each.score)
    others = [each.score for each in found if _differs(seen, best, each)]
    return _ruling(seen, best, readings, best.score - max(others, default=0.0))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Scored:
    """A pattern with its decades told, and how well lines and labels agree with it."""

    scale: Scale
    laid: Laid
    score: float
    told: int


def _settles(scored: _Scored, readings: _Readings) -> bool:
    """Whether most labels already agree with a ruler that the lines gave by themselves."""
    return scored.told >= max(2, 0.7 * len(readings.labels))


def _scored_logs(seen: Seen, found: list[Laid], readings: _Readings) -> list[_Scored]:
    """Rulers with the decades that most labels vote for."""
    scored = []
    for laid in found:
        turns = laid.ruler.scaled(readings.at)[readings.owner] - np.log10(readings.value)
        decades, votes = np.unique(np.round(turns), return_counts=True)
        likely = decades[np.argsort(-votes, kind="stable")][:TRIED_DECADES]
        scored += [_scored(seen, _moved(laid, float(decade)), readings, "log") for decade in likely]
    return scored


def _moved(laid: Laid, decades: float) -> Laid:
    """The same pattern with values of so many decades less."""
    ruler = Ruler(origin=laid.ruler.origin + decades * laid.ruler.per_scaled, per_scaled=laid.ruler.per_scaled)
    return replace(laid, ruler=ruler, lines=laid.lines - decades)


def _scored(seen: Seen, laid: Laid, readings: _Readings, scale: Scale) -> _Scored:
    """What the labels say of a pattern."""
    off = readings.at[readings.owner] - laid.ruler.across(readings.scaled(scale))
    sd = readings.sd[readings.owner]
    density = np.exp(-0.5 * (off / sd) ** 2) / (np.sqrt(2 * np.pi) * sd) * seen.length
    told = np.bincount(readings.owner, readings.chance * density, len(readings.labels))
    other = np.maximum(1.0 - np.bincount(readings.owner, readings.chance, len(readings.labels)), MISREAD)
    usual = (laid.ruler.per_scaled > 0) == seen.rises
    prior = (LOG_LIKELIER if scale == "log" else 0.0) + (USUAL_DIRECTION if usual else 0.0)
    score = laid.score + float(np.sum(np.log(other + told))) + prior
    return _Scored(scale=scale, laid=laid, score=score, told=int(np.sum(told > other)))


def _ruling(seen: Seen, scored: _Scored, readings: _Readings, margin: float) -> Ruling:
    """The ruling with the labels that agree and those that do not."""
    scaled = readings.scaled(scored.scale)
    off = np.abs(readings.at[readings.owner] - scored.laid.ruler.across(scaled))
    agreeing, contrary = [], []
    for k, label in enumerate(readings.labels):
        near = np.flatnonzero((readings.owner == k) & (off <= AGREEING * label.half + seen.sd))
        if not len(near):
            contrary.append(label)
            continue
        best = int(near[np.argmax(readings.chance[near])])
        value, unit = readings.printed[best]
        agreeing.append(Agreed(label=label, value=value, unit=unit, scaled=round(float(scaled[best]), 9)))
    return Ruling(
        scale=scored.scale,
        ruler=scored.laid.ruler,
        laid=scored.laid,
        agreeing=tuple(agreeing),
        contrary=tuple(contrary),
        score=scored.score,
        margin=margin,
    )


def _paired(seen: Seen, readings: _Readings, *, log: bool) -> list[Laid]:
    """Rulers through pairs of labels, fitted to all labels that agree and then to the lines."""
    usable = np.flatnonzero(readings.value > 0) if log else np.arange(len(readings.value))
    surest = usable[np.argsort(-readings.chance[usable], kind="stable")][:MOST_LABELS]
    scaled = readings.scaled("log" if log else "linear")
    at, half = readings.at[readings.owner], np.array([label.half for label in readings.labels])[readings.owner]
    sets: dict[tuple[int, ...], Ruler] = {}
    for i, j in combinations(surest, 2):
        if readings.owner[i] == readings.owner[j] or scaled[i] == scaled[j] or abs(at[i] - at[j]) < 4 * half[i]:
            continue
        per_scaled = float((at[j] - at[i]) / (scaled[j] - scaled[i]))
        through = Ruler(origin=float(at[i] - per_scaled * scaled[i]), per_scaled=per_scaled)
        members = np.flatnonzero(np.abs(at - through.across(scaled)) <= AGREEING * half)
        sets.setdefault(tuple(int(k) for k in members), through)
    most = max((len(set(readings.owner[list(members)])) for members in sets), default=0)
    if not log and most < LINEAR_SHARE * len(readings.labels):
        return []
    ranked = sorted(sets.items(), key=lambda item: (-len(item[0]), item[0]))[:MOST_PAIRS]
    rulers = [_through(at, scaled, members) or ruler for members, ruler in ranked]
    if len(seen.at) <= FEW_LINES:
        on_lines = _on_lines(seen, at, AGREEING * half)
        rulers += [ruler for members, _ in ranked if (ruler := _through(on_lines, scaled, members))]
    laid = _laid_logs if log else _laid_linears
    return laid(seen, rulers, float(np.median(half)) if len(half) else seen.sd)


def _on_lines(seen: Seen, at: Floats, reach: Floats) -> Floats:
    """The line next to each place, or the place itself where none is within reach."""
    if not len(seen.at):
        return at
    nearest = seen.at[np.argmin(np.abs(seen.at - at[:, None]), axis=1)]
    return np.where(np.abs(nearest - at) <= reach, nearest, at)


def _through(at: Floats, scaled: Floats, members: tuple[int, ...]) -> Ruler | None:
    chosen = list(members)
    if len(chosen) < 2 or np.ptp(scaled[chosen]) == 0:
        return None
    per_scaled, origin = np.polyfit(scaled[chosen], at[chosen], 1)
    return Ruler(origin=float(origin), per_scaled=float(per_scaled))


def _laid_logs(seen: Seen, rulers: list[Ruler], half: float) -> list[Laid]:
    middle, error = 0.5 * sum(seen.span), half / seen.length
    both = [ruler for first in rulers for ruler in (first, fitted(seen, first, middle, error))]
    return [laid_log(seen, ruler) for ruler in both]


def _laid_linears(seen: Seen, rulers: list[Ruler], half: float) -> list[Laid]:
    laid = []
    for ruler in rulers:
        steps = _steps(seen, ruler)
        first = laid_linear(seen, ruler, steps)
        laid += [first, laid_linear(seen, _on_steps(seen, ruler, half, steps), steps)]
    return laid


def _steps(seen: Seen, ruler: Ruler) -> list[float]:
    """Steps 1, 2, 2.5, 5 x 10^k that a linear axis may have: lines at least eight deviations apart, four at least."""
    shortest, longest = 8.0 * seen.sd / abs(ruler.per_scaled), seen.length / (3.0 * abs(ruler.per_scaled))
    low, high = int(np.floor(np.log10(shortest))) - 1, int(np.ceil(np.log10(longest))) + 1
    steps = (mantissa * 10.0**k for k in range(low, high + 1) for mantissa in STEPS)
    return sorted(step for step in steps if shortest <= step <= longest)


def _on_steps(seen: Seen, ruler: Ruler, half: float, steps: list[float]) -> Ruler:
    """The ruler moved so that the lines stand on steps: the coarsest on which most lines stand."""
    best, most = ruler, 0.0
    for step in steps:
        trial, near = ruler, min(1.2 * half, 0.4 * step * abs(ruler.per_scaled))
        for _ in range(3):
            scaled = trial.scaled(seen.at)
            value = step * np.round(scaled / step)
            good = np.abs(seen.at - trial.across(value)) <= near
            if np.sum(good) < 3 or np.ptp(value[good]) == 0:
                break
            per_scaled, origin = np.polyfit(value[good], seen.at[good], 1)
            trial, near = Ruler(origin=float(origin), per_scaled=float(per_scaled)), max(0.5 * near, 3 * seen.sd)
        score = laid_linear(seen, trial, [step]).score
        if score > most:
            best, most = trial, score
    return best


def _differs(seen: Seen, one: _Scored, other: _Scored) -> bool:
    """Whether two rulers put other values at the places of the plot."""
    if one.scale != other.scale:
        return True
    ends = np.array(seen.span)
    apart = np.abs(one.laid.ruler.scaled(ends) - other.laid.ruler.scaled(ends)) * abs(one.laid.ruler.per_scaled)
    return bool(apart.max() > max(4.0 * seen.sd, 0.004 * seen.length))
