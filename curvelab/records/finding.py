"""A finding: the outcome of one check of a device against one requirement."""

from dataclasses import dataclass
from typing import Any, Literal

from curvelab.units import BASES

Outcome = Literal["meets", "fails", "undecided", "at limit", "not covered"]


@dataclass(frozen=True, kw_only=True, slots=True)
class Finding:
    """One requirement, the limit, what the curve says and how that compares.

    ``limit`` and ``value`` are in ``unit`` (``s``, ``A``, ``A2s``, ``ratio`` or a base); ``value`` and ``interval`` are
    None where the curve does not reach. ``advisory`` marks what is shown and is no verdict: a rule that was not seen
    published, or a matter of plausibility. ``permitted`` is the side of the limit on which the value meets it. The
    limit's place on the plot is (``current``, ``limit``) for a time, (``limit``, ``time_s``) for a current and
    (``current``, ``time_s``) for an energy. ``note`` says in one sentence what would settle an undecided finding, or
    which bound was used.
    """

    device: str
    standard: str
    clause: str
    requirement: str
    limit: float
    unit: str
    value: float | None
    interval: tuple[float, float] | None
    outcome: Outcome
    advisory: bool
    source: str
    rule: str
    current: float | None = None
    base: str | None = None
    note: str = ""
    permitted: Literal["at_least", "at_most"] | None = None
    time_s: float | None = None

    @property
    def margin(self) -> float | None:
        """How far the value lies inside the limit, relative to it; negative outside, None where nothing is known."""
        if self.value is None or self.permitted is None:
            return None
        above = self.value / self.limit - 1
        return above if self.permitted == "at_least" else -above

    @property
    def on_plot(self) -> "LimitPlace | None":
        """Where its limit lies on a time-current plot; None where it has no place there."""
        # The limit of an energy at a time is one of the current there.
        of_current = self.unit == "A2s" or self.unit in BASES
        current, base = (self.limit, self.unit) if self.unit in BASES else (self.current, self.base)
        time_s = self.time_s if of_current else self.limit
        if self.permitted is None or current is None or base is None or time_s is None:
            return None
        return LimitPlace(of_current=of_current, current=current, base=base, time_s=time_s)


@dataclass(frozen=True, kw_only=True, slots=True)
class LimitPlace:
    """The place of a limit, of the current or of the time there; the current is counted in ``base``."""

    of_current: bool
    current: float
    base: str
    time_s: float


def finding_json(finding: Finding) -> dict[str, Any]:
    """One finding as the JSON object of a reading's list."""
    return {
        "device": finding.device,
        "standard": finding.standard,
        "clause": finding.clause,
        "requirement": finding.requirement,
        "limit": finding.limit,
        "unit": finding.unit,
        "current": finding.current,
        "base": finding.base,
        "value": finding.value,
        "interval": list(finding.interval) if finding.interval else None,
        "outcome": finding.outcome,
        "advisory": finding.advisory,
        "source": finding.source,
        "rule": finding.rule,
        "note": finding.note,
        "permitted": finding.permitted,
        "margin": finding.margin,
        "time_s": finding.time_s,
    }
