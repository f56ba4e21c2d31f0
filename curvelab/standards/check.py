"""A device checked against the rules that apply to it."""

from collections.abc import Iterable, Iterator

from curvelab.devices.device import Device
from curvelab.records.finding import Finding
from curvelab.records.limit import Judgement
from curvelab.standards.answer import Answer, answer_of, cold_answer
from curvelab.standards.elements import of_element, undrawn_element
from curvelab.standards.judge import judge, judge_energy
from curvelab.standards.point import Point, at_drawn_settings, at_other_end, point_of, written_settings
from curvelab.standards.rule import Rule
from curvelab.standards.rules import load_rules
from curvelab.standards.words import requirement


def check(device: Device, rules: Iterable[Rule] | None = None) -> tuple[Finding, ...]:
    """Findings of every rule that applies to the device; none where no rule knows its kind and characteristic.

    An adjustable device without its settings is checked at every combination its curves are drawn for.

    Parameters
    ----------
    device : Device
    rules : iterable of Rule, optional
        In place of those shipped with the program.

    Raises
    ------
    StandardError
        A rule table is not valid.
    """
    chosen = [rule for rule in (load_rules() if rules is None else rules) if rule.is_for(device.nameplate)]
    if not chosen:
        return ()
    return tuple(finding for each in at_drawn_settings(device) for finding in _findings(each, chosen))


def _findings(device: Device, rules: Iterable[Rule]) -> Iterator[Finding]:
    settings = written_settings(device)
    for rule in rules:
        point = point_of(rule, device)
        if point is not None:
            yield _finding(device.key, point, _judged(of_element(rule, device), point), settings)


def _finding(key: str, point: Point, judgement: Judgement, settings: str) -> Finding:
    rule = point.rule
    if rule.let_through_a2s is not None:
        limit, unit = rule.let_through_a2s, "A2s"
    elif judgement.in_current:
        limit, unit = point.current, point.base
    else:
        limit, unit = point.limit_s, "s"
    return Finding(
        device=key,
        standard=rule.standard,
        clause=rule.clause,
        requirement=requirement(point, settings),
        limit=limit,
        unit=unit,
        value=judgement.value,
        interval=judgement.interval,
        outcome=judgement.outcome,
        advisory=rule.advisory,
        source=rule.source,
        rule=rule.id,
        current=point.current,
        base=point.base,
        note=" ".join(note for note in (judgement.note, f"{rule.note}." if rule.note else "") if note),
        permitted="at_least" if point.is_hold else "at_most",
        time_s=point.limit_s,
    )


def _judged(device: Device, point: Point) -> Judgement:
    rule = point.rule
    if rule.asked.waveform is not None:
        note = f"No curve for {rule.asked.waveform} is given; the sheet is taken as sinusoidal a.c."
        return Judgement(outcome="not covered", note=note)
    judgement = _judged_at(device, point)
    if rule.current_from != rule.current:
        judgement = _in_between(judgement, _judged_at(device, at_other_end(point)))
    undrawn = undrawn_element(rule, device)
    # What is drawn trips in time, or too early, whatever else may trip before it; anything else is open.
    if undrawn is None or judgement.outcome == ("fails" if point.is_hold else "meets"):
        return judgement
    return Judgement(outcome="not covered", note=f"No curve of its {undrawn} element is given.")


def _judged_at(device: Device, point: Point) -> Judgement:
    """The time at the point's current against its limit, and where that is too close, the current for its time."""
    answer = answer_of(device, point)
    if answer.time is None or answer.current is None:
        return _without_edge(answer)
    if point.rule.let_through_a2s is not None:
        return judge_energy(point, answer.current)
    judgement = judge(point, answer.time, answer.current, in_gap=answer.in_gap)
    if judgement.outcome == "not covered" and point.rule.asked.start == "hot" and _is_open_from_cold(device, point):
        note = "The curve is drawn from cold, and longer there; one drawn from the hot start would settle it."
        return Judgement(outcome="undecided", note=note)
    return judgement


def _is_open_from_cold(device: Device, point: Point) -> bool:
    """Whether the cold line says anything at a point that starts hot: it decides nothing, and yet is there."""
    cold = cold_answer(device, point)
    if cold.time is None or cold.current is None:
        return False
    return judge(point, cold.time, cold.current, in_gap=cold.in_gap).outcome != "not covered"


def _without_edge(answer: Answer) -> Judgement:
    if answer.mean:
        return Judgement(outcome="undecided", note="A mean line: give its tolerance to decide.")
    refusal = f"{answer.refusal}." if answer.refusal else "The device has no such edge."
    return Judgement(outcome="not covered", note=refusal)


def _in_between(at_most: Judgement, at_least: Judgement) -> Judgement:
    """The outcome where the standard implies the current within a rounding: sure only if it is the same at both ends.

    A trip is easiest to meet at the greatest current the printed figure may stand for.
    """
    if at_most.outcome in ("fails", "not covered") or at_most.outcome == at_least.outcome:
        return at_most
    if at_least.outcome == "meets":
        return at_least
    if {at_most.outcome, at_least.outcome} == {"meets", "at limit"}:
        return at_least
    note = "The current the standard implies is printed too coarsely to decide."
    return Judgement(outcome="undecided", value=at_most.value, interval=at_most.interval, note=note)
