"""Walk along one line: the likeliest path over the chains through every guide place, then on to both its ends."""

import heapq
from dataclasses import dataclass, replace
from itertools import count

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph
from curvelab.trace.continuing import ACCEPT, USUAL_BREAK
from curvelab.trace.gaps import MARGIN
from curvelab.trace.onward import known_before, steps_from
from curvelab.trace.track import FRESH, Track, added, begun, line_of, oriented, straightened
from curvelab.trace.way import Way

APART = 3.0
"""px: steps closer than this are one."""
END_INSIDE = 7.0
"""Cost of a line that ends inside the plot."""
MOST_STEPS = 4000
SHORTEST_GAP = 6.0
"""px: a shorter break is print or a crossing, not a gap."""
UNEARNED = 2.5
"""Cost of a step over an unseen stretch from which it is told."""
GUIDE_SCATTER = 3.0
"""px by which a guide place may easily lie beside its line."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Walk:
    """A line as far as it was walked.

    ``line`` holds its thinned pixels in order, (n, 2); ``chains`` their numbers; ``doubts`` are places where another
    way was almost as good.
    """

    line: Floats
    chains: frozenset[int]
    doubts: tuple[tuple[float, float], ...]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Explored:
    """Every track tried: the best one, and the steps that were possible by what they start from."""

    best: Track
    tried: dict[int, list[Track]]


Near = list[tuple[float, int]]
"""Chains a guide place may mean, each with its distance in px."""


def path_between(
    graph: ChainGraph, near: list[Near], stops: Floats
) -> tuple[Track, tuple[tuple[float, float], ...]] | int:
    """The likeliest track through all guide places, and its doubts; or the number of the place it does not reach.

    ``stops`` is the progress of the guide places, rising.
    """
    starts = [
        known_before(graph, begun(graph, (number, 0), (distance / GUIDE_SCATTER) ** 2)) for distance, number in near[0]
    ]
    doubts: list[tuple[float, float]] = []
    best = min(starts, key=lambda track: track.cost)
    for k in range(1, len(near)):
        targets = {number: (distance / GUIDE_SCATTER) ** 2 for distance, number in near[k]}
        explored = _explore(graph, starts, Way(sign=1, until=stops[k]), targets)
        if explored is None or _exchanged(explored):
            return k
        best = explored.best
        doubts += [_tip(graph, t.before) for t in best.steps() if t.before is not None and _is_doubtful(t)]
        starts = [replace(best, cost=0.0)]
    return best, tuple(dict.fromkeys(doubts))


def walk_on(graph: ChainGraph, path: Track, doubts: tuple[tuple[float, float], ...]) -> Walk:
    """A path drawn on to both ends of its line."""
    longest = max((graph.chains[number] for number, _ in path.entries()), key=lambda chain: chain.length)
    path = replace(path, line=line_of(longest), cost=0.0)
    forward, doubts_forward = _to_end(graph, path, Way(sign=1))
    steps = forward.steps()
    told = [oriented(graph, (t.entry[0], 1 - t.entry[1])) for t in steps if not t.merged][:FRESH][::-1]
    start = steps[0].entry
    back = replace(
        path,
        entry=(start[0], 1 - start[1]),
        before=None,
        trusted=tuple(told),
        merged=(),
        breaks=forward.breaks or path.breaks,
    )
    backward, doubts_backward = _to_end(graph, back, Way(sign=-1), frozenset(number for number, _ in forward.entries()))
    entries = [(number, 1 - side) for number, side in backward.entries()[:0:-1]] + forward.entries()
    return Walk(
        line=straightened(
            [oriented(graph, entry) for entry in entries],
            [graph.chains[number].merged for number, _ in entries],
            path.line.width,
        ),
        chains=frozenset(number for number, _ in entries),
        doubts=(*doubts, *doubts_forward, *doubts_backward),
    )


def _explore(
    graph: ChainGraph,
    starts: list[Track],
    way: Way,
    targets: dict[int, float],
    taken: frozenset[int] = frozenset(),
) -> Explored | None:
    """Best-first over the chains; with targets to the likeliest of them, else to the likeliest end of the line."""
    order = count()
    queue = [(track.cost, next(order), track) for track in starts]
    heapq.heapify(queue)
    closed: set[tuple[int, int]] = set()
    tried: dict[int, list[Track]] = {}
    ends: list[tuple[float, Track]] = []
    for _ in range(MOST_STEPS):
        if not queue or (ends and targets and queue[0][0] >= min(ends, key=_cost)[0]):
            break
        cost, _, track = heapq.heappop(queue)
        if track.before is not None and (track.entry[0] in taken or track.state in closed):
            continue
        closed.add(track.state)
        if track.entry[0] in targets:
            ends.append((cost + targets[track.entry[0]], track))
            continue
        steps = [added(graph, track, step) for step in steps_from(graph, track, way)]
        for onward in steps:
            tried.setdefault(id(onward.root), []).append(onward)
            if onward.state not in closed:
                heapq.heappush(queue, (onward.cost, next(order), onward))
        if not steps and not targets:
            ends.append((cost + (0.0 if track.end in graph.leaving else END_INSIDE), track))
    if not targets:
        # what hangs beside a line that goes on is no end of it
        ends = [(cost, track) for cost, track in ends if not track.merged or not _goes_on(tried, track)]
    if not ends:
        return None
    return Explored(best=min(ends, key=_cost)[1], tried=tried)


def _cost(item: tuple[float, Track]) -> float:
    return item[0]


def _goes_on(tried: dict[int, list[Track]], track: Track) -> bool:
    return any(not other.merged for other in tried.get(id(track.root), ()))


def _is_doubtful(track: Track) -> bool:
    """Whether only the guide places make the line take this step."""
    step, before = track.step, track.before
    if before is not None and before.is_dashed and step.hop <= USUAL_BREAK * before.common_break:
        return step.cost > 2.0 * ACCEPT
    return step.cost > 2.0 * ACCEPT or (step.hop > SHORTEST_GAP and step.cost > UNEARNED)


def _exchanged(explored: Explored) -> bool:
    """Whether the path leaves a line that goes on for one that came from elsewhere."""
    for track in explored.best.steps():
        if track.step.kink and track.step.hop <= SHORTEST_GAP and track.step.cost > 2.0 * ACCEPT:
            others = explored.tried.get(id(track.root), ())
            if any(o.entry[0] != track.entry[0] and not o.step.kink and not o.merged for o in others):
                return True
    return False


def _to_end(
    graph: ChainGraph, start: Track, way: Way, taken: frozenset[int] = frozenset()
) -> tuple[Track, list[tuple[float, float]]]:
    """The line on to its end, cut back where it is unsure beyond an unseen stretch, and the doubts on the way."""
    explored = _explore(graph, [start], way, {}, taken)
    if explored is None:
        return start, []
    steps = explored.best.steps()
    passed = {track.entry[0] for track in steps}
    doubts = []
    known = len(start.entries())
    for track in steps[known:]:
        if track.merged:
            continue
        rivals = [t for t in explored.tried.get(id(track.root), ()) if t.entry[0] not in passed]
        assert track.before is not None
        if _is_unearned(track):
            doubts.append(_tip(graph, track.before))
        elif any(_rivals(graph, rival, track) for rival in rivals):
            doubts.append(_tip(graph, track.before))
            if track.step.hop > SHORTEST_GAP:
                return track.before, doubts
    return explored.best, doubts


def _is_unearned(track: Track) -> bool:
    """Whether a line walked to its end takes a step over an unseen stretch that its course hardly foretells."""
    step, before = track.step, track.before
    if before is not None and before.is_dashed and step.hop <= USUAL_BREAK * before.common_break:
        return False
    return step.hop > SHORTEST_GAP and (step.kink or step.cost > UNEARNED)


def _rivals(graph: ChainGraph, rival: Track, chosen: Track) -> bool:
    """Whether a step that comes out elsewhere, not merely further along, is almost as good as the chosen one."""
    if rival.merged or rival.step.cost > chosen.step.cost + MARGIN:
        return False
    length = int(chosen.line.look_ahead)
    a, b = oriented(graph, rival.entry)[:length], oriented(graph, chosen.entry)[:length]
    beyond = chosen.step.hop + float(np.hypot(*(b[-1] - b[0])))
    if chosen.before is not None and chosen.step.hop > APART:
        # what lies on the way over an unseen stretch is no other way
        tip = np.array(_tip(graph, chosen.before))
        b = np.concatenate([tip + (b[0] - tip) * np.linspace(0.0, 1.0, int(chosen.step.hop) + 1)[:, None], b])
    apart = np.hypot(*(a[-1] - b).T).min() > APART and np.hypot(*(b[-1] - a).T).min() > APART
    return bool(apart and rival.step.hop < beyond)


def _tip(graph: ChainGraph, track: Track) -> tuple[float, float]:
    x, y = oriented(graph, track.entry)[-1]
    return float(x), float(y)
