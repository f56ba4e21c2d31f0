"""Who of two devices surely clears first, from one current to another."""

from dataclasses import dataclass

from curvelab.units import FIGURES, MOST_FIGURES, written_current

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


def written_stretch(stretch: Stretch) -> str:
    """``254 A to 298 A``, in as many figures as tell its ends apart."""
    for figures in range(FIGURES, MOST_FIGURES + 1):
        start, end = (written_current(each, "A", figures) for each in (stretch.from_a, stretch.to_a))
        if start != end:
            break
    return f"{start} to {end}"
