"""The factor on a curve's currents at another ambient temperature, from the device's derating table."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from curvelab.records.curve import Curve
from curvelab.records.device import Derating, Nameplate

_SAME_C = 1e-6


@dataclass(frozen=True, kw_only=True, slots=True)
class Factor:
    """Least and greatest factor on the currents of a curve; they differ where the table only bounds it."""

    least: float = 1.0
    greatest: float = 1.0

    @property
    def is_exact(self) -> bool:
        """Whether the factor itself is known."""
        return math.isclose(self.least, self.greatest, rel_tol=1e-12)


def ambient_factor(curve: Curve, plate: Nameplate, ambient_c: float | None) -> Factor | None:
    """The factor on a curve's currents at an ambient temperature; None where nothing is known of it.

    A table for the curve's own element gives it; between two of its temperatures the factor lies between theirs, and
    beyond them it is not known. A table for the whole device is not told apart from element to element, of which a
    magnetic one does not feel the temperature: there it is a bound. A table for other elements leaves this one alone.
    """
    drawn_c = plate.ambient_reference_c if curve.conditions.ambient_c is None else curve.conditions.ambient_c
    if ambient_c is None or (drawn_c is not None and abs(ambient_c - drawn_c) < _SAME_C):
        return Factor()
    if not plate.derating or curve.quantity != "time":
        return None
    own = [row for row in plate.derating if row.element == curve.element]
    rows = own or [row for row in plate.derating if row.element == "whole"]
    if not rows:
        return Factor()
    asked, drawn = _between(rows, ambient_c), _drawn(rows, drawn_c, plate)
    if asked is None or drawn is None:
        return None
    least, greatest = asked.least / drawn, asked.greatest / drawn
    if own and curve.element != "whole":
        return Factor(least=least, greatest=greatest)
    return Factor(least=min(least, 1.0), greatest=max(greatest, 1.0))


def _drawn(rows: Sequence[Derating], drawn_c: float | None, plate: Nameplate) -> float | None:
    """The table's factor at the temperature the curve is drawn for: 1 at the device's own."""
    if drawn_c is None or drawn_c == plate.ambient_reference_c:
        return 1.0 if drawn_c is not None or any(row.factor == 1.0 for row in rows) else None
    found = _between(rows, drawn_c)
    return found.least if found is not None and found.is_exact else None


def _between(rows: Sequence[Derating], ambient_c: float) -> Factor | None:
    ordered = sorted(rows, key=lambda row: row.ambient_c)
    for row in ordered:
        if abs(row.ambient_c - ambient_c) < _SAME_C:
            return Factor(least=row.factor, greatest=row.factor)
    for before, after in pairwise(ordered):
        if before.ambient_c < ambient_c < after.ambient_c:
            low, high = sorted((before.factor, after.factor))
            return Factor(least=low, greatest=high)
    return None
