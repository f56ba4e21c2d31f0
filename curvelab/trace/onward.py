"""Steps: the chains a partly walked line may go on to, over junctions and unseen stretches, and what speaks against."""

from collections.abc import Iterable
from dataclasses import dataclass, replace

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph
from curvelab.trace.characters import FREE
from curvelab.trace.heading import Heading, heading
from curvelab.trace.track import (
    FRESH,
    End,
    Line,
    Step,
    Track,
    added,
    look_cost,
    meeting,
    oriented,
    other,
    tells_direction,
)

ACCEPT = 7.0
"""Largest cost of a step that continues the line smoothly."""
SOLE = 12.0
"""The same for the only line beyond an unseen stretch."""
MARGIN = 1.0
"""A second step this near in cost is almost as good."""
CAP = 30.0
"""Largest cost of one place, so that a far end decides no more than the rest."""
THINNER = 0.5
"""Share of its width below which a stroke is not the same line as another."""
CLAIMED = 20.0
"""Cost of turning onto a chain that another line continues."""
PATTERN = 6.0
"""Cost of an unbroken line beyond the breaks of a dashed one."""
UNBROKEN, SHORTEST_UNBROKEN = 2.5, 30.0
"""Dash lengths, and px, from which a line is unbroken."""
SHARED = 0.1
"""Cost of a chain that does not tell where the line runs."""
HOP_STROKES = 80.0
LONGEST_HOP = 160.0
"""px: an unseen stretch is bridged up to 80 stroke widths, at most this; between two guide places further."""
LONGEST_GUIDED = 400.0
FAR_DASH, FAR_LINE = 0.18, 0.5
"""Least length beyond an unseen stretch, relative to it, of a dash and of a line."""
DASHES = 3
"""Breaks after which a line is dashed."""
PER_PX = 0.15
"""Cost of a px between a line and the dash after a kink: the nearest comes first."""
HIDDEN = 60.0
"""px: on the way to a guide place a kink may hide in so long a stretch under another line."""
SHORT_HOP = 8.0
"""Stroke widths of a break that may be a dashed line's."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Way:
    """Which way lines are walked: with rising current (``sign`` 1) or against it (-1), and how far.

    ``until`` is the progress of the guide place that is walked to; None where the line is walked to its end.
    """

    sign: int
    until: Floats | None = None

    def passes(self, graph: ChainGraph, entry: End, track: Track, hop: float) -> bool:
        """Whether a line can enter a chain there without turning back along an axis or passing the guide place."""
        number, side = entry
        chain = graph.chains[number]
        here = self.sign * graph.chains[track.end[0]].progress[-track.end[1]]
        first, last = (self.sign * chain.progress[-k] for k in (side, 1 - side))
        slack = max(chain.slack, track.line.width + 2.0)
        if chain.length > slack and not (chain.onward and side == (0 if self.sign > 0 else 1)):
            return False
        if np.any(last < here - slack) or (hop > 0.0 and np.any(first < here - slack)):
            return False
        return self.until is None or bool(np.all(first <= self.sign * self.until + slack))


def steps_from(graph: ChainGraph, track: Track, way: Way) -> list[Step]:
    """Every step a line may take from a track's end."""
    onward = None if track.end in graph.leaving else track.onward()
    if onward is None:
        return []
    passed = {number for number, _ in track.entries()}
    near = [e for e in meeting(graph, track.end) if e[0] not in passed and way.passes(graph, e, track, 0.0)]
    steps = [_smooth(graph, onward, entry, track, 0.0) for entry in near]
    going = [step for step in steps if step.cost <= ACCEPT]
    beyond = _over_gap(graph, onward, track, way, passed)
    turns = _turning(graph, track, [step for step in steps if step.cost > ACCEPT], way, alone=not going)
    if way.until is not None or not (going or turns or beyond):
        gone = {step.entry for step in beyond}
        turns += [step for step in _next_dash(graph, onward, track, way, passed) if step.entry not in gone]
    return [*going, *turns, *beyond]


