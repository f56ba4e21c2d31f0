"""Which chains a guide place may mean."""

import re

import numpy as np

from curvelab.errors import TraceError
from curvelab.records.arrays import Floats
from curvelab.records.trace import Place
from curvelab.trace.chains import ChainGraph

REACH = 8.0
"""px within which a guide place means a line (a hand-set place scatters by 1.5 to 4 px)."""
STUB = 10.0
"""Chains shorter than this in px are preferred only where nothing longer is near."""
TINT_TOLERANCE = 0.45
"""Largest difference between an ink and the guide's colour, relative to the stronger of them."""


def ink_of_colour(colour: str | None, channels: int) -> Floats | None:
    """Ink of each channel of ``#rrggbb`` on white.

    Raises
    ------
    TraceError
        The colour is not of that form.
    """
    if colour is None:
        return None
    if not re.fullmatch(r"#[0-9a-fA-F]{6}", colour):
        raise TraceError(f"Colour '{colour}' is not a colour", "Expected #rrggbb, for example #b02020")
    ink = 1.0 - np.array([int(colour[k : k + 2], 16) for k in (1, 3, 5)]) / 255.0
    return ink if channels == 3 else np.array([float(ink.mean())])


def tint_distance(ink: Floats, wanted: Floats) -> float:
    """Difference between two inks of any coverage: 0 for the same tint, about 1 for opposite ones."""
    strength = max(float(np.linalg.norm(ink)), float(np.linalg.norm(wanted)), 1e-6)
    if ink.size == 1:
        return 0.5 * float(np.abs(ink - wanted).max()) / strength
    tint = ink / max(float(np.linalg.norm(ink)), 1e-6) - wanted / max(float(np.linalg.norm(wanted)), 1e-6)
    return float(np.linalg.norm(tint)) + 0.15 * float(np.linalg.norm(ink - wanted)) / strength


def chains_near(graph: ChainGraph, place: Floats, wanted: Floats | None) -> list[tuple[float, int]]:
    """(distance in px with what speaks against it, chain) of the chains a place may mean, likeliest first."""
    found = []
    table = graph.table
    reaches = np.maximum(REACH, 1.2 * table.width)
    about = np.all((place >= table.low - reaches[:, None]) & (place <= table.high + reaches[:, None]), axis=1)
    for number in np.flatnonzero(about).tolist():
        chain, reach = graph.chains[number], reaches[number]
        distance = float(np.hypot(*(chain.points - place).T).min())
        if distance > reach or (wanted is not None and tint_distance(chain.ink, wanted) > TINT_TOLERANCE):
            continue
        found.append((distance + (6.0 if chain.length < STUB else 4.0 if chain.merged else 0.0), number))
    return sorted(found)


def nearest_line(graph: ChainGraph, place: Floats) -> float | None:
    """Distance in px from a place to the nearest chain worth calling a line; None where there is none."""
    lines = [c.points for c in graph.chains if c.length >= STUB]
    if not lines:
        return None
    return float(min(np.hypot(*(points - place).T).min() for points in lines))


def written(place: Place) -> str:
    """A place as messages give it."""
    return f"({place[0]:.1f}, {place[1]:.1f})"
