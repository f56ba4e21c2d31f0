"""A finding: the outcome of one check of a device against one requirement."""

from dataclasses import dataclass
from typing import Literal

Outcome = Literal["meets", "fails", "undecided", "at limit", "not covered"]


@dataclass(frozen=True, kw_only=True, slots=True)
class Finding:
    """One requirement, the limit, what the curve says and how that compares.

    ``limit`` and ``value`` are in ``unit`` (``s``, ``A``, ``A2s`` or a base); ``value`` and ``interval`` are None
    where the curve does not reach. ``advisory`` marks a rule that is not published in what was seen of the standard.
    ``permitted`` is the side of the limit on which the value meets it. The limit's place on the plot is (``current``,
    ``limit``) for a time, and (``limit``, ``time_s``) for a current.
    ``note`` says in one sentence what would settle an undecided finding, or which bound was used.
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
