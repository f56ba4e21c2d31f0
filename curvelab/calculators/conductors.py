"""Conductors and the energy they withstand for a short time: k^2 S^2, from the tables of k."""

from dataclasses import dataclass
from math import inf, isfinite, sqrt

from curvelab.calculators.facts import Origin, Row, rows_of
from curvelab.errors import InputError

USES = ("line", "separate", "armour", "conduit")


@dataclass(frozen=True, kw_only=True, slots=True)
class Factor:
    """A factor k in A s^0.5 / mm2 for cross-sections above one and up to another."""

    k: float
    above_mm2: float
    up_to_mm2: float
    origin: Origin


@dataclass(frozen=True, kw_only=True, slots=True)
class Conductor:
    """A conductor by material, insulation and use, with its factors in order of cross-section."""

    material: str
    insulation: str
    use: str
    words: str
    factors: tuple[Factor, ...]

    def factor(self, area_mm2: float) -> Factor:
        """The factor for a cross-section in mm2."""
        return next(each for each in self.factors if each.above_mm2 < area_mm2 <= each.up_to_mm2)

    def withstands_a2s(self, area_mm2: float) -> float:
        """The energy k^2 S^2 in A2s a cross-section in mm2 withstands."""
        return (self.factor(area_mm2).k * area_mm2) ** 2

    def least_mm2(self, energy_a2s: float) -> float:
        """The least cross-section in mm2 that withstands an energy in A2s."""
        areas = (max(sqrt(energy_a2s) / each.k, each.above_mm2 * (1 + 1e-9)) for each in self.factors)
        return next(area for area, each in zip(areas, self.factors, strict=True) if area <= each.up_to_mm2)


def conductor_of(material: str, insulation: str, use: str = "line") -> Conductor:
    """A conductor from the tables of k.

    Raises
    ------
    InputError
        The tables have none for these words; the message lists what they have.
    """
    rows = rows_of("conductors", "factors")
    chosen = [row for row in rows if (row["material"], row["insulation"], row["use"]) == (material, insulation, use)]
    if not chosen:
        known = dict.fromkeys(_named(row) for row in rows if row["use"] == use)
        fitting = ", ".join(known) or f"use one of: {', '.join(USES)}"
        raise InputError(f"No factor k is tabulated for {material}, {insulation}, {use}", f"Known for {use}: {fitting}")
    return Conductor(
        material=material,
        insulation=insulation,
        use=use,
        words=chosen[0]["words"],
        factors=tuple(sorted((_factor(row) for row in chosen), key=lambda each: each.above_mm2)),
    )


def next_size_mm2(area_mm2: float) -> float | None:
    """The smallest standard cross-section in mm2 that is no smaller; None beyond the largest."""
    sizes = rows_of("conductors", "sizes")[0]["mm2"]
    return next((float(size) for size in sizes if size >= area_mm2 * (1 - 1e-9)), None)


def checked_area(area_mm2: float | None) -> float | None:
    """The cross-section, when it can be one.

    Raises
    ------
    InputError
        It is not a positive number.
    """
    if area_mm2 is not None and not (isfinite(area_mm2) and area_mm2 > 0):
        raise InputError(f"A cross-section of {area_mm2:g} mm2 cannot be", "A positive number")
    return area_mm2


def _factor(row: Row) -> Factor:
    return Factor(
        k=row["k"],
        above_mm2=float(row.get("above_mm2", 0.0)),
        up_to_mm2=float(row.get("up_to_mm2", inf)),
        origin=row["origin"],
    )


def _named(row: Row) -> str:
    return f"{row['material']} {row['insulation']}"
