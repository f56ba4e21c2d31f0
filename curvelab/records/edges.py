"""Edges of one element gathered for one picture or table, whatever each of them means."""

from collections.abc import Iterable

from curvelab.records.curve import Curve, Edge


def edge_groups(curves: Iterable[Curve]) -> tuple[dict[Edge, Curve], ...]:
    """Curves of one element, quantity, conditions and settings by edge, in the order in which each first appears.

    A fuse's fast pre-arcing and slow operating line make one group. A second curve of the same edge begins a group of
    its own, so that none is lost.
    """
    groups: dict[object, list[dict[Edge, Curve]]] = {}
    for curve in curves:
        alike = (curve.element, curve.base, curve.quantity, curve.conditions, tuple(sorted(curve.at.items())))
        same = groups.setdefault(alike, [])
        free = next((group for group in same if curve.edge not in group), None)
        if free is None:
            free = {}
            same.append(free)
        free[curve.edge] = curve
    return tuple(group for same in groups.values() for group in same)
