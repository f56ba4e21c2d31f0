"""Tracks: partly walked lines, each a chain added to the track before it, with what the steps so far cost."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.trace.chains import MERGED, Chain, ChainGraph
from curvelab.trace.characters import FREE
from curvelab.trace.heading import Heading, heading

End = tuple[int, int]
"""A chain and the side of it, 0 its first point, 1 its last."""

SHORT_END, SHORT_ARM = 2.0, 4.0
"""Widths of the line below which a chain with a free end, and one between junctions, are too short to tell."""
THIN = 3.0
"""px"""
TINT_SPREAD = 0.2
"""Difference of ink between chains of one line, relative to the ink."""
TELLING = 8
"""Places beyond a kink from which they alone tell the direction."""
LETTERING = 6.0
"""Cost of a chain that looks like part of a character."""
TORN = 1.5
"""Widths of the line over which its middle line may be torn."""
LEAST_BREAK = 2.5
"""px: shortest break of a dashed line."""
DASHES = 3
"""Breaks after which a line is dashed."""
LONG = 40
"""Places of a chain that alone tells the direction."""
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

    @property
    def is_dashed(self) -> bool:
        """Whether the line has shown enough breaks to be dashed."""
        return len(self.breaks) >= DASHES

    @property
    def common_break(self) -> float:
        """Usual break of a dashed line, px."""
        return float(np.median(self.breaks))

    @property
    def state(self) -> tuple[int, int]:
        """What its way on depends on: its last chain, and where that tells little the last that tells direction."""
        number = self.entry[0]
        if not self.merged and len(self.trusted[-1]) >= LONG:
            return number, number
        return number, self.root.entry[0] if self.root else number

    def entries(self) -> list[End]:
        """Its chains in order, each with the side it is entered at."""
        found: list[End] = []
        track: Track | None = self
        while track is not None:
            found.append(track.entry)
            track = track.before
        return found[::-1]

    def numbers(self) -> frozenset[int]:
        """Numbers of its chains."""
        return frozenset(number for number, _ in self.entries())

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
        return heading(self.walked())

    def walked(self) -> Floats:
        """The places that tell its direction, without the last ones, which a junction's ink may have pulled aside."""
        history = np.concatenate(self.trusted)
        pulled = int(np.ceil(0.7 * self.line.width))
        return history[:-pulled] if len(history) > 4 * pulled + 8 else history


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


def touching(graph: ChainGraph, track: Track) -> tuple[End, ...]:
    """Ends so near a track's end that its stroke may reach them: thinning tears strokes where the grid is taken off."""
    if graph.tips is None:
        return ()
    tip = oriented(graph, track.entry)[-1]
    near = graph.tips.query_ball_point(tip, TORN * track.line.width + 1.0)
    return tuple(sorted(graph.tip_ends[k] for k in near if graph.tip_ends[k][0] != track.entry[0]))


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
        breaks=(*track.breaks, step.hop)[-8:] if step.hop > LEAST_BREAK else track.breaks,
    )


def tells_direction(chain: Chain, line: Line) -> bool:
    """Whether a chain is long enough, or a dash, and not perhaps shared, to say where the line runs."""
    if chain.junctions == (FREE, FREE):
        return True
    least = SHORT_END if FREE in chain.junctions else SHORT_ARM
    return not chain.merged and chain.length > least * line.width


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
    share = min(1.0, chain.length / line.look_ahead)
    return share * (min(tint**2, 9.0) + min(width**2, 4.0))


def straightened(pieces: list[Floats], merged: list[bool], width: float) -> Floats:
    """The places of a line's pieces in order; what it shares with another drawn straight from end to end.

    The middle of two strokes that print as one is the middle of neither.
    """
    drawn = list(pieces)
    for k in range(1, len(pieces) - 1):
        if not merged[k] or merged[k - 1] or merged[k + 1]:
            continue
        start, end = pieces[k - 1][-1], pieces[k + 1][0]
        chord = end - start
        offset = pieces[k] - start
        aside = np.abs(offset[:, 0] * chord[1] - offset[:, 1] * chord[0]) / max(float(np.hypot(*chord)), 1.0)
        if aside.max() <= width:
            share = np.linspace(0.0, 1.0, len(pieces[k]) + 2)[1:-1, None]
            drawn[k] = start + share * chord
    return np.concatenate(drawn)
