"""Walk along one line from a chain on it, both ways, over junctions and gaps."""

from dataclasses import dataclass, field

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import MERGED, ChainGraph, is_bridge
from curvelab.trace.heading import Heading, heading
from curvelab.trace.routes import (
    End,
    Line,
    Route,
    colour_cost,
    hop_reach,
    meeting,
    oriented,
    other,
    routes_over_gap,
    routes_through_junction,
)

ACCEPT = 7.0
"""Largest cost of a route that continues the line smoothly."""
SOLE = 12.0
"""The same for the only line beyond an unseen stretch."""
MARGIN = 1.0
"""A second route this near in cost makes the choice a doubt."""
APART = 3.0
"""px: routes closer than this are one."""
SHARPEST_TURN = -0.17
"""Cosine of the sharpest turn a line makes in a break: 100 degrees; no line runs back beside itself."""
LONGEST_UNITED = 400.0
"""px: unseen stretch over which two guide places on either side may still join one line."""
FAR_DASH, FAR_LINE = 0.18, 0.5
"""Least length beyond an unseen stretch, relative to it, of a dash and of a line."""
DASHES = 3
"""Breaks after which a line is dashed."""
SHORT_HOP = 8.0
"""Stroke widths: the next dash is looked for before anything further."""
SHORTEST_GAP = 6.0
"""px: a shorter break is print or a crossing, not a gap."""


@dataclass(slots=True)
class Walk:
    """A line as far as it was walked.

    ``places`` are thinned pixels in order; ``jumps`` holds (k, unseen px) where k - 1 and k are joined over ink that is
    not there; ``hops`` are the breaks passed, px; ``doubts`` are places where another way was almost as good.
    """

    places: list[Floats] = field(default_factory=list)
    jumps: list[tuple[int, float]] = field(default_factory=list)
    doubts: list[tuple[float, float]] = field(default_factory=list)
    chains: set[int] = field(default_factory=set)
    hops: list[float] = field(default_factory=list)

    @property
    def line(self) -> Floats:
        """All places, shape (n, 2)."""
        return np.concatenate(self.places)


def walk_both_ways(graph: ChainGraph, start: int, wanted: frozenset[int], taken: frozenset[int] = frozenset()) -> Walk:
    """Follow the line that a chain belongs to from end to end.

    Parameters
    ----------
    graph : ChainGraph
    start : int
        Number of the chain.
    wanted : frozenset of int
        Chains the line is said to pass: routes over them are preferred.
    taken : frozenset of int
        Chains that are no part of it.
    """
    chain = graph.chains[start]
    line = Line(ink=chain.ink, width=max(chain.width, 1.0))
    hops: list[float] = []
    while True:
        used = {start, *taken}
        forward = _walk(graph, (start, 1), line, used, wanted, hops)
        backward = _walk(graph, (start, 0), line, used, wanted, forward.hops)
        if len(forward.hops) >= DASHES or len(backward.hops) < DASHES:
            return _joined(backward, chain.points, forward, used - taken)
        # the way back told that the line is dashed: the way forward may pass a kink in a break
        hops = backward.hops


def _joined(backward: Walk, middle: Floats, forward: Walk, used: set[int]) -> Walk:
    back = backward.line[::-1] if backward.places else np.zeros((0, 2))
    front = forward.line if forward.places else np.zeros((0, 2))
    jumps = [(len(back) - k, length) for k, length in backward.jumps]
    jumps += [(len(back) + len(middle) + k, length) for k, length in forward.jumps]
    return Walk(
        places=[back, middle, front],
        jumps=sorted(jumps),
        doubts=backward.doubts + forward.doubts,
        chains=set(used),
    )


