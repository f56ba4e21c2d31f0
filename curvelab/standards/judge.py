"""A device's answers at a rule's point against its limit, in time or, where an edge is steep, in current."""

from dataclasses import replace

from curvelab.records.answer import EdgeAnswer
from curvelab.records.limit import Judgement, Limit, interval_of, judge_number
from curvelab.standards.point import Point


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


def _in_current(point: Point, current: EdgeAnswer) -> Judgement | None:
    """At the limit, measured in current: where an edge is steep the time says little."""
    limit = Limit(number=point.current, from_below=point.is_hold, strict=point.rule.strict)
    if current.status != "value" or not limit.is_reached(float(current.value), interval_of(current)):
        return None
    value = float(current.value)
    return Judgement(
        outcome="at limit", value=value, interval=interval_of(current), in_current=True, note=limit.margin(value)
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
    if current is None or time.status != "value" or interval_of(time) is not None:
        return None
    return _in_current(point, current)
