"""Tracks: partly walked lines, each a chain added to the track before it, with what the steps so far cost."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import MERGED, Chain, ChainGraph, is_bridge
from curvelab.trace.characters import FREE
from curvelab.trace.heading import Heading, heading

End = tuple[int, int]
"""A chain and the side of it, 0 its first point, 1 its last."""

THIN = 3.0
"""px"""
TINT_SPREAD = 0.2
"""Difference of ink between chains of one line, relative to the ink."""
TELLING = 8
"""Places beyond a kink from which they alone tell the direction."""
LETTERING = 6.0
"""Cost of a chain that looks like part of a character."""
FRESH = 6
"""Chains that a heading is taken from at most."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Line:
    """What is known of the line that is followed."""

    ink: Floats
    width: float

    @property
    def look_ahead(self) -> float:
        """Length in px over which a step is judged: beyond the merged stretch of a crossing of 10 degrees."""
        return float(np.clip(1.6 * MERGED * self.width, 60.0, 180.0))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Step:
    """A chain a line may go on to.

    ``cost`` is the mean squared deviation from the line's continuation in its standard deviations beyond what chance
    gives, with what speaks against the chain by its look; ``hop`` the unseen px before it; ``kink`` is set where the
    line does not go on smoothly; ``trusted`` where the chain tells the line's direction.
    """

    entry: End
    cost: float
    hop: float = 0.0
    kink: bool = False
    trusted: bool = True


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Track:
    """A line walked up to the far end of a chain.

    Parameters
    ----------
    line : Line
    entry : End
        The last chain and the side it was entered at.
    before : Track or None
    step : Step
    cost : float
        Of all its steps.
    trusted : tuple of array
        The last walked places that tell its direction.
    merged : tuple of array
        Places since then, which may be another line's as well.
    breaks : tuple of float
        Unseen stretches passed, px.
    """

    line: Line
    entry: End
    before: "Track | None"
    step: Step
    cost: float
    trusted: tuple[Floats, ...]
    merged: tuple[Floats, ...] = ()
    breaks: tuple[float, ...] = ()

    @property
    def root(self) -> "Track | None":
        """The last track before this one whose direction is known."""
        track = self.before
        while track is not None and track.merged:
            track = track.before
        return track

    @property
    def end(self) -> End:
        """Where it leaves its last chain."""
        return other(self.entry)

    def entries(self) -> list[End]:
        """Its chains in order, each with the side it is entered at."""
        found: list[End] = []
        track: Track | None = self
        while track is not None:
            found.append(track.entry)
            track = track.before
        return found[::-1]

    def steps(self) -> list["Track"]:
        """It and every track before it, the first first."""
        found: list[Track] = []
        track: Track | None = self
        while track is not None:
            found.append(track)
            track = track.before
        return found[::-1]

    def onward(self) -> Heading | None:
        """Its continuation from the places that tell its direction."""
        history = np.concatenate(self.trusted)
        # a junction's ink may have pulled the last ones aside
        pulled = int(np.ceil(0.7 * self.line.width))
        return heading(history[:-pulled] if len(history) > 4 * pulled + 8 else history)


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


def line_of(chain: Chain) -> Line:
    """The line a chain belongs to, as far as the chain tells."""
    return Line(ink=chain.ink, width=max(chain.width, 1.0))


def begun(graph: ChainGraph, entry: End, cost: float) -> Track:
    """A track of one chain."""
    return Track(
        line=line_of(graph.chains[entry[0]]),
        entry=entry,
        before=None,
        step=Step(entry=entry, cost=cost),
        cost=cost,
        trusted=(oriented(graph, entry),),
    )


def added(graph: ChainGraph, track: Track, step: Step) -> Track:
    """The track one step further."""
    points = oriented(graph, step.entry)
    merged = () if step.kink or step.trusted else (*track.merged, points)
    trusted = track.trusted
    if step.kink and len(points) >= TELLING:
        trusted = (points,)
    elif step.kink or step.trusted:
        trusted = (*track.trusted, points)[-FRESH:]
    elif sum(map(len, merged)) > 1.5 * MERGED * track.line.width:
        trusted, merged = (*track.trusted, *merged)[-FRESH:], ()
    return Track(
        line=track.line,
        entry=step.entry,
        before=track,
        step=step,
        cost=track.cost + step.cost,
        trusted=trusted,
        merged=merged,
        breaks=(*track.breaks, step.hop)[-8:] if step.hop > 1.0 else track.breaks,
    )


def tells_direction(chain: Chain, line: Line) -> bool:
    """Whether a chain is long enough, and not perhaps shared, to say where the line runs."""
    return not is_bridge(chain) and chain.length > 2.0 * line.width


def look_cost(chain: Chain, line: Line) -> float:
    """How far the ink and width of a chain are from the line's."""
    if chain.lettering:
        return LETTERING
    if chain.length < 3.0 * line.width:
        return 0.0
    # the middle pixel of a thin stroke shows half to all of its ink
    spread = TINT_SPREAD if line.width > THIN else 2.0 * TINT_SPREAD
    scale = spread * max(float(line.ink.max()), 0.1)
    tint = float(np.max(np.abs(chain.ink - line.ink))) / scale
    width = (chain.width - line.width) / (0.5 * line.width + 1.0)
    return min(tint**2, 9.0) + min(width**2, 4.0)
