"""Readings of a line become words with a confidence: numbers that stand side by side are words of their own."""

import math
from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.decode import Character, Reading, written
from curvelab.lettering.numbers import number_of
from curvelab.lettering.strip import CAPITAL_PX, Strip
from curvelab.records.sheet import Word

LEAST_CONFIDENCE = 0.02
"""What is read with less confidence is not lettering."""

ALTERNATIVES = 5
LEAST_CHANCE = 1e-3

NUMBERS_APART = 0.55 * CAPITAL_PX
"""Numbers with a wider gap are two; the thin space within 1 000 is narrower."""

WORDS_APART = 0.22 * CAPITAL_PX
"""The same between a number with its unit and the next number: ``50 A`` and ``100 A``."""

DIGITS_APART = 0.3 * CAPITAL_PX
"""The same beyond the usual gap of the line's digits: ``100`` and ``200`` may stand close."""

GROUPS_APART = 1.2 * CAPITAL_PX
"""The widest space within 10 000, in faces whose characters are all of one width."""

TOUCHING = 0.6 * CAPITAL_PX
"""Ink nearer than this might be a further character of the word."""

ENOUGH_PX = 13.0
"""Capitals of this height are read as surely as larger ones."""

CAPITAL_PER_SIZE = 0.72
"""Height of capitals as a share of the font size, typical of Latin faces."""

_NUMERIC = "0123456789.,-+⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺"


@dataclass(frozen=True, kw_only=True, slots=True)
class Part:
    """A word of a line: its best characters and text, all texts with their chances, and how surely it is whole."""

    characters: tuple[Character, ...]
    text: str
    texts: dict[str, float]
    whole: float


def words_of_readings(strip: Strip, readings: list[Reading], coefficients: NDArray[np.float64]) -> list[Word]:
    """The words of a line: boxes in pixels of the page, edges whole."""
    words = []
    for part in parts_of(readings):
        confidence = part.whole * _sigmoid(float(coefficients @ evidence(part, strip)))
        if confidence >= LEAST_CONFIDENCE:
            words.append(_word(strip, part, confidence))
    return words


def parts_of(readings: list[Reading]) -> Iterator[Part]:
    """Words of the best reading, each with what other readings say in its place."""
    chances = _chances(readings)
    for low, high in _spans(readings[0].characters):
        best = _within(readings[0].characters, low, high)
        if not best:
            continue
        texts: dict[str, float] = {}
        for reading, chance in zip(readings, chances, strict=True):
            text = written(_within(reading.characters, low, high))
            texts[text] = texts.get(text, 0.0) + chance
        yield Part(characters=best, text=written(best), texts=texts, whole=_whole(best, readings[0].characters))


def evidence(part: Part, strip: Strip) -> NDArray[np.float64]:
    """What a word's confidence is estimated from: a constant, odds among readings, shapes, and size."""
    clear = math.prod(1.0 - one.none for one in part.characters)
    raw = min(max(part.texts[part.text] * clear, 1e-6), 1.0 - 1e-4)
    logs = [max(one.log_alike, -8.0) for one in part.characters]
    size = math.log(min(CAPITAL_PX / strip.scale, ENOUGH_PX) / ENOUGH_PX)
    return np.array([1.0, math.log(raw / (1.0 - raw)), sum(logs), min(logs), size])


def _whole(word: tuple[Character, ...], line: tuple[Character, ...]) -> float:
    """The chance that ink left out close to a word is indeed none of its characters."""
    x0, x1 = word[0].segment.box[0] - TOUCHING, word[-1].segment.box[2] + TOUCHING
    near = [one.none for one in line if not one.text and one.segment.box[2] > x0 and one.segment.box[0] < x1]
    return math.prod(near)


def _sigmoid(value: float) -> float:
    return 1.0 / (1.0 + math.exp(-min(max(value, -30.0), 30.0)))


def _chances(readings: list[Reading]) -> list[float]:
    scores = np.array([reading.score for reading in readings])
    weights = np.exp(scores - scores.max())
    chances: list[float] = (weights / weights.sum()).tolist()
    return chances


def _spans(characters: tuple[Character, ...]) -> list[tuple[float, float]]:
    """Ranges of strip columns that hold one word each."""
    edges = [-math.inf]
    usual = _usual_gap(characters)
    for number, (left, right) in enumerate(pairwise(characters), start=1):
        if not right.text or not left.text:
            edges.append((left.segment.box[2] + right.segment.box[0]) / 2)
            continue
        gap = right.segment.box[0] - left.segment.box[2]
        numeric = left.text in _NUMERIC and right.text in _NUMERIC
        digits = left.text.isdigit() and right.text.isdigit()
        apart = min(NUMBERS_APART, usual + DIGITS_APART) if digits else NUMBERS_APART
        if gap > WORDS_APART and right.text in _NUMERIC and left.text not in _NUMERIC:
            if number_of(written(_within(characters[:number], edges[-1], math.inf))):
                edges.append((left.segment.box[2] + right.segment.box[0]) / 2)
            continue
        if numeric and gap > apart and not (gap <= GROUPS_APART and _is_group(characters[number:])):
            edges.append((left.segment.box[2] + right.segment.box[0]) / 2)
    edges.append(math.inf)
    return list(pairwise(edges))


def _usual_gap(characters: tuple[Character, ...]) -> float:
    """The gap within numbers of a line: what most neighbouring digits stand apart at most."""
    gaps = [
        right.segment.box[0] - left.segment.box[2]
        for left, right in pairwise(characters)
        if left.text.isdigit() and right.text.isdigit()
    ]
    return max(float(np.median(gaps)), 0.0) if len(gaps) > 2 else NUMBERS_APART


def _is_group(characters: tuple[Character, ...]) -> bool:
    """Whether what follows starts with three digits that cannot be a number of their own: ``000``, ``050``."""
    start = "".join(one.text for one in characters[:3])
    return len(start) == 3 and start.isdigit() and start.startswith("0")


def _within(characters: tuple[Character, ...], low: float, high: float) -> tuple[Character, ...]:
    inside = (one for one in characters if low < (one.segment.box[0] + one.segment.box[2]) / 2 <= high)
    return tuple(one for one in inside if one.text)


def _word(strip: Strip, part: Part, confidence: float) -> Word:
    rest = 1.0 - part.texts[part.text]
    share = min((1.0 - confidence) / rest, 1.0) if rest > 0 else 0.0
    others = [(text, chance * share) for text, chance in part.texts.items() if text not in ("", part.text)]
    others.sort(key=lambda one: (-one[1], one[0]))
    return Word(
        text=part.text,
        box=strip.page_box(box_of(part.characters)),
        height=CAPITAL_PX / strip.scale / CAPITAL_PER_SIZE,
        turned_deg=float(strip.turned_deg),
        confidence=confidence,
        alternatives=tuple(one for one in others[:ALTERNATIVES] if one[1] >= LEAST_CHANCE),
    )


def box_of(characters: tuple[Character, ...]) -> tuple[float, float, float, float]:
    """The box around characters, in the strip."""
    boxes = np.array([one.segment.box for one in characters], dtype=float)
    (x0, y0), (x1, y1) = boxes[:, :2].min(axis=0), boxes[:, 2:].max(axis=0)
    return float(x0), float(y0), float(x1), float(y1)
