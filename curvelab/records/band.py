"""A band: one element of a device between its fast and its slow edge. It evaluates and inverts itself."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from curvelab.records.arrays import Floats
from curvelab.records.curve import NO_SETTINGS, Conditions, Curve, Edge
from curvelab.records.evaluation import Bounded, currents_at, values_at


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Band:
    """The edges of one element drawn for the same conditions and settings; None where there is no such line.

    Each edge says itself what ends at its time: a fuse's band lies between its pre-arcing and its operating line.
    """

    element: str
    base: str
    quantity: str = "time"
    conditions: Conditions = Conditions()
    at: Mapping[str, float] = field(default_factory=lambda: NO_SETTINGS)
    fast: Curve | None = None
    slow: Curve | None = None
    mean: Curve | None = None

    @property
    def edges(self) -> Mapping[Edge, Curve]:
        """The lines there are, by edge: fast, slow, mean."""
        lines: tuple[tuple[Edge, Curve | None], ...] = (("fast", self.fast), ("slow", self.slow), ("mean", self.mean))
        return {edge: curve for edge, curve in lines if curve is not None}

    def values(self, name: Edge, current: Floats) -> Bounded | None:
        """Values of one edge at currents in the band's base, see `values_at`; None where there is no such line."""
        curve = self.edges.get(name)
        return None if curve is None else values_at(curve, current)

    def currents(self, name: Edge, value: Floats) -> Bounded | None:
        """Currents of one edge at values, see `currents_at`; None where there is no such line."""
        curve = self.edges.get(name)
        return None if curve is None else currents_at(curve, value)


def bands_of(curves: Iterable[Curve]) -> tuple[Band, ...]:
    """The curves of one device gathered into bands, in the order in which each band first appears.

    One band is one element, base, quantity, conditions and settings, whatever its edges mean. A second line of an edge
    goes to a band of its own, beside the lines of its own meaning, so that none is lost.
    """
    alike: dict[object, list[dict[Edge, Curve]]] = {}
    for curve in curves:
        key = (curve.element, curve.base, curve.quantity, curve.conditions, tuple(sorted(curve.at.items())))
        groups = alike.setdefault(key, [])
        free = [group for group in groups if curve.edge not in group]
        if not free:
            groups.append({curve.edge: curve})
            continue
        same_meaning = (group for group in free if any(each.meaning == curve.meaning for each in group.values()))
        next(same_meaning, free[0])[curve.edge] = curve
    return tuple(_band(group) for groups in alike.values() for group in groups)


def _band(edges: Mapping[Edge, Curve]) -> Band:
    any_edge = next(iter(edges.values()))
    return Band(
        element=any_edge.element,
        base=any_edge.base,
        quantity=any_edge.quantity,
        conditions=any_edge.conditions,
        at=any_edge.at,
        fast=edges.get("fast"),
        slow=edges.get("slow"),
        mean=edges.get("mean"),
    )
