"""Which limit each line of a band is: by its words, by the order of two lines, and what is usual for its kind."""

from collections.abc import Sequence

from curvelab.reading.name_order import Order
from curvelab.reading.said import Said
from curvelab.records.curve import Edge

SINGLE = ("fuse", "relay")
"""Kinds that are published as one line with its tolerance."""


def edges_of(
    members: Sequence[int], said: Sequence[Said], order: Order, kind: str | None, *, single_lines: bool
) -> dict[int, Edge | None]:
    """The edge of each line of one band; None where it cannot be told.

    Parameters
    ----------
    members : sequence of int
        The band's lines.
    said : sequence of Said
        What is said of each line of the plot.
    order : Order
    kind : str or None
        Of the device.
    single_lines : bool
        Whether one line is published for each of several devices or settings, or the sheet speaks of mean lines.
    """
    spoken: dict[int, Edge | None] = {line: said[line].edge for line in members}
    if len(members) == 1:
        (line,) = members
        if spoken[line] is None and (kind in SINGLE or single_lines):
            return {line: "mean"}
        return spoken
    if len(members) == 2:
        left, right = members if order.is_left(*members) else tuple(reversed(members))
        if not order.is_left(left, right):
            return spoken if None not in spoken.values() else dict.fromkeys(members)
        by_order: dict[int, Edge | None] = {left: "fast", right: "slow"}
        contradicted = any(edge is not None and edge != by_order[line] for line, edge in spoken.items())
        return dict.fromkeys(members) if contradicted else by_order
    return spoken
