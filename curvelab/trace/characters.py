"""Which connected strokes look like characters: small, and not one straight piece as a dash is."""

import numpy as np
from scipy.sparse import coo_array
from scipy.sparse.csgraph import connected_components

from curvelab.records.arrays import Floats

FREE = -1
"""No junction at a chain's end."""
LONGEST, TALLEST = 150.0, 45.0
"""px: extent of touching characters along and across their line of text."""
LONGEST_STROKE = 50.0
"""px along one stroke of a character."""
STRAIGHT = 2.0
"""px rms across the main direction up to which connected strokes are one straight piece."""


def lettering(chains: list[tuple[Floats, tuple[int, int]]], junction_count: int) -> list[bool]:
    """Whether each chain, given as its points and the junctions at its ends, looks like part of a character."""
    parts = _connected([junctions for _, junctions in chains], junction_count)
    members: dict[int, list[Floats]] = {}
    for part, (points, _) in zip(parts, chains, strict=True):
        members.setdefault(part, []).append(points)
    found = {part: _is_character(pieces) for part, pieces in members.items()}
    return [found[part] for part in parts]


def _connected(junctions: list[tuple[int, int]], junction_count: int) -> list[int]:
    links = [(k, len(junctions) + j) for k, ends in enumerate(junctions) for j in ends if j != FREE]
    nodes = len(junctions) + junction_count
    a, b = np.array(links, dtype=np.intp).reshape(-1, 2).T
    labels = connected_components(coo_array((np.ones(len(a)), (a, b)), shape=(nodes, nodes)), directed=False)[1]
    parts: list[int] = labels[: len(junctions)].tolist()
    return parts


def _is_character(pieces: list[Floats]) -> bool:
    if max(map(len, pieces)) > LONGEST_STROKE:
        return False
    points = np.concatenate(pieces)
    short, long = np.sort(np.ptp(points, axis=0))
    if long > LONGEST or short > TALLEST or len(points) < 4:
        return False
    return bool(np.sqrt(max(np.linalg.eigvalsh(np.cov(points.T))[0], 0.0)) > STRAIGHT)
