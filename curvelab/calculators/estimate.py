"""One number a device answers with: its status, its 95 % interval and where it comes from."""

import math
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import cast

from curvelab.records.answer import EdgeAnswer, Status
from curvelab.records.limit import interval_of
from curvelab.units import written_between

_TURNED: dict[Status, Status] = {"at_least": "at_most", "at_most": "at_least"}


@dataclass(frozen=True, kw_only=True, slots=True)
class Estimate:
    """A number in ``unit``; None, with a status that says why, where there is none.

    ``interval`` is the 95 % interval, None where the uncertainty is not known or the number is a bound; ``reason`` says
    in words why there is no number, or what it rests on.
    """

    status: Status
    value: float | None
    interval: tuple[float, float] | None
    unit: str
    basis: str = "sheet"
    reason: str = ""

    @property
    def is_known(self) -> bool:
        """Whether there is a number, a bound included."""
        return self.value is not None

    def mapped(self, through: Callable[[float], float], unit: str) -> "Estimate":
        """The number in another quantity, through a function that rises or falls throughout."""
        if self.value is None:
            return replace(self, unit=unit)
        value = through(self.value)
        falls = through(self.value * 1.001) < value
        interval = None
        if self.interval is not None:
            ends = through(self.interval[0]), through(self.interval[1])
            interval = (min(ends), max(ends))
        status = _TURNED.get(self.status, self.status) if falls else self.status
        return replace(self, value=value, interval=interval, unit=unit, status=status)

    def answer(self) -> EdgeAnswer:
        """The same to be judged against a limit: a number whose uncertainty is not known counts as it stands."""
        value = math.nan if self.value is None else self.value
        lower, upper = self.interval or (value, value)
        return EdgeAnswer(status=self.status, value=value, lower=lower, upper=upper, basis=self.basis)

    def written(self) -> str:
        """What a person reads: ``160 A (159.9 A to 160.1 A)``, ``at most 46.4 A`` or the status in words."""
        if self.value is None:
            return self.status.replace("_", " ")
        prefix = {"at_least": "at least ", "at_most": "at most "}.get(self.status, "")
        return prefix + written_between(self.value, self.interval, self.unit)


def estimate(answer: EdgeAnswer | None, unit: str, reason: str = "") -> Estimate:
    """One answer of a device to one number asked; ``not_covered`` without such an edge."""
    if answer is None:
        return Estimate(status="not_covered", value=None, interval=None, unit=unit, reason=reason)
    value = float(answer.value)
    return Estimate(
        status=cast(Status, answer.status),
        value=None if math.isnan(value) else value,
        interval=interval_of(answer),
        unit=unit,
        basis=answer.basis,
        reason="" if answer.status == "value" else reason,
    )
