"""One number with its 95 % interval against one limit: meets, fails, undecided, at limit or not covered."""

import math
from dataclasses import dataclass

from curvelab.records.answer import EdgeAnswer
from curvelab.records.finding import Outcome

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


def judge_number(limit: Limit, answer: EdgeAnswer) -> Judgement:
    """The outcome of any number against any limit."""
    status = str(answer.status)
    if status not in ("value", "at_least", "at_most"):
        return Judgement(outcome="not covered", note=_SILENT.get(status, "The curve does not reach there."))
    value, interval = float(answer.value), interval_of(answer)
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
    value, interval = float(answer.value), interval_of(answer)
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


def interval_of(answer: EdgeAnswer) -> Interval | None:
    """The 95 % interval of an answer; None where it is not known."""
    lower, upper = float(answer.lower), float(answer.upper)
    return None if math.isnan(lower) or math.isnan(upper) else (lower, upper)
