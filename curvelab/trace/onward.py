"""Steps: the chains a partly walked line may go on to, and what was before a track's start."""

from dataclasses import replace

import numpy as np

from curvelab.trace.chains import ChainGraph
from curvelab.trace.continuing import ACCEPT, deviation, smooth_step
from curvelab.trace.gaps import over_gap
from curvelab.trace.heading import heading
from curvelab.trace.track import FRESH, LONG, Step, Track, added, look_cost, meeting, oriented, touching
from curvelab.trace.turning import kinked_unseen, next_dash, turning
from curvelab.trace.way import Way

NEAR_BREAK = 3.0
"""Common breaks of a dashed line within which it is expected to go on."""
CLEAR, CLEAR_STROKES = 0.5, 10.0
"""Cost of a step, and stroke widths of its chain, with which an unbroken line is not looked for beyond a break."""


def steps_from(graph: ChainGraph, track: Track, way: Way) -> list[Step]:
    """Every step a line may take from a track's end."""
    onward = None if track.end in graph.leaving else track.onward()
    if onward is None:
        return []
    joined = meeting(graph, track.end)
    near = way.at_junction(graph, track, joined or touching(graph, track))
    steps = [_either_way(graph, track, smooth_step(graph, onward, entry, track, 0.0)) for entry in near]
    going = [step for step in steps if step.cost <= ACCEPT]
    clear = not track.is_dashed and any(
        step.cost < CLEAR and graph.chains[step.entry[0]].length > CLEAR_STROKES * track.line.width for step in going
    )
    beyond = [] if clear else over_gap(graph, onward, track, way)
    turns = turning(graph, track, [step for step in steps if step.cost > ACCEPT], way, alone=not going)
    usual = [step for step in beyond if not track.is_dashed or step.hop <= NEAR_BREAK * track.common_break]
    if usual and not way.guided:
        beyond = usual
    if way.guided or not (going or turns or usual):
        gone = {step.entry for step in (*beyond, *steps)}
        dashes = [step for step in next_dash(graph, onward, track, way) if step.entry not in gone]
        # a dash round the corner comes before a line that goes on far ahead
        beyond = usual if dashes and not way.guided else beyond
        turns += dashes
    if not (way.guided or going or turns or beyond):
        turns = kinked_unseen(graph, onward, track, way)
    return [*going, *turns, *beyond]


def _either_way(graph: ChainGraph, track: Track, step: Step) -> Step:
    """The step at no more cost than the line has as the continuation of the chain, followed back."""
    if step.cost <= ACCEPT or not step.trusted or graph.chains[step.entry[0]].length < LONG:
        return step
    back = heading(oriented(graph, step.entry)[::-1])
    if back is None:
        return step
    walked = track.walked()[: -int(track.line.look_ahead) : -1]
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(walked, axis=0).T))]
    cost = deviation(back, walked, run, track) + look_cost(graph.chains[step.entry[0]], track.line)
    return replace(step, cost=min(step.cost, cost))


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
