"""Steps round a corner: kinks at junctions, and kinks that hide in a break or under another line."""

from dataclasses import replace

import numpy as np

from curvelab.trace.chains import ChainGraph
from curvelab.trace.characters import FREE
from curvelab.trace.continuing import ACCEPT, CAP, SOLE, USUAL_BREAK, hop_reach, smooth_step
from curvelab.trace.heading import Heading, heading
from curvelab.trace.track import End, Line, Step, Track, look_cost, meeting, oriented, other, tells_direction
from curvelab.trace.way import Way

THINNER = 0.5
"""Share of its width below which a stroke is not the same line as another."""
CLAIMED = 20.0
"""Cost of turning onto a chain that another line continues."""
PER_PX = 0.15
"""Cost of a px between a line and the dash after a kink: the nearest comes first."""
HIDDEN = 60.0
"""px: on the way to a guide place a kink may hide in so long a stretch under another line."""
SHORT_HOP = 8.0
"""Stroke widths of a break that may be a dashed line's."""
OTHER_LOOK = 4.0
"""Cost of its look from which a dash is another line's."""
CLEARLY_NEARER = 1.5
SAME_LOOK = 1.0
"""Cost of its look up to which a line beyond a label is the same."""
LEAST_BEYOND = 25.0
"""px: shortest line beyond a label that its direction is taken from."""
FAR_SIDE = 0.5
"""Least length of it, relative to the unseen legs."""
LEAST_TURN = 0.15
"""rad: smallest turn at a kink that is not seen."""
LEAST_BEHIND = 3.0
"""px by which the kink may lie before a line's end."""
MOST_JOINED = 6
"""Junctions that one crossing may print as."""


def turning(graph: ChainGraph, track: Track, steps: list[Step], way: Way, *, alone: bool) -> list[Step]:
    """Steps round a corner: on the way to a guide place any, else the one that no other line goes on to."""
    own = track.numbers()
    claimed = [is_claimed(graph, step.entry, track.line, own) for step in steps]
    if way.guided:
        return [
            replace(step, kink=True, cost=min(step.cost, SOLE) + CLAIMED * taken)
            for step, taken in zip(steps, claimed, strict=True)
        ]
    free = [
        step
        for step, taken in zip(steps, claimed, strict=True)
        if not taken and graph.chains[step.entry[0]].length > track.line.width
    ]
    return [replace(free[0], kink=True, cost=ACCEPT)] if alone and len(free) == 1 else []


def next_dash(graph: ChainGraph, onward: Heading, track: Track, way: Way) -> list[Step]:
    """The dash after a kink in a break: the only one of the line's look within its common break."""
    if not (track.is_dashed or way.guided):
        return []
    tip = oriented(graph, other(track.end))[-1]
    usual = track.common_break if track.is_dashed else SHORT_HOP * track.line.width
    reach = HIDDEN if way.guided else USUAL_BREAK * usual + track.line.width
    found: dict[int, tuple[float, End]] = {}
    for entry in way.beyond_gap(graph, track, tip, reach):
        if look_cost(graph.chains[entry[0]], track.line) > OTHER_LOOK:
            continue
        distance = float(np.hypot(*(oriented(graph, entry)[0] - tip)))
        found[entry[0]] = min(found.get(entry[0], (np.inf, entry)), (distance, entry))
    nearest = sorted(found.values())
    if not way.guided and len(nearest) > 1 and nearest[1][0] < CLEARLY_NEARER * nearest[0][0]:
        return []
    dashes = []
    for distance, entry in nearest if way.guided else nearest[:1]:
        smooth = smooth_step(graph, onward, entry, track, distance)
        claimed = is_claimed(graph, entry, track.line, track.numbers())
        if claimed and not way.guided:
            continue
        cost = max(ACCEPT, min(smooth.cost, SOLE)) + PER_PX * distance + CLAIMED * claimed
        dashes.append(replace(smooth, cost=cost, kink=smooth.cost > ACCEPT))
    return dashes


def kinked_unseen(graph: ChainGraph, onward: Heading, track: Track, way: Way) -> list[Step]:
    """The only line of the same look that ends where this one, drawn on, meets it drawn back: a kink under a label."""
    steps = []
    for entry in way.beyond_gap(graph, track, onward.tip, hop_reach(track)):
        chain = graph.chains[entry[0]]
        if chain.junctions[entry[1]] != FREE or chain.lettering or look_cost(chain, track.line) > SAME_LOOK:
            continue
        back = heading(oriented(graph, entry)[::-1])
        if back is None or chain.length < LEAST_BEYOND:
            continue
        legs = _legs(onward, back)
        if legs is not None and chain.length > FAR_SIDE * sum(legs) and sum(legs) < hop_reach(track):
            steps.append(Step(entry=entry, cost=SOLE, hop=sum(legs), kink=True))
    return steps if len(steps) == 1 else []


def _legs(onward: Heading, back: Heading) -> tuple[float, float] | None:
    """How far two headings, drawn straight on, run to where they meet; None where they do not."""
    sides = np.stack([onward.direction, -back.direction], axis=1)
    if abs(np.linalg.det(sides)) < np.sin(LEAST_TURN):
        return None
    here, there = np.linalg.solve(sides, back.tip - onward.tip).tolist()
    return (here, there) if min(here, there) > -LEAST_BEHIND else None


def is_claimed(graph: ChainGraph, entry: End, line: Line, own: frozenset[int]) -> bool:
    """Whether a chain at the crossing that is not among the ``own`` continues this one smoothly."""
    back = heading(oriented(graph, entry)[::-1])
    if back is None:
        return False
    least = THINNER * graph.chains[entry[0]].width
    for rival in _arms(graph, entry, line):
        if rival[0] in own or graph.chains[rival[0]].width < least:
            continue
        ahead, aside = back.frame(oriented(graph, rival)[: int(line.look_ahead)])
        if np.mean(np.minimum((aside / back.spread(ahead)) ** 2, CAP)) < ACCEPT and ahead[-1] > 0:
            return True
    return False


def _arms(graph: ChainGraph, entry: End, line: Line) -> list[End]:
    """Ends that leave the crossing where a chain begins, beyond chains that do not tell their direction too."""
    arms, seen, waiting = [], {entry[0]}, [entry]
    for _ in range(MOST_JOINED):
        if not waiting:
            break
        for end in meeting(graph, waiting.pop(0)):
            if end[0] in seen:
                continue
            seen.add(end[0])
            arms.append(end)
            if not tells_direction(graph.chains[end[0]], line):
                waiting.append(other(end))
    return arms
