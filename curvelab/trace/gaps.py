"""Steps over an unseen stretch: a break of a dashed line, a label, ink that the grid hides."""

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph
from curvelab.trace.characters import FREE
from curvelab.trace.continuing import ACCEPT, SHORTEST_LEG, SOLE, hop_reach, longest_dash, smooth_step, up_to_corner
from curvelab.trace.heading import Heading, heading
from curvelab.trace.track import End, Step, Track, meeting, oriented
from curvelab.trace.turning import SHORT_HOP
from curvelab.trace.way import Way

MARGIN = 1.0
"""A second step this near in cost is almost as good."""
LONGEST_GUIDED = 400.0
"""px bridged between two guide places."""
FAR_DASH, FAR_LINE = 0.18, 0.5
"""Least length beyond an unseen stretch, relative to it, of a dash and of a line."""
SCRAP = 8.0
"""Stroke widths of a chain that may be left over from the grid."""
TOUCHING = 4.0
"""px: what lies beyond so short a break need not face the line."""
ASIDE = 3.0
"""Spreads of the continuation within which a chain may begin."""


def over_gap(graph: ChainGraph, onward: Heading, track: Track, way: Way) -> list[Step]:
    """Steps over an unseen stretch; of pieces in one line the next comes first."""
    width = track.line.width
    walked = float(onward.frame(oriented(graph, track.entry)[-1:])[0][0])
    reach = LONGEST_GUIDED if way.guided else hop_reach(track)
    steps = []
    joined = meeting(graph, track.end)
    for entry in _ahead(graph, onward, way.beyond_gap(graph, track, onward.tip, reach)):
        if entry in joined:
            continue
        # the tip itself may be frayed: the best of the first places within a stroke's width counts
        ahead, aside = onward.frame(oriented(graph, entry)[: max(1, int(width))])
        hop = float(ahead[0]) - walked
        if hop < 1.0 or np.abs(aside).min() > ASIDE * onward.spread(ahead)[0]:
            continue
        if _faces(graph, entry, onward, track, hop, guided=way.guided):
            steps.append(smooth_step(graph, onward, entry, track, hop))
    fair = [step for step in steps if step.cost <= ACCEPT]
    if not fair:
        return steps if len(steps) == 1 and steps[0].cost <= SOLE else []
    best = min(step.cost for step in fair)
    first = min((step for step in fair if step.cost <= best + MARGIN), key=lambda step: step.hop)
    length = graph.chains[first.entry[0]].length
    # what may be a scrap hides nothing beyond it, nor a line that goes on better there
    limit = first.hop + length if track.is_dashed or length > SCRAP * width else np.inf
    as_good = -np.inf if track.is_dashed else first.cost + MARGIN
    return [step for step in fair if step.hop < limit or step.cost <= as_good]


def _ahead(graph: ChainGraph, onward: Heading, ends: list[End]) -> list[End]:
    """Ends that lie ahead and not far aside."""
    if not ends:
        return []
    tips = np.array([graph.chains[number].points[-side] for number, side in ends])
    ahead, aside = onward.frame(tips)
    near = (ahead >= 1.0) & (np.abs(aside) <= 2.0 * ASIDE * onward.spread(ahead) + 4.0)
    return [end for end, kept in zip(ends, near.tolist(), strict=True) if kept]


def _faces(graph: ChainGraph, entry: End, onward: Heading, track: Track, hop: float, *, guided: bool) -> bool:
    """Whether what lies beyond a gap is long enough and, followed back, comes out at the line's tip."""
    chain = graph.chains[entry[0]]
    if hop <= TOUCHING:
        return True
    short = hop <= SHORT_HOP * track.line.width
    # a dash that a crossing cut is longer than its chain
    cut = short and chain.junctions[1 - entry[1]] != FREE
    if not cut and chain.length < (FAR_DASH if track.is_dashed or short else FAR_LINE) * hop:
        return False
    if track.is_dashed and not guided and chain.length > longest_dash(track):
        return False
    # what is left of a grid line bends a dash: its direction says little
    if track.is_dashed and chain.length < longest_dash(track):
        return True
    places = oriented(graph, entry)[: int(track.line.look_ahead)]
    corner = up_to_corner(places)
    cornered = corner > SHORTEST_LEG and _points_at(places[:corner], onward.tip)
    return cornered or _points_at(places, onward.tip)


def _points_at(places: Floats, tip: Floats) -> bool:
    """Whether a line followed back comes out at a place; too few places do not say."""
    back = heading(places[::-1])
    if back is None:
        return True
    ahead, aside = back.frame(tip[None])
    return bool(ahead[0] > 0 and abs(aside[0]) <= ASIDE * back.spread(ahead)[0])