def known_before(graph: ChainGraph, start: Track, most: int = FRESH) -> Track:
    """The track with the direction and the breaks of the chains smoothly before it."""
    number, side = start.entry
    back = replace(start, entry=(number, 1 - side), trusted=(start.trusted[0][::-1],))
    for _ in range(most):
        steps = [s for s in steps_from(graph, back, Way(sign=-1)) if s.cost <= ACCEPT and not s.kink]
        if not steps:
            break
        back = added(graph, back, min(steps, key=lambda step: step.cost))
    return replace(start, trusted=tuple(piece[::-1] for piece in back.trusted[::-1]), breaks=back.breaks)


def hop_reach(track: Track) -> float:
    """Longest unseen stretch that is bridged without a guide place beyond, px."""
    reach = min(LONGEST_HOP, HOP_STROKES * track.line.width)
    return min(reach, 6.0 * common_break(track)) if is_dashed(track) else reach


def common_break(track: Track) -> float:
    """Usual break of a dashed line, px."""
    return float(np.median(track.breaks))


def is_dashed(track: Track) -> bool:
    """Whether the line has shown enough breaks to be dashed."""
    return len(track.breaks) >= DASHES


def _smooth(graph: ChainGraph, onward: Heading, entry: End, track: Track, hop: float) -> Step:
    chain, line = graph.chains[entry[0]], track.line
    trusted = tells_direction(chain, line)
    if not trusted and hop == 0.0:
        return Step(entry=entry, cost=SHARED + look_cost(chain, line), trusted=False)
    places = oriented(graph, entry)
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(places, axis=0).T))]
    seen = run <= line.look_ahead
    ahead, aside = onward.frame(places[seen])
    deviation = np.minimum((aside / onward.spread(ahead)) ** 2, CAP)
    # a stroke that turns back is no continuation, however close it lies
    deviation = np.where(ahead < -line.width - 2.0, CAP, deviation)
    cost = max(0.0, float(np.average(deviation, weights=1.0 + run[seen] / line.look_ahead)) - 1.0)
    cost += 2.0 * max(0.0, 1.0 - run[-1] / (5.0 * line.width)) + look_cost(chain, line)
    if (
        hop > 1.0
        and is_dashed(track)
        and chain.length > max(UNBROKEN * max(map(len, track.trusted)), SHORTEST_UNBROKEN)
    ):
        cost += PATTERN
    share = hop / hop_reach(track)
    return Step(entry=entry, cost=cost + 3.0 * share * max(1.0, share), hop=hop, trusted=trusted)


def _turning(graph: ChainGraph, track: Track, steps: list[Step], way: Way, alone: bool) -> list[Step]:
    """Steps round a corner: on the way to a guide place any, else the one that no other line goes on to."""
    firsts = meeting(graph, track.end)
    claimed = [_claimed(graph, step.entry, [f for f in firsts if f != step.entry], track.line) for step in steps]
    turns = [
        replace(step, kink=True, cost=step.cost + CLAIMED * taken) for step, taken in zip(steps, claimed, strict=True)
    ]
    if way.until is not None:
        return turns
    free = [turn for turn, taken in zip(turns, claimed, strict=True) if not taken]
    return [replace(free[0], cost=ACCEPT)] if alone and len(free) == 1 else []


def _claimed(graph: ChainGraph, entry: End, others: Iterable[End], line: Line) -> bool:
    """Whether another chain at the junction continues this one smoothly."""
    back = heading(oriented(graph, entry)[::-1])
    if back is None:
        return False
    chain = graph.chains[entry[0]]
    for rival in others:
        if graph.chains[rival[0]].width < THINNER * chain.width:
            continue
        ahead, aside = back.frame(oriented(graph, rival)[: int(line.look_ahead)])
        if np.mean(np.minimum((aside / back.spread(ahead)) ** 2, CAP)) < ACCEPT and ahead[-1] > 0:
            return True
    return False


