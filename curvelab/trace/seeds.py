"""Seeds: chains of a raster plot from which lines may be followed, and short straight lines."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.trace import Place
from curvelab.trace.chains import Chain
from curvelab.trace.dashes import BROKEN
from curvelab.trace.found import ShortLine
from curvelab.trace.judge import bow, length_of
from curvelab.trace.layers import layer_of
from curvelab.trace.onward import known_before
from curvelab.trace.prepared import Raster
from curvelab.trace.thinning import Mask
from curvelab.trace.track import begun
from curvelab.trace.walk import Walk, walk_on

SHORTEST = 6.0
"""px: shortest chain from which a line is followed."""
IN_FURNITURE = 0.5
"""Share of a chain within words and boxes from which it is part of them."""
SHORT_STRAIGHT = 1.5
"""px: largest distance of a short line's middle from its chord."""
SHORTEST_LINE = 10.0
"""px"""
MOST_PINS = 5
"""Places that a guide to an ambiguous line has."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Seed:
    """A chain that may be part of a line: its number, its points as places, and its middle one."""

    number: int
    points: Floats
    middle: Place
    furniture: bool


def seeds_of(raster: Raster, furniture: Mask) -> Iterator[Seed]:
    """Chains that can be part of a line, the longest first."""
    chains = raster.graph.chains
    for number in sorted(range(len(chains)), key=lambda k: (-chains[k].length, k)):
        chain = chains[number]
        if chain.length < SHORTEST or chain.lettering or not chain.onward:
            continue
        columns, rows = chain.points.astype(int).T
        yield Seed(
            number=number,
            points=places_of(raster, chain.points),
            middle=_rounded(raster, chain),
            furniture=bool(furniture[rows, columns].mean() > IN_FURNITURE),
        )


def _rounded(raster: Raster, chain: Chain) -> Place:
    """The middle of a chain as a worksheet writes it."""
    x, y = places_of(raster, chain.points[len(chain.points) // 2][None])[0]
    return round(float(x), 1), round(float(y), 1)


def places_of(raster: Raster, points: Floats) -> Floats:
    """Places of pixels of the prepared image."""
    return raster.pixels.places(points + np.array(raster.ink.origin))


def walked(raster: Raster, number: int) -> Walk:
    """The line a chain is part of, over the chains of its own ink and print alone."""
    graph = layer_of(raster.graph, number)
    return walk_on(graph, known_before(graph, begun(graph, (number, 0), 0.0)), ())


def pins(raster: Raster, walk: Walk) -> tuple[Place, ...]:
    """Places that hold a guide to a walked line: the middles of its longest chains along it."""
    chains = [raster.graph.chains[number] for number in walk.chains]
    order = np.array([chain.progress.mean(axis=0).sum() for chain in chains])
    share = (order - order.min()) / max(float(np.ptp(order)), 1e-9)
    chosen = []
    for k in range(MOST_PINS):
        near = [n for n in range(len(chains)) if k / MOST_PINS <= share[n] <= (k + 1) / MOST_PINS]
        if near:
            chosen.append(max(near, key=lambda n: chains[n].length))
    return tuple(_rounded(raster, chains[n]) for n in sorted(set(chosen), key=lambda n: order[n]))


def short_line(raster: Raster, walk: Walk) -> ShortLine | None:
    """The walked line where it is straight; None where it is not."""
    places = places_of(raster, walk.line)
    size = raster.pixels.size_in_places
    if length_of(places[[0, -1]]) < SHORTEST_LINE * size or bow(places) > SHORT_STRAIGHT * size:
        return None
    chains = [raster.graph.chains[number] for number in walk.chains]
    lengths = np.array([chain.length for chain in chains])
    ink = np.average([chain.ink for chain in chains], axis=0, weights=lengths)
    levels = np.clip(np.round(255.0 * (1.0 - np.broadcast_to(ink, (3,)))), 0, 255).astype(int).tolist()
    start, end = sorted(((float(x), float(y)) for x, y in places[[0, -1]]))
    return ShortLine(
        start=start,
        end=end,
        colour=(levels[0], levels[1], levels[2]),
        width=float(np.average([chain.width for chain in chains], weights=lengths)) * size,
        dashed=len(chains) > 1 and float(lengths.sum()) * size < (1.0 - BROKEN) * length_of(places),
    )
