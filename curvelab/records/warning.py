"""A warning: something the program is not sure of, with its place and what would settle it."""

from dataclasses import dataclass


@dataclass(frozen=True, kw_only=True, slots=True)
class Acceptance:
    """A person's word that a warning was looked at."""

    code: str
    place: tuple[float, float] | None = None
    reason: str = ""
    name: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class ReadingWarning:
    """A doubt: a stable ``code``, one sentence that says what to give in the worksheet, and its place."""

    code: str
    text: str
    at: tuple[float, float] | None = None
    accepted: Acceptance | None = None
