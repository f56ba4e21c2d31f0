"""One answer of a device against one limit: meets, fails, undecided, at limit or not covered."""

import math
from dataclasses import dataclass, replace

from curvelab.records.answer import EdgeAnswer
from curvelab.records.finding import Outcome
from curvelab.standards.point import Point

NEAR = 0.005
"""A best value this close to the limit, relative, may be `at limit`."""

NARROW = 0.01
"""An interval narrower than this, relative to the limit, makes it so."""

_SAME = 1e-9
"""Relative difference within which a value is the limit itself; a rounding decides nothing."""

_SILENT = {
    "not_seen": "The device does not see such a current.",
    "above_breaking": "The current exceeds the breaking capacity.",
}
_CLEANER = "The interval holds the limit: a larger or cleaner sheet, or a table of the maker's, would settle it."

Interval = tuple[float, float]


@dataclass(frozen=True, kw_only=True, slots=True)
class Judgement:
    """An outcome with the value it rests on: a time, or ``in_current`` a current in the rule's base."""

    outcome: Outcome
    value: float | None = None
    interval: Interval | None = None
    in_current: bool = False
    note: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class Limit:
    """A number a value has to reach, or not to exceed."""

    number: float
    from_below: bool
    strict: bool

    def side(self, value: float) -> Outcome:
        """On which side of the limit a value lies."""
        if math.isclose(value, self.number, rel_tol=_SAME):
            return "fails" if self.strict else "meets"
        return "meets" if (value > self.number) == self.from_below else "fails"

    def is_straddled(self, interval: Interval) -> bool:
        """Whether an interval holds it."""
        return interval[0] <= self.number <= interval[1]

    def is_reached(self, value: float, interval: Interval | None) -> bool:
        """Best value near it, the interval about it narrow; points without uncertainty by their value alone."""
        if abs(value / self.number - 1) > NEAR:
            return False
        return interval is None or (self.is_straddled(interval) and (interval[1] - interval[0]) / self.number < NARROW)

    def margin(self, value: float) -> str:
        """How far a value at the limit lies from it."""
        if math.isclose(value, self.number, rel_tol=_SAME):
            return "It lies on the limit."
        return f"It lies {100 * (value / self.number - 1):+.2g} % from the limit."


def judge(point: Point, time: EdgeAnswer, current: EdgeAnswer | None, *, in_gap: bool = False) -> Judgement:
    """The outcome at a point from the time at its current and the current for its time.

    Both say the same of a band; the second measures the margin where the edge is steep, and bounds it in a gap.
    """
    limit = Limit(number=point.limit_s, from_below=point.is_hold, strict=point.rule.strict)
    if time.status == "never":
        return Judgement(outcome="meets" if point.is_hold else "fails", note="It never trips there.")
    judgement = judge_number(limit, time)
    if judgement.outcome == "not covered" and current is not None:
        return _beside_the_line(point, current, in_gap) or judgement
    if judgement.outcome == "undecided" and time.status == "value" and current is not None:
        return _in_current(point, current) or judgement
    return judgement if judgement.outcome != "fails" else _on_the_step(point, time, current) or judgement


def judge_energy(point: Point, current: EdgeAnswer) -> Judgement:
    """The outcome of an energy at a time, from the current for that time: current squared times time."""
    energy = point.rule.let_through_a2s or 0.0
    limit = Limit(number=energy, from_below=point.is_hold, strict=point.rule.strict)
    value, lower, upper = (float(each) ** 2 * point.limit_s for each in (current.value, current.lower, current.upper))
    told = EdgeAnswer(status=current.status, value=value, lower=lower, upper=upper, basis=current.basis)
    return judge_number(limit, told)


def judge_number(limit: Limit, answer: EdgeAnswer) -> Judgement:
    """The outcome of any number against any limit."""
    status = str(answer.status)
    if status not in ("value", "at_least", "at_most"):
        return Judgement(outcome="not covered", note=_SILENT.get(status, "The curve does not reach there."))
    value, interval = float(answer.value), _interval(answer)
    if status != "value":
        return _judged_by_bound(limit, answer)
    if interval is not None and not limit.is_straddled(interval):
        return Judgement(outcome=limit.side(value), value=value, interval=interval)
    if limit.is_reached(value, interval):
        return Judgement(outcome="at limit", value=value, interval=interval, note=limit.margin(value))
    if interval is None:
        return Judgement(outcome=limit.side(value), value=value, note="The uncertainty of the points is not known.")
    return Judgement(outcome="undecided", value=value, interval=interval, note=_CLEANER)


def _judged_by_bound(limit: Limit, answer: EdgeAnswer) -> Judgement:
    """A bound decides only on its own side of the limit: at least the hold time meets a hold test."""
    value, interval = float(answer.value), _interval(answer)
    at_least = answer.status == "at_least"
    sure = float(answer.lower if at_least else answer.upper)
    words = f"It is {str(answer.status).replace('_', ' ')} this"
    side = limit.side(value if math.isnan(sure) else sure)
    if side == ("meets" if at_least == limit.from_below else "fails"):
        return Judgement(outcome=side, value=value, interval=interval, note=f"{words}.")
    if limit.is_reached(value, interval):
        return Judgement(outcome="at limit", value=value, interval=interval, note=limit.margin(value))
    note = f"{words}: a sheet that reaches further, or is drawn for just this, would settle it."
    return Judgement(outcome="undecided", value=value, interval=interval, note=note)


def _in_current(point: Point, current: EdgeAnswer) -> Judgement | None:
    """At the limit, measured in current: where an edge is steep the time says little."""
    limit = Limit(number=point.current, from_below=point.is_hold, strict=point.rule.strict)
    if current.status != "value" or not limit.is_reached(float(current.value), _interval(current)):
        return None
    value = float(current.value)
    return Judgement(
        outcome="at limit", value=value, interval=_interval(current), in_current=True, note=limit.margin(value)
    )


def _beside_the_line(point: Point, current: EdgeAnswer, in_gap: bool) -> Judgement | None:
    """What a line that is not drawn at the current says there: times never rise with current.

    It fails where a fast edge drops below the time before the current is reached, or a slow edge only after it. It
    meets where the line is drawn on both sides of a gap; beyond its ends the absence of a line meets nothing.
    """
    limit = Limit(number=point.current, from_below=point.is_hold, strict=point.rule.strict)
    if current.status != "value":
        return None
    judgement = judge_number(limit, current)
    return None if judgement.outcome == "meets" and not in_gap else replace(judgement, in_current=True)


def _on_the_step(point: Point, time: EdgeAnswer, current: EdgeAnswer | None) -> Judgement | None:
    """Points without uncertainty that step at the very current: their time there decides nothing."""
    if current is None or time.status != "value" or _interval(time) is not None:
        return None
    return _in_current(point, current)


def _interval(answer: EdgeAnswer) -> Interval | None:
    lower, upper = float(answer.lower), float(answer.upper)
    return None if math.isnan(lower) or math.isnan(upper) else (lower, upper)