def _over_gap(graph: ChainGraph, onward: Heading, track: Track, way: Way, passed: set[int]) -> list[Step]:
    """Steps over an unseen stretch; of pieces in one line the next comes first."""
    if graph.tips is None:
        return []
    line, dashed = track.line, is_dashed(track)
    reach = LONGEST_GUIDED if way.until is not None else hop_reach(track)
    steps = []
    for index in graph.tips.query_ball_point(onward.tip, reach):
        entry = graph.tip_ends[index]
        if entry[0] in passed or not way.passes(graph, entry, track, 1.0):
            continue
        # the tip itself may be frayed: the best of the first places within a stroke's width counts
        ahead, aside = onward.frame(oriented(graph, entry)[: max(1, int(line.width))])
        hop = float(ahead[0])
        if hop < 1.0 or np.abs(aside).min() > 3.0 * onward.spread(ahead)[0]:
            continue
        far_side = FAR_DASH if dashed or hop <= SHORT_HOP * line.width else FAR_LINE
        if _faces(graph, entry, onward, hop, far_side):
            steps.append(_smooth(graph, onward, entry, track, hop))
    fair = [step for step in steps if step.cost <= ACCEPT]
    if not fair:
        return steps if len(steps) == 1 and steps[0].cost <= SOLE else []
    best = min(step.cost for step in fair)
    first = min((step for step in fair if step.cost <= best + MARGIN), key=lambda step: step.hop)
    limit = first.hop + graph.chains[first.entry[0]].length
    return [step for step in fair if step.hop < limit]


def _faces(graph: ChainGraph, entry: End, onward: Heading, hop: float, far_side: float) -> bool:
    """Whether what lies beyond a gap is long enough and, followed back, comes out at the line's tip."""
    chain = graph.chains[entry[0]]
    if hop <= 4.0:
        return True
    # a dash that a crossing cut is longer than its chain
    if chain.length < far_side * hop and chain.junctions[1 - entry[1]] == FREE:
        return False
    back = heading(oriented(graph, entry)[::-1])
    if back is None:
        return True
    ahead, aside = back.frame(onward.tip[None])
    return bool(ahead[0] > 0 and abs(aside[0]) <= 3.0 * back.spread(ahead)[0])


def _next_dash(graph: ChainGraph, onward: Heading, track: Track, way: Way, passed: set[int]) -> list[Step]:
    """The dash after a kink in a break: the only one of the line's look within its common break."""
    guided = way.until is not None
    if graph.tips is None or not (is_dashed(track) or guided):
        return []
    tip = oriented(graph, other(track.end))[-1]
    usual = common_break(track) if is_dashed(track) else SHORT_HOP * track.line.width
    reach = HIDDEN if guided else 1.6 * usual + track.line.width
    found: dict[int, tuple[float, End]] = {}
    for index in graph.tips.query_ball_point(tip, reach):
        entry = graph.tip_ends[index]
        if entry[0] in passed or not way.passes(graph, entry, track, 1.0):
            continue
        if look_cost(graph.chains[entry[0]], track.line) > 4.0:
            continue
        distance = float(np.hypot(*(oriented(graph, entry)[0] - tip)))
        found[entry[0]] = min(found.get(entry[0], (np.inf, entry)), (distance, entry))
    nearest = sorted(found.values())
    if not guided and len(nearest) > 1 and nearest[1][0] < 1.5 * nearest[0][0]:
        return []
    dashes = []
    for distance, entry in nearest if guided else nearest[:1]:
        smooth = _smooth(graph, onward, entry, track, distance)
        cost = max(ACCEPT, min(smooth.cost, SOLE)) + PER_PX * distance
        cost += CLAIMED * _claimed(graph, entry, meeting(graph, entry), track.line)
        dashes.append(replace(smooth, cost=cost, kink=smooth.cost > ACCEPT))
    return dashes
