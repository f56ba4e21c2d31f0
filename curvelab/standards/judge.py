"""One answer of a device against one limit: meets, fails, undecided, at limit or not covered."""

import math
from dataclasses import dataclass

from curvelab.records.answer import EdgeAnswer
from curvelab.records.finding import Outcome
from curvelab.standards.rules import Rule

NEAR = 0.005
"""A best value this close to the limit, relative, may be `at limit`."""

NARROW = 0.01
"""An interval narrower than this, relative to the limit, makes it so."""


_SAME = 1e-9
"""Relative difference within which a value is the limit itself; a rounding decides nothing."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Judgement:
    """An outcome with the value it rests on: a time, or ``in_current`` a current in the rule's base."""

    outcome: Outcome
    value: float | None = None
    interval: tuple[float, float] | None = None
    in_current: bool = False
    note: str = ""


def judge(rule: Rule, time: EdgeAnswer, current: EdgeAnswer | None) -> Judgement:
    """The outcome of a rule from the time at its current and the current for its time.

    Both say the same of a band; the second measures the margin where the edge is steep.
    """
    status = str(time.status)
    if status == "never":
        return Judgement(outcome="meets" if rule.requirement == "hold" else "fails", note="It never trips there.")
    if status in ("at_least", "at_most"):
        return _judged_by_bound(rule, status, float(time.value), float(time.lower), float(time.upper))
    if status != "value":
        return Judgement(outcome="not covered", note="The curve does not reach there.")
    value, interval = float(time.value), _interval(time)
    if interval is not None and not _straddles(interval, rule.limit_s):
        return Judgement(outcome=_side(rule, value), value=value, interval=interval)
    return _close(rule, value, interval, current)


def _close(rule: Rule, value: float, interval: tuple[float, float] | None, current: EdgeAnswer | None) -> Judgement:
    """The interval holds the limit, or is not known: then points without uncertainty decide by their value."""
    if _at_limit(value, interval, rule.limit_s):
        return Judgement(outcome="at limit", value=value, interval=interval, note=_margin(value, rule.limit_s))
    if current is not None and current.status == "value":
        multiple, reach = float(current.value), _interval(current)
        if _at_limit(multiple, reach, rule.multiple):
            note = _margin(multiple, rule.multiple)
            return Judgement(outcome="at limit", value=multiple, interval=reach, in_current=True, note=note)
    if interval is None:
        note = "The uncertainty of the points is not known."
        return Judgement(outcome=_side(rule, value), value=value, note=note)
    note = "The interval holds the limit: a larger or cleaner sheet, or a table of the maker's, would settle it."
    return Judgement(outcome="undecided", value=value, interval=interval, note=note)


def _judged_by_bound(rule: Rule, status: str, value: float, lower: float, upper: float) -> Judgement:
    """A bound decides only on its own side of the limit: at least the hold time meets a hold test."""
    from_below = status == "at_least"
    sure = lower if from_below else upper
    interval = None if math.isnan(lower) or math.isnan(upper) else (lower, upper)
    words = f"The time is {status.replace('_', ' ')} this"
    side = _side(rule, value if math.isnan(sure) else sure)
    if side == ("meets" if from_below == (rule.requirement == "hold") else "fails"):
        return Judgement(outcome=side, value=value, interval=interval, note=f"{words}.")
    if _at_limit(value, interval, rule.limit_s):
        return Judgement(outcome="at limit", value=value, interval=interval, note=_margin(value, rule.limit_s))
    note = f"{words}: a sheet that reaches further, or is drawn for this start, would settle it."
    return Judgement(outcome="undecided", value=value, interval=interval, note=note)


def _side(rule: Rule, value: float) -> Outcome:
    """On which side of the limit a value lies."""
    if math.isclose(value, rule.limit_s, rel_tol=_SAME):
        return "fails" if rule.strict else "meets"
    return "meets" if (value > rule.limit_s) == (rule.requirement == "hold") else "fails"


def _straddles(interval: tuple[float, float], limit: float) -> bool:
    return interval[0] <= limit <= interval[1]


def _at_limit(value: float, interval: tuple[float, float] | None, limit: float) -> bool:
    """Best value near the limit, the interval about it narrow; points without uncertainty by their value alone."""
    if abs(value / limit - 1) > NEAR:
        return False
    return interval is None or (_straddles(interval, limit) and (interval[1] - interval[0]) / limit < NARROW)


def _interval(answer: EdgeAnswer) -> tuple[float, float] | None:
    lower, upper = float(answer.lower), float(answer.upper)
    return None if math.isnan(lower) or math.isnan(upper) else (lower, upper)


def _margin(value: float, limit: float) -> str:
    return f"It lies {100 * (value / limit - 1):+.2g} % from the limit."
