"""From the chances of single characters to what a whole line says, with its alternatives."""

from dataclasses import dataclass
from itertools import pairwise
from statistics import median

import numpy as np

from curvelab.lettering.network import CLASSES, LOOK_ALIKES, Matrix
from curvelab.lettering.segments import Cutting, Segment
from curvelab.lettering.strip import CAPITAL_PX, Strip
from curvelab.lettering.vocabulary import fitness

BEAM = 8
CHOICES = 4
LEAST_CHANCE = -6.0
"""At most so many characters of a segment are followed, none with a smaller log chance relative to the best."""

LEAST_NONE = 0.6
"""Chance of being no character from which ink is offered to be left out."""

NONE_LOSS = -3.5
"""Log of how much rarer other ink is within a line than its shape alone says."""

SURELY_NONE = float(np.log(0.9))
"""Where every segment is more surely no character than this, the line is no lettering."""

SPACE = 0.22 * CAPITAL_PX
"""A gap wider than this above the line's usual gap is a printed space."""

NUMBER_SPACE = 0.5 * CAPITAL_PX
"""The same within a number: faces of one width set digits apart, points and commas more so."""

_NUMERIC = "0123456789.,"

RAISED = str.maketrans("0123456789-+", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺")
RAISED_BY = 0.24
RAISED_DASH = 0.62
"""Heights above the baseline, as shares of capitals, from which a digit's foot and a dash's middle are raised."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Character:
    """One character of a reading and its segment; ``text`` is empty where the ink is taken for something else.

    By its shape alone: ``log_chance`` that it is this one, ``log_alike`` this one or one that looks like it, ``none``
    the chance that it is no character at all. ``high`` where a digit stands so high that it is raised, ``dash_high``
    where a dash does.
    """

    text: str
    segment: Segment
    log_chance: float
    log_alike: float
    none: float
    high: bool
    dash_high: bool


@dataclass(frozen=True, kw_only=True, slots=True)
class Reading:
    """What a line may say: its text, characters, and score as a natural logarithm."""

    text: str
    characters: tuple[Character, ...]
    score: float


@dataclass(frozen=True, slots=True)
class _Path:
    score: float
    characters: tuple[Character, ...]


def decode(cutting: Cutting, log_chances: Matrix) -> list[Reading]:
    """Readings of a line, best first; scores are relative.

    A segment of several atoms counts as often as it has atoms, so that ways with fewer cuts are not preferred.
    Viterbi's search with the best few ways kept at each cut.
    """
    if not len(log_chances) or log_chances[:, -1].min() > SURELY_NONE:
        return []
    paths: list[list[_Path]] = [[] for _ in range(cutting.atoms + 1)]
    paths[0] = [_Path(0.0, ())]
    for segment, chances in zip(cutting.segments, log_chances, strict=True):
        choices = _choices(segment, chances, cutting.strip)
        weight = segment.last - segment.first
        paths[segment.last] += [
            _Path(path.score + weight * choice.log_chance, (*path.characters, choice))
            for path in _best(paths[segment.first])
            for choice in choices
        ]
    found: dict[str, Reading] = {}
    for path in sorted(paths[-1], key=lambda one: -one.score)[: 6 * BEAM]:
        text = written(path.characters)
        score = path.score + fitness(text)
        if text and (text not in found or found[text].score < score):
            found[text] = Reading(text=text, characters=path.characters, score=score)
    return sorted(found.values(), key=lambda reading: -reading.score)


def _best(paths: list[_Path]) -> list[_Path]:
    paths.sort(key=lambda path: -path.score)
    del paths[BEAM:]
    return paths


def _choices(segment: Segment, chances: Matrix, strip: Strip) -> list[Character]:
    x0, y0, x1, y1 = segment.box
    base = strip.baseline + strip.slope * (x0 + x1) / 2
    high = base - y1 >= RAISED_BY * CAPITAL_PX
    dash_high = base - (y0 + y1) / 2 >= RAISED_DASH * CAPITAL_PX
    order = np.argsort(-chances[:-1])[:CHOICES]
    best, none = float(chances[order[0]]), float(np.exp(chances[-1]))
    told = [(CLASSES[number], float(chances[number])) for number in order if chances[number] - best >= LEAST_CHANCE]
    if none >= LEAST_NONE and segment.last - segment.first == 1:
        told.append(("", float(chances[-1]) + NONE_LOSS))
    every = np.exp(chances)
    return [
        Character(
            text=text,
            segment=segment,
            log_chance=chance,
            log_alike=float(np.log(every[LOOK_ALIKES[text]].sum())) if text else chance,
            none=none,
            high=high,
            dash_high=dash_high,
        )
        for text, chance in told
    ]


def written(characters: tuple[Character, ...]) -> str:
    """The text of characters, with spaces and raised exponents."""
    characters = tuple(one for one in characters if one.text)
    raised = _raised(characters)
    texts = [one.text.translate(RAISED) if up else one.text for one, up in zip(characters, raised, strict=True)]
    gaps = [right.segment.box[0] - left.segment.box[2] for left, right in pairwise(characters)]
    usual = min(max(median(gaps), 0.0), 0.2 * CAPITAL_PX) if len(gaps) > 2 else 0.1 * CAPITAL_PX
    text = texts[0] if texts else ""
    for gap, before, piece in zip(gaps, texts, texts[1:], strict=False):
        apart = NUMBER_SPACE if before in _NUMERIC and piece in _NUMERIC else SPACE
        text += (" " if gap > usual + apart else "") + piece
    return text


def _raised(characters: tuple[Character, ...]) -> list[bool]:
    """Which characters are raised digits, and dashes before such."""
    raised = [False] * len(characters)
    for number in range(len(characters) - 1, 0, -1):
        one = characters[number]
        if one.text.isdigit():
            raised[number] = one.high
        elif one.text in "-+" and number + 1 < len(characters):
            raised[number] = raised[number + 1] and one.dash_high
    return raised
