"""What storing, reviewing and importing take beside the devices, and what they answer."""

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


@dataclass(frozen=True, kw_only=True, slots=True)
class Reviewed:
    """What a review changed."""

    key: str
    revision: int
    before: str
    state: str


@dataclass(frozen=True, kw_only=True, slots=True)
class United:
    """What an import did: how many revisions were new and already there, and every contradiction as one sentence."""

    new: int
    known: int
    conflicts: tuple[str, ...]
