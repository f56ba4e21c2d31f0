"""Who of two devices surely clears first, from one current to another."""

from dataclasses import dataclass

UNDECIDED, NOT_COVERED = "undecided", "not_covered"


@dataclass(frozen=True, kw_only=True, slots=True)
class Stretch:
    """Currents in A between which ``sooner`` holds: a device's name, ``undecided`` or ``not_covered``."""

    from_a: float
    to_a: float
    sooner: str


@dataclass(frozen=True, kw_only=True, slots=True)
class Sides:
    """Two devices by name, and every stretch of current in rising order, each beginning where the one before ends."""

    a: str
    b: str
    stretches: tuple[Stretch, ...]
