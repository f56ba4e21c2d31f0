"""A device checked against the rules that apply to it."""

from pathlib import Path

from curvelab.devices.device import Device
from curvelab.records.answer import EdgeAnswer, TripTimes
from curvelab.records.curve import Conditions
from curvelab.records.finding import Finding
from curvelab.standards.judge import Judgement, judge
from curvelab.standards.rules import Rule, load_rules
from curvelab.units import written_current, written_time


def check(device: Device, folder: Path | None = None) -> tuple[Finding, ...]:
    """Findings of every rule that applies to the device; none where no table knows its kind and characteristic.

    An adjustable device is checked at its settings only; without them there is nothing to check yet.

    Parameters
    ----------
    device : Device
    folder : path, optional
        Rule tables to use in place of those shipped with the program.

    Raises
    ------
    StandardError
        A rule table is not valid.
    """
    if not device.is_set:
        return ()
    return tuple(_finding(device, rule) for rule in load_rules(folder) if rule.is_for(device.nameplate))


def _finding(device: Device, rule: Rule) -> Finding:
    judgement = _judged(device, rule)
    limit, unit = (rule.multiple, rule.base) if judgement.in_current else (rule.limit_s, "s")
    return Finding(
        device=device.key,
        standard=rule.standard,
        clause=rule.clause,
        requirement=requirement(rule),
        limit=limit,
        unit=unit,
        value=judgement.value,
        interval=judgement.interval,
        outcome=judgement.outcome,
        advisory=rule.advisory,
        source=rule.source,
        rule=rule.id,
        current=rule.multiple,
        base=rule.base,
        note=" ".join(note for note in (judgement.note, f"{rule.note}." if rule.note else "") if note),
    )


def requirement(rule: Rule) -> str:
    """The requirement in words: ``2.55 xIn from cold: trips in less than 60 s``."""
    start = "" if rule.start is None else f" from {rule.start}"
    if rule.requirement == "hold":
        words = "does not trip within" if rule.strict else "does not trip before"
    else:
        words = "trips in less than" if rule.strict else "trips within"
    return f"{written_current(rule.multiple, rule.base)}{start}: {words} {written_time(rule.limit_s)}"


def _judged(device: Device, rule: Rule) -> Judgement:
    """The time at the rule's current against its limit, and where that is too close, the current for its time."""
    conditions = Conditions(start=rule.start)
    times = device.trip_time(rule.multiple, base=rule.base, conditions=conditions)
    currents = device.trip_current(rule.limit_s, base=rule.base, conditions=conditions)
    hold = rule.requirement == "hold"
    time, current = (times.fast, currents.holds) if hold else (times.slow, currents.trips)
    if time is None:
        return _without_edge(times)
    return judge(rule, time, current)


def _without_edge(times: TripTimes) -> Judgement:
    if isinstance(times.mean, EdgeAnswer) and times.mean.status == "value":
        return Judgement(outcome="undecided", note="A mean line: give its tolerance to decide.")
    return Judgement(outcome="not covered", note="The device has no such edge.")
