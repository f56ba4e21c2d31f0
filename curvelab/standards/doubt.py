"""A plausibility finding: a ratio against what is usual. Always advisory, never a standard's verdict."""

from dataclasses import dataclass
from math import nan
from typing import Literal

from curvelab.records.answer import EdgeAnswer
from curvelab.records.finding import Finding
from curvelab.records.limit import Limit, judge_number

PLAUSIBILITY = "plausibility"


@dataclass(frozen=True, kw_only=True, slots=True)
class Expectation:
    """What is usual: a ratio at least or at most a number, in words, and where that comes from."""

    name: str
    words: str
    limit: float
    permitted: Literal["at_least", "at_most"]
    source: str


@dataclass(frozen=True, kw_only=True, slots=True)
class Ratio:
    """A ratio read, with its 95 % interval where that is known, and the place of it in words."""

    value: float
    interval: tuple[float, float] | None = None
    place: str = ""


def doubt(device: str, expected: Expectation, ratio: Ratio) -> Finding:
    """The finding of a ratio against an expectation."""
    limit = Limit(number=expected.limit, from_below=expected.permitted == "at_least", strict=False)
    lower, upper = ratio.interval or (nan, nan)
    judgement = judge_number(
        limit, EdgeAnswer(status="value", value=ratio.value, lower=lower, upper=upper, basis="sheet")
    )
    note = judgement.note if ratio.interval else ""
    return Finding(
        device=device,
        standard=PLAUSIBILITY,
        clause=expected.name,
        requirement=expected.words,
        limit=expected.limit,
        unit="ratio",
        value=judgement.value,
        interval=judgement.interval,
        outcome=judgement.outcome,
        advisory=True,
        source=expected.source,
        rule=expected.name.replace(" ", "-"),
        note=" ".join(words for words in (note, f"{ratio.place}." if ratio.place else "") if words),
        permitted=expected.permitted,
    )
