"""A rule in words, as a reviewer reads it."""

from curvelab.standards.point import Point
from curvelab.standards.rule import Rule
from curvelab.units import written_current, written_let_through, written_time

_VERBS = {None: ("trip", "trips"), "pre_arcing": ("melt", "melts"), "operating": ("operate", "operates")}
_LINES = {"fast": "the fast edge", "slow": "the slow edge", "mean": "the mean line"}


def requirement(point: Point, settings: str = "") -> str:
    """The requirement at a point: ``2.55 xIn from cold: trips in less than 60 s``."""
    rule, asked = point.rule, point.rule.asked
    if rule.let_through_a2s is not None:
        side = "at least" if point.is_hold else "at most"
        energy = written_let_through(rule.let_through_a2s)
        return f"Pre-arcing I2t at {written_time(point.limit_s)} is {side} {energy}" + _set_to(settings)
    where = written_test_current(rule, point.base)
    where += f" {asked.waveform}" if asked.waveform else " d.c." if asked.supply == "dc" else ""
    where += f" from {asked.start}" if asked.start else ""
    return f"{where}: {_demand(point)}" + _set_to(settings)


def written_test_current(rule: Rule, base: str) -> str:
    """The current of a rule: ``2.55 xIn``, or a range where a printed figure implies it within a rounding."""
    figures = 4 if base == "A" else 3
    current = written_current(rule.current, base, figures)
    if rule.current_from == rule.current:
        return current
    return f"{written_current(rule.current_from, base, figures)} to {current}"


def _demand(point: Point) -> str:
    rule, limit = point.rule, written_time(point.limit_s, 4)
    if rule.asked.edge is not None:
        side = "at least" if point.is_hold else "at most"
        return f"{_LINES[rule.asked.edge]} takes {side} {limit}"
    plain, inflected = _VERBS[rule.asked.meaning]
    if point.is_hold:
        return f"does not {plain} {'within' if rule.strict else 'before'} {limit}"
    return f"{inflected} {'in less than' if rule.strict else 'within'} {limit}"


def _set_to(settings: str) -> str:
    return f" (set to {settings})" if settings else ""
