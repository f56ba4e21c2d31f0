"""Layers of ink: the chains that can belong to one line by their colour, and by being dashes or not."""

from dataclasses import replace

import numpy as np
from scipy.spatial import cKDTree

from curvelab.trace.chains import Chain, ChainGraph
from curvelab.trace.characters import FREE
from curvelab.trace.select import tint_distance

OTHER_TINT = 0.5
"""Difference of tint from which two chains are of different inks; beneath it a crossing may have mixed them."""
TELLING = 2.5
"""Stroke widths from which a chain shows its own ink."""
DASH = (3.0, 14.0)
"""Length of a dash in stroke widths."""
FEWEST_DASHES = 6
"""Dashes on a plot from which short free chains are dashes."""
UNBROKEN = 3.0
"""Dash lengths from which a chain is no dash."""


def layer_of(graph: ChainGraph, seed: int) -> ChainGraph:
    """The graph without what cannot be the line of a chain: other inks, dashes beside solid lines, and the reverse.

    Chains keep their numbers; those left out meet nothing and have no tips.
    """
    out = _other_inks(graph, seed) | _other_print(graph, seed)
    if not out:
        return graph
    kept = [end for end in graph.tip_ends if end[0] not in out]
    places = np.array([graph.chains[number].points[-side] for number, side in kept])
    return replace(
        graph,
        ends=tuple(tuple(end for end in meeting if end[0] not in out) for meeting in graph.ends),
        tips=cKDTree(places) if kept else None,
        tip_ends=tuple(kept),
    )


def _other_inks(graph: ChainGraph, seed: int) -> frozenset[int]:
    own = graph.chains[seed]
    if own.ink.size == 1:
        return frozenset()
    return frozenset(
        number
        for number, chain in enumerate(graph.chains)
        if chain.length > TELLING * max(chain.width, 1.0) and tint_distance(chain.ink, own.ink) > OTHER_TINT
    )


def _other_print(graph: ChainGraph, seed: int) -> frozenset[int]:
    """Dashes where the seed is a long unbroken chain, long unbroken chains where it is a dash."""
    dashes = [number for number, chain in enumerate(graph.chains) if _is_dash(chain)]
    if len(dashes) < FEWEST_DASHES:
        return frozenset()
    usual = float(np.median([graph.chains[number].length for number in dashes]))
    if seed in dashes:
        long = (number for number, chain in enumerate(graph.chains) if chain.length > UNBROKEN * usual)
        return frozenset(long)
    return frozenset(dashes) if graph.chains[seed].length > UNBROKEN * usual else frozenset()


def _is_dash(chain: Chain) -> bool:
    shortest, longest = (share * max(chain.width, 1.0) for share in DASH)
    return chain.junctions == (FREE, FREE) and shortest < chain.length < longest and not chain.lettering
