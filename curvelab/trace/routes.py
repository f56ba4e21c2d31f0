"""Routes: the ways a line may go on from a chain's end, each with how badly it fits the line so far."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import FREE, MERGED, ChainGraph
from curvelab.trace.heading import Heading, heading

End = tuple[int, int]
"""A chain and the side of it, 0 its first point, 1 its last."""

MOST_ROUTES = 60
CAP = 30.0
"""Largest cost of one place, so that a far end decides no more than the rest."""
HOP_STROKES = 40.0
LONGEST_HOP = 160.0
"""px: a gap is bridged up to 40 stroke widths, at most this."""
THIN = 3.0
"""px"""
TINT_SPREAD = 0.2
"""Difference of ink between chains of one line, relative to the ink."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Line:
    """What is known of the line that is followed."""

    ink: Floats
    width: float

    @property
    def look_ahead(self) -> float:
        """Length in px over which routes are compared: beyond the merged stretch of a crossing of 10 degrees."""
        return float(np.clip(1.6 * MERGED * self.width, 60.0, 180.0))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Route:
    """Chains a line may go on through: each end is where a chain is entered.

    ``cost`` is the mean squared deviation from the line's continuation in its standard deviations, with what speaks
    against the route by its colour or shortness; ``hop`` is the unseen distance in px to its first point.
    """

    entries: tuple[End, ...]
    places: Floats
    cost: float
    hop: float


def oriented(graph: ChainGraph, entry: End) -> Floats:
    """Points of a chain in the order they are passed when it is entered at that end."""
    number, side = entry
    points = graph.chains[number].points
    return points if side == 0 else points[::-1]


def other(end: End) -> End:
    """The other end of the same chain."""
    return end[0], 1 - end[1]


def meeting(graph: ChainGraph, end: End) -> tuple[End, ...]:
    """Ends that meet this one at a junction."""
    junction = graph.chains[end[0]].junctions[end[1]]
    if junction == FREE:
        return ()
    return tuple(e for e in graph.ends[junction] if e[0] != end[0])


def routes_through_junction(graph: ChainGraph, end: End, onward: Heading, line: Line, used: set[int]) -> list[Route]:
    """Every route over the junction at this end, best first."""
    routes = [
        _route(graph, entries, onward, line, hop=0.0)
        for first in meeting(graph, end)
        if first[0] not in used
        for entries in _extended(graph, (first,), line.look_ahead, used)
    ]
    return sorted(routes, key=lambda route: route.cost)


def routes_over_gap(
    graph: ChainGraph, onward: Heading, line: Line, used: set[int], reach: float, far_side: float
) -> list[Route]:
    """Every route that starts ahead after an unseen stretch, best first.

    ``far_side`` is the least length of what lies beyond, relative to the unseen stretch.
    """
    if graph.tips is None:
        return []
    routes = []
    for index in graph.tips.query_ball_point(onward.tip, reach):
        entry = graph.tip_ends[index]
        if entry[0] in used:
            continue
        # the tip itself may be frayed: the best of the first places within a stroke's width counts
        start = oriented(graph, entry)[: max(1, int(line.width))]
        ahead, aside = onward.frame(start)
        if ahead[0] < 1.0 or np.abs(aside).min() > 3.0 * onward.spread(ahead)[0]:
            continue
        for entries in _extended(graph, (entry,), line.look_ahead, used):
            route = _route(graph, entries, onward, line, hop=float(ahead[0]))
            if _looks_back(route, onward, float(ahead[0]), far_side):
                routes.append(route)
    return sorted(routes, key=lambda route: route.cost)


def hop_reach(line: Line) -> float:
    """Longest unseen stretch that is bridged, px."""
    return min(LONGEST_HOP, HOP_STROKES * line.width)


def _extended(graph: ChainGraph, entries: tuple[End, ...], length: float, used: set[int]) -> Iterator[tuple[End, ...]]:
    """Routes that begin with these entries and go on through junctions until the length is used up."""
    stack = [(entries, length - graph.chains[entries[-1][0]].length)]
    count = 0
    while stack and count < MOST_ROUTES:
        current, left = stack.pop()
        onward = meeting(graph, other(current[-1])) if left > 0 else ()
        passed = {entry[0] for entry in current}
        onward = tuple(e for e in onward if e[0] not in passed and e[0] not in used)
        if not onward:
            count += 1
            yield current
        stack.extend(((*current, entry), left - graph.chains[entry[0]].length - 2.0) for entry in onward)


def _route(graph: ChainGraph, entries: tuple[End, ...], onward: Heading, line: Line, hop: float) -> Route:
    places = np.concatenate([oriented(graph, entry) for entry in entries])
    ahead, aside = onward.frame(places)
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(places, axis=0).T))]
    seen = run <= line.look_ahead
    deviation = np.minimum((aside[seen] / onward.spread(ahead[seen])) ** 2, CAP)
    # a stroke that turns back is no continuation, however close it lies
    deviation = np.where(ahead[seen] < -line.width - 2.0, CAP, deviation)
    weights = 1.0 + run[seen] / line.look_ahead
    cost = float(np.average(deviation, weights=weights))
    cost += 2.0 * max(0.0, 1.0 - run[-1] / (5.0 * line.width))
    cost += colour_cost(graph, entries, line) + 3.0 * hop / hop_reach(line)
    return Route(entries=entries, places=places[seen], cost=cost, hop=hop)


def colour_cost(graph: ChainGraph, entries: tuple[End, ...], line: Line) -> float:
    """How far ink and width of the route's longest chain are from the line's."""
    chain = max((graph.chains[number] for number, _ in entries), key=lambda c: c.length)
    if chain.length < 3.0 * line.width:
        return 0.0
    # the middle pixel of a thin stroke shows half to all of its ink
    spread = TINT_SPREAD if line.width > THIN else 2.0 * TINT_SPREAD
    scale = spread * max(float(line.ink.max()), 0.1)
    tint = float(np.max(np.abs(chain.ink - line.ink))) / scale
    width = (chain.width - line.width) / (0.5 * line.width + 1.0)
    return min(tint**2, 9.0) + min(width**2, 4.0)


def _looks_back(route: Route, onward: Heading, hop: float, far_side: float) -> bool:
    """Whether the route, followed backwards over the gap, comes out at the line's tip."""
    if route.hop <= 4.0:
        return True
    length = float(np.hypot(*np.diff(route.places, axis=0).T).sum()) if len(route.places) > 1 else 1.0
    if length < far_side * hop:
        return False
    back = heading(route.places[::-1])
    if back is None:
        return True
    ahead, aside = back.frame(onward.tip[None])
    return bool(ahead[0] > 0 and abs(aside[0]) <= 3.0 * back.spread(ahead)[0])
