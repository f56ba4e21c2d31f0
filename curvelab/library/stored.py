"""What storing takes beside the devices, and what it answers."""

from dataclasses import dataclass


@dataclass(frozen=True, kw_only=True, slots=True)
class Stored:
    """One device after storing; ``changed`` is False where the library already held exactly this."""

    key: str
    revision: int
    changed: bool


@dataclass(frozen=True, kw_only=True, slots=True)
class Signature:
    """Who stores, and why; kept with each new revision."""

    author: str = ""
    reason: str = ""
