"""How well a chain continues a partly walked line: its deviation from the line's heading, its look, what is unseen."""

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import ChainGraph
from curvelab.trace.heading import Heading
from curvelab.trace.track import End, Step, Track, look_cost, oriented, tells_direction

ACCEPT = 7.0
"""Largest cost of a step that continues the line smoothly."""
SOLE = 12.0
"""The same for the only line beyond an unseen stretch, and the cost of a kink however sharp."""
CAP = 30.0
"""Largest cost of one place, so that a far end decides no more than the rest."""
PATTERN = 6.0
"""Cost of an unbroken line beyond a break of a dashed one; no step to its end takes it."""
UNBROKEN, SHORTEST_UNBROKEN = 2.5, 30.0
"""Dash lengths, and px, from which a line is unbroken."""
CORNER = 2.0
"""Cost of a line beyond a break that soon has a corner: only what is before it tells."""
SHORT_LEG, SHORTEST_LEG = 2.5, 8.0
"""Stroke widths, and px, of line before that corner that are too short to tell."""
SHARED = 0.1
"""Cost of a chain that does not tell where the line runs."""
HOP_STROKES = 80.0
LONGEST_HOP = 160.0
"""px: an unseen stretch is bridged up to 80 stroke widths, at most this; between two guide places further."""
MISSED_BREAKS = 6.0
"""Common breaks of a dashed line that are as unlikely as the longest hop of another."""
USUAL_BREAK = 1.6
"""Common breaks of a dashed line up to which a break is print."""


def hop_reach(track: Track) -> float:
    """Longest unseen stretch that is bridged without a guide place beyond, px."""
    return min(LONGEST_HOP, HOP_STROKES * track.line.width)


def longest_dash(track: Track) -> float:
    """Length in px up to which a piece of a dashed line is a dash."""
    return max(UNBROKEN * max(map(len, track.trusted)), SHORTEST_UNBROKEN)


def smooth_step(graph: ChainGraph, onward: Heading, entry: End, track: Track, hop: float) -> Step:
    """The step onto a chain as the line's smooth continuation, ``hop`` px of it unseen."""
    chain, line = graph.chains[entry[0]], track.line
    trusted = tells_direction(chain, line)
    if not trusted and hop == 0.0:
        return Step(entry=entry, cost=SHARED + look_cost(chain, line), trusted=False)
    places = oriented(graph, entry)
    run = np.r_[0.0, np.cumsum(np.hypot(*np.diff(places, axis=0).T))]
    count = int(np.searchsorted(run, line.look_ahead, side="right"))
    cost = deviation(onward, places[:count], run[:count], track)
    if hop > 1.0 and cost > ACCEPT:
        straight = up_to_corner(places[:count])
        if run[straight - 1] > max(SHORT_LEG * line.width, SHORTEST_LEG):
            cost = min(cost, CORNER + deviation(onward, places[:straight], run[:straight], track))
    return Step(
        entry=entry,
        cost=cost + look_cost(chain, line) + _break_cost(track, float(run[-1]), hop),
        hop=hop,
        trusted=trusted,
    )


def deviation(onward: Heading, places: Floats, run: Floats, track: Track) -> float:
    """Mean squared deviation from the continuation in its standard deviations, beyond what chance gives."""
    ahead, aside = onward.frame(places)
    squared = np.minimum((aside / onward.spread(ahead)) ** 2, CAP)
    # a stroke that turns back is no continuation, however close it lies
    squared = np.where(ahead < -track.line.width - 2.0, CAP, squared)
    return max(0.0, float(np.average(squared, weights=1.0 + run / track.line.look_ahead)) - 1.0)


def up_to_corner(places: Floats) -> int:
    """Number of places up to the one furthest from the chord."""
    chord = places[-1] - places[0]
    offset = places - places[0]
    away = np.abs(offset[:, 0] * chord[1] - offset[:, 1] * chord[0])
    return int(away.argmax()) + 1


def _break_cost(track: Track, length: float, hop: float) -> float:
    """What speaks against ``length`` px of line beyond a break: a dashed line goes on in dashes, others unbroken."""
    if track.is_dashed and hop <= USUAL_BREAK * track.common_break:
        return PATTERN if hop > 1.0 and length > longest_dash(track) else 0.0
    share = hop / min(hop_reach(track), MISSED_BREAKS * track.common_break if track.is_dashed else np.inf)
    scrap = max(0.0, 1.0 - length / (5.0 * track.line.width))
    return 2.0 * scrap + 3.0 * share * max(1.0, share)
