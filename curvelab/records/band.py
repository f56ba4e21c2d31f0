"""A band: one element of a device between its fast and its slow edge. It evaluates and inverts itself."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from curvelab.records.arrays import Floats
from curvelab.records.curve import NO_SETTINGS, Conditions, Curve, Edge
from curvelab.records.evaluation import Bounded, currents_at, values_at


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Band:
    """The edges of one element drawn for the same conditions and settings; None where there is no such line."""

    element: str
    base: str
    quantity: str = "time"
    meaning: str | None = None
    conditions: Conditions = Conditions()
    at: Mapping[str, float] = field(default_factory=lambda: NO_SETTINGS)
    fast: Curve | None = None
    slow: Curve | None = None
    mean: Curve | None = None

    def edge(self, name: Edge) -> Curve | None:
        """The curve of one edge."""
        return {"fast": self.fast, "slow": self.slow, "mean": self.mean}[name]

    def values(self, name: Edge, current: Floats) -> Bounded | None:
        """Values of one edge at currents in the band's base, see `values_at`; None where there is no such line."""
        curve = self.edge(name)
        return None if curve is None else values_at(curve, current)

    def currents(self, name: Edge, value: Floats) -> Bounded | None:
        """Currents of one edge at values, see `currents_at`; None where there is no such line."""
        curve = self.edge(name)
        return None if curve is None else currents_at(curve, value)


def bands_of(curves: Sequence[Curve]) -> tuple[Band, ...]:
    """The curves of one device gathered into bands, in the order in which each band first appears."""
    groups: dict[tuple[object, ...], dict[Edge, Curve]] = {}
    for curve in curves:
        key = (
            curve.element,
            curve.base,
            curve.quantity,
            curve.meaning,
            curve.conditions,
            tuple(sorted(curve.at.items())),
        )
        groups.setdefault(key, {})[curve.edge] = curve
    return tuple(_band(edges) for edges in groups.values())


def _band(edges: Mapping[Edge, Curve]) -> Band:
    any_edge = next(iter(edges.values()))
    return Band(
        element=any_edge.element,
        base=any_edge.base,
        quantity=any_edge.quantity,
        meaning=any_edge.meaning,
        conditions=any_edge.conditions,
        at=any_edge.at,
        fast=edges.get("fast"),
        slow=edges.get("slow"),
        mean=edges.get("mean"),
    )