def _walk(graph: ChainGraph, end: End, line: Line, used: set[int], wanted: frozenset[int], hops: list[float]) -> Walk:
    """Walk outwards from a chain's end; ``used`` gains the chains passed, ``hops`` are breaks known before."""
    walk = Walk(hops=list(hops))
    trusted = [oriented(graph, other(end))]
    merged: list[Floats] = []
    count = 0
    while True:
        onward = heading(_history(trusted, line))
        route = _next_route(graph, end, onward, line, used, wanted, walk)
        if route is None:
            return walk
        if route.hop > 1.0:
            walk.hops.append(route.hop)
        if route.hop > SHORTEST_GAP:
            walk.jumps.append((count, route.hop))
        for entry in route.entries:
            points = oriented(graph, entry)
            used.add(entry[0])
            walk.places.append(points)
            count += len(points)
            merged = [] if not is_bridge(graph.chains[entry[0]]) else [*merged, points]
            if not merged or sum(map(len, merged)) > 1.5 * MERGED * line.width:
                trusted.extend(merged or [points])
                merged = []
        end = other(route.entries[-1])


def _history(trusted: list[Floats], line: Line) -> Floats:
    """Walked places to extrapolate from, without the last that a junction's ink may have pulled aside."""
    history = np.concatenate(trusted[-6:])
    pulled = int(np.ceil(0.7 * line.width))
    return history[:-pulled] if len(history) > 4 * pulled + 8 else history


def _next_route(
    graph: ChainGraph,
    end: End,
    onward: Heading | None,
    line: Line,
    used: set[int],
    wanted: frozenset[int],
    walk: Walk,
) -> Route | None:
    if onward is None or end in graph.leaving:
        return None
    routes = routes_through_junction(graph, end, onward, line, used)
    chosen = _best(routes, wanted)
    if chosen is None:
        chosen = _only_way(graph, end, routes, line, used)
    if chosen is None:
        dashed = len(walk.hops) >= DASHES
        short = 2.2 * _common_break(walk.hops) if dashed else SHORT_HOP * line.width
        routes = routes_over_gap(graph, onward, line, used, short, FAR_DASH)
        chosen = _best(routes, wanted) or _next_dash(graph, end, onward, line, used, walk.hops)
        if chosen is None:
            reach = min(hop_reach(line), 6.0 * _common_break(walk.hops)) if dashed else hop_reach(line)
            routes = routes_over_gap(graph, onward, line, used, reach, FAR_DASH if dashed else FAR_LINE)
            chosen = _best(routes, wanted) or (routes[0] if len(routes) == 1 and routes[0].cost <= SOLE else None)
    if chosen is not None and _rivals(chosen, routes) and not _leads(chosen, wanted):
        walk.doubts.append((float(onward.tip[0]), float(onward.tip[1])))
        if chosen.hop > SHORTEST_GAP:
            return None
    return chosen


def _common_break(hops: list[float]) -> float:
    return float(np.median(hops[-8:]))


def _next_dash(
    graph: ChainGraph, end: End, onward: Heading, line: Line, used: set[int], hops: list[float]
) -> Route | None:
    """The dash after a kink in a dashed line: the only one of its ink within the common break of those before."""
    if len(hops) < DASHES or graph.tips is None:
        return None
    tip = oriented(graph, other(end))[-1]
    found: dict[int, tuple[float, End]] = {}
    for index in graph.tips.query_ball_point(tip, 1.6 * _common_break(hops) + line.width):
        entry = graph.tip_ends[index]
        if entry[0] in used or colour_cost(graph, (entry,), line) > 4.0:
            continue
        dash = oriented(graph, entry)
        step = dash[min(len(dash) - 1, int(line.width) + 2)] - dash[0]
        distance = float(np.hypot(*(dash[0] - tip)))
        if step @ onward.direction < SHARPEST_TURN * np.hypot(*step):
            continue
        found[entry[0]] = min(found.get(entry[0], (np.inf, entry)), (distance, entry))
    nearest = sorted(found.values())
    if not nearest or (len(nearest) > 1 and nearest[1][0] < 1.5 * nearest[0][0]):
        return None
    distance, entry = nearest[0]
    return Route(entries=(entry,), places=oriented(graph, entry), cost=0.0, hop=distance)


