"""A finding: the outcome of one check of a device against one requirement."""

from dataclasses import dataclass
from typing import Literal

Outcome = Literal["meets", "fails", "undecided", "at limit", "not covered"]


@dataclass(frozen=True, kw_only=True, slots=True)
class Finding:
    """One requirement, the limit, what the curve says and how that compares.

    ``limit`` and ``value`` are in ``unit`` (``s``, ``A``, ``A2s`` or a base); ``value`` and ``interval`` are None
    where the curve does not reach. ``advisory`` marks a rule that is not published in what was seen of the standard.
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
