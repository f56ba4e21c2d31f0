"""How well a ruled pattern explains the lines seen, as a log likelihood ratio against lines at random places.

Every line seen is one of the pattern's, at a normal distance, or a stray one anywhere in the plot; every line that
the pattern predicts is there with a good chance. Scores are in nats, so that what different patterns, scales and
labels say adds up, and the difference of two scores is the logarithm of their odds.
"""

from dataclasses import dataclass

import numpy as np

from curvelab.axes.comb import Ruler
from curvelab.axes.pattern import FINE, HALVES, MAIN
from curvelab.axes.seen import Seen
from curvelab.records.arrays import Floats

STRAY = 0.05
"""Share of the lines seen that are none of the pattern's: frames, boxes, curves that run straight."""

THERE = 0.96
"""Chance that a line of the pattern is seen."""

LOG_SETS: dict[str, Floats] = {
    "decades": np.array([1.0]),
    "1-5": np.array([1.0, 5.0]),
    "1-3": np.array([1.0, 3.0]),
    "1-2-5": np.array([1.0, 2.0, 5.0]),
    "1-2-3-5": np.array([1.0, 2.0, 3.0, 5.0]),
    "1-2-3-5-7": np.array([1.0, 2.0, 3.0, 5.0, 7.0]),
    "1-2-4-6-8": np.array([1.0, 2.0, 4.0, 6.0, 8.0]),
    "1-2-3-4-5-6-8": np.array([1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0]),
    "1-9": MAIN,
    "1-9 and 1.5": np.union1d(MAIN, [1.5]),
    "1-9 and 1.5, 2.5": np.union1d(MAIN, [1.5, 2.5]),
    "1-9 and halves to 5": np.union1d(MAIN, [1.5, 2.5, 3.5, 4.5]),
    "1-9 and halves": np.union1d(MAIN, HALVES),
    "finest": np.union1d(np.union1d(MAIN, HALVES), FINE),
}
"""Mantissas of the lines that log paper carries."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Laid:
    """A pattern on the lines: its ruler and lines (scaled), the score, and shares met, explained."""

    ruler: Ruler
    lines: Floats
    score: float
    met: float
    explained: float
    step: float = 0.0


def laid_log(seen: Seen, ruler: Ruler) -> Laid:
    """The best set of log lines for a ruler whose decades are not told yet."""
    ends = _scaled_ends(seen, ruler)
    decades = np.arange(np.floor(ends[0]), np.ceil(ends[1]) + 1)
    laid = []
    for mantissas in LOG_SETS.values():
        lines = (decades[:, None] + np.log10(mantissas)).ravel()
        laid.append(_laid(seen, ruler, lines[(lines >= ends[0]) & (lines <= ends[1])]))
    return max(laid, key=lambda each: each.score)


def laid_linear(seen: Seen, ruler: Ruler, steps: list[float]) -> Laid:
    """The best of some steps for a linear ruler."""
    ends = _scaled_ends(seen, ruler)
    laid = []
    for step in steps:
        lines = step * np.arange(np.ceil(ends[0] / step - 1e-9), np.floor(ends[1] / step + 1e-9) + 1)
        each = _laid(seen, ruler, lines)
        laid.append(Laid(ruler=ruler, lines=lines, score=each.score, met=each.met, explained=each.explained, step=step))
    return max(laid, key=lambda each: each.score) if laid else _laid(seen, ruler, np.zeros(0))


def line_terms(distance: Floats, sd: Floats | float, spacing: Floats | float) -> Floats:
    """Log likelihood ratio of lines seen at distances from a pattern of a mean spacing."""
    density = np.exp(-0.5 * (distance / sd) ** 2) / (np.sqrt(2 * np.pi) * sd)
    terms: Floats = np.log(STRAY + (1 - STRAY) * spacing * density)
    return terms


def _scaled_ends(seen: Seen, ruler: Ruler) -> tuple[float, float]:
    """Scaled range of the plot, a little wider so that its frame counts."""
    ends = np.sort(ruler.scaled(np.array(seen.span)))
    margin = 3.0 * seen.sd / abs(ruler.per_scaled)
    return float(ends[0] - margin), float(ends[1] + margin)


def _laid(seen: Seen, ruler: Ruler, lines: Floats) -> Laid:
    if not len(lines) or not len(seen.at):
        return Laid(ruler=ruler, lines=lines, score=0.0, met=0.0, explained=0.0)
    places = np.sort(ruler.across(lines))
    to_pattern = nearest_distance(seen.at, places)
    to_seen = nearest_distance(places, seen.at)
    met = to_seen <= 3.0 * seen.sd
    score = float(np.sum(line_terms(to_pattern, seen.sd, seen.length / len(places))))
    score += float(np.sum(np.where(met, np.log(THERE), np.log(1 - THERE))))
    return Laid(
        ruler=ruler,
        lines=lines,
        score=score,
        met=float(np.mean(met)),
        explained=float(np.mean(to_pattern <= 3.0 * seen.sd)),
    )


def nearest_distance(places: Floats, rising: Floats) -> Floats:
    """Distance of each place to the nearest of others."""
    if len(rising) == 1:
        only: Floats = np.abs(places - rising[0])
        return only
    right = np.clip(np.searchsorted(rising, places), 1, len(rising) - 1)
    distance: Floats = np.minimum(np.abs(places - rising[right - 1]), np.abs(places - rising[right]))
    return distance