def _best(routes: list[Route], wanted: frozenset[int]) -> Route | None:
    """The cheapest route, one over a wanted chain before others."""
    leading = [r for r in routes if _leads(r, wanted) and r.cost <= 2.0 * ACCEPT]
    if leading:
        return leading[0]
    if not routes or routes[0].cost > ACCEPT:
        return None
    # of pieces in one line the next comes first
    return min((r for r in routes if r.cost <= min(ACCEPT, routes[0].cost + MARGIN)), key=lambda r: (r.hop, r.cost))


def _leads(route: Route, wanted: frozenset[int]) -> bool:
    return any(number in wanted for number, _ in route.entries)


def _rivals(chosen: Route, routes: list[Route]) -> bool:
    """Whether another route that comes out elsewhere, not merely further along, is almost as good."""
    beyond = chosen.hop + float(np.hypot(*(chosen.places[-1] - chosen.places[0])))
    return any(
        r is not chosen and r.cost < chosen.cost + MARGIN and r.hop < beyond and _apart(r.places, chosen.places)
        for r in routes
    )


def _apart(a: Floats, b: Floats) -> bool:
    nearest = np.hypot(*(a[-1] - b).T).min()
    return bool(nearest > APART and np.hypot(*(b[-1] - a).T).min() > APART)


def _only_way(graph: ChainGraph, end: End, routes: list[Route], line: Line, used: set[int]) -> Route | None:
    """At a kink the one way on that no other line at the junction claims as its straight continuation."""
    firsts = [e for e in meeting(graph, end) if e[0] not in used]
    open_firsts = [e for e in firsts if not _claimed(graph, e, [f for f in firsts if f != e], line)]
    open_firsts = [e for e in open_firsts if graph.chains[e[0]].length > 2.0 * line.width] or open_firsts
    if len(open_firsts) != 1:
        return None
    for route in routes:
        if route.entries[0] == open_firsts[0]:
            return Route(entries=route.entries[:1], places=route.places, cost=route.cost, hop=0.0)
    return None


def _claimed(graph: ChainGraph, entry: End, others: list[End], line: Line) -> bool:
    """Whether another chain at the junction continues this one smoothly."""
    back = heading(oriented(graph, entry)[::-1])
    if back is None:
        return False
    for rival in others:
        ahead, aside = back.frame(oriented(graph, rival)[: int(line.look_ahead)])
        if np.mean(np.minimum((aside / back.spread(ahead)) ** 2, 30.0)) < ACCEPT and ahead[-1] > 0:
            return True
    return False


def united(first: Walk, second: Walk, width: float) -> Walk | None:
    """Two walks as one line where they face each other over an unseen stretch; None where they do not.

    They face each other where each, continued, comes out at the other's tip, or where they are so near that a kink lies
    between.
    """
    choices = []
    for one in (first.line, first.line[::-1]):
        for two in (second.line, second.line[::-1]):
            distance = float(np.hypot(*(two[0] - one[-1])))
            ahead, back = heading(one), heading(two[::-1])
            near = distance <= SHORT_HOP * width
            if near or (ahead is not None and back is not None and _meets(ahead, two[0]) and _meets(back, one[-1])):
                choices.append((distance, one, two))
    if not choices:
        return None
    distance, one, two = min(choices, key=lambda choice: choice[0])
    return Walk(
        places=[one, two],
        jumps=[(len(one), distance)],
        doubts=first.doubts + second.doubts,
        chains=first.chains | second.chains,
    )


def _meets(onward: Heading, tip: Floats) -> bool:
    ahead, aside = onward.frame(tip[None])
    return bool(0 < ahead[0] < LONGEST_UNITED and abs(aside[0]) < 3.0 * onward.spread(ahead)[0])
