"""A finding of a calculator: one estimate against one limit, judged as the checks of a standard are."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import isclose
from typing import Literal

from curvelab.calculators.estimate import Estimate
from curvelab.calculators.facts import Origin
from curvelab.records.finding import Finding
from curvelab.records.limit import Judgement, Limit, judge_number

_SAME = 1e-9

_WORST_FIRST = ("fails", "not covered", "undecided", "at limit", "meets")


@dataclass(frozen=True, kw_only=True, slots=True)
class Requirement:
    """What is required of a device, in words, with the limit and the side of it that meets."""

    device: str
    rule: str
    words: str
    limit: float
    permitted: Literal["at_least", "at_most"]
    origin: Origin
    advisory: bool = False


def verdict(required: Requirement, found: Estimate, note: str = "") -> Finding:
    """The finding of an estimate against a requirement.

    Parameters
    ----------
    required : Requirement
    found : Estimate
        In the unit of the limit.
    note : str
        One more sentence for the reader.
    """
    limit = Limit(number=required.limit, from_below=required.permitted == "at_least", strict=False)
    judgement = _judged(limit, found)
    return Finding(
        device=required.device,
        standard=required.origin.clause.split(",")[0],
        clause=required.origin.clause.partition(",")[2].strip(),
        requirement=required.words,
        limit=required.limit,
        unit=found.unit,
        value=judgement.value,
        interval=judgement.interval,
        outcome=judgement.outcome,
        advisory=required.advisory,
        source=required.origin.source,
        rule=required.rule,
        note=" ".join(words for words in (judgement.note, note, required.origin.doubt) if words),
        permitted=required.permitted,
    )


def _judged(limit: Limit, found: Estimate) -> Judgement:
    if found.value is None and found.reason:
        return Judgement(outcome="not covered", note=f"{found.reason[0].upper()}{found.reason[1:]}.")
    if found.interval is not None:
        return judge_number(limit, found.answer())
    # A rounding decides nothing: within it, a number of no known uncertainty lies on the limit.
    on_limit = found.value is not None and isclose(found.value, limit.number, rel_tol=_SAME)
    judgement = judge_number(limit, (replace(found, value=limit.number) if on_limit else found).answer())
    return replace(judgement, value=found.value, interval=None)


def worst(findings: Sequence[Finding]) -> str | None:
    """The outcome that decides: the worst of those that are no advice; None without any."""
    outcomes = [finding.outcome for finding in findings if not finding.advisory]
    return min(outcomes, key=_WORST_FIRST.index, default=None)
