"""Phrases: the words of a sheet joined to lines of text, as one reads them."""

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from curvelab.records.sheet import Word

Box = tuple[float, float, float, float]

_NAME = r"(?:(?i:tms|td|tr|tsd) ?=? ?|(?:g[A-Z]|aM|aR) )"
_VALUE = re.compile(rf"({_NAME}?\d+(?:[.,]\d+)?(?: ?[As](?=$|[ \d]|{_NAME}))?) ?")
ONE_WORD, ONE_LINE = 0.2, 0.75
"""Gap between words, relative to their size, up to which they are pieces of one word, or words of one line."""
SAME_BASE = 0.35
"""Distance of their middles, relative to their height, of words in one line."""
SAME_HEIGHT = 1.45
LEAST_CONFIDENCE, LEAST_OF_LONG = 0.3, 0.05
"""A word read with less says nothing; of one with a long run of letters enough is right to know it."""
_LONG = re.compile(r"[^\W\d_]{5,}")
DASHES = "-–—_.·' \"|"


@dataclass(frozen=True, kw_only=True, slots=True)
class Phrase:
    """A line of text with its box in places, height of letters, reading direction, and the chance that it reads so."""

    text: str
    box: Box
    height: float
    turned_deg: float = 0.0
    confidence: float = 1.0

    @property
    def middle(self) -> tuple[float, float]:
        """The middle of its box."""
        return (self.box[0] + self.box[2]) / 2, (self.box[1] + self.box[3]) / 2


def phrases_of(words: Iterable[Word]) -> tuple[Phrase, ...]:
    """Lines of text, top to bottom; words that say nothing (dashes of a line, doubtful readings) left out."""
    pieces = [list(_labels_apart(word)) for word in words if _is_readable(word)]
    left = [own[0] for own in pieces if len(own) == 1]
    labels = [[word] for own in pieces if len(own) > 1 for word in own]
    level = sorted((word for word in left if word.turned_deg % 360 == 0), key=lambda word: (word.box[0], word.box[1]))
    lines: list[list[Word]] = []
    for word in level:
        line = next((line for line in lines if _goes_on(line[-1], word)), None)
        if line is None:
            lines.append([word])
        else:
            line.append(word)
    turned = [[word] for word in left if word.turned_deg % 360 != 0]
    return tuple(sorted(map(_phrase, [*lines, *labels, *turned]), key=lambda one: (one.box[1], one.box[0])))


def _is_readable(word: Word) -> bool:
    least = LEAST_OF_LONG if _LONG.search(word.text) else LEAST_CONFIDENCE
    return word.confidence >= least and any(letter.isalnum() for letter in word.text)


def _labels_apart(word: Word) -> Iterator[Word]:
    """Values that stand side by side in one run, ``16 A 25 A``, belong to lines of their own."""
    pieces = list(_VALUE.finditer(word.text))
    plain = all(piece[1].isdigit() for piece in pieces)
    if len(pieces) < 2 or plain or word.turned_deg or "".join(one[0] for one in pieces).strip() != word.text.strip():
        yield word
        return
    x0, y0, x1, y1 = word.box
    for piece in pieces:
        start, end = (x0 + (x1 - x0) * at / len(word.text) for at in (piece.start(1), piece.end(1)))
        yield replace(word, text=piece[1], box=(start, y0, end, y1), alternatives=())


def _goes_on(before: Word, word: Word) -> bool:
    if _is_value(before) and _is_value(word):
        return False
    height = max(_height(before), _height(word))
    size = max(before.height, word.height)
    apart = word.box[0] - before.box[2]
    level = abs((word.box[1] + word.box[3]) - (before.box[1] + before.box[3])) / 2
    alike = max(before.height, word.height) <= SAME_HEIGHT * min(before.height, word.height)
    return -0.5 * size < apart < ONE_LINE * size and level < SAME_BASE * height and alike


def _is_value(word: Word) -> bool:
    """Whether it is a label of its own: a number with its unit or its name."""
    return _VALUE.fullmatch(word.text) is not None and not word.text.isdigit()


def _height(word: Word) -> float:
    return max(word.box[3] - word.box[1], 0.7 * word.height)


def _phrase(line: list[Word]) -> Phrase:
    text = line[0].text
    for before, word in pairwise(line):
        near = word.box[0] - before.box[2] < ONE_WORD * max(before.height, word.height)
        text += word.text if near else f" {word.text}"
    boxes = np.array([word.box for word in line])
    low, high = boxes[:, :2].min(axis=0), boxes[:, 2:].max(axis=0)
    box = (float(low[0]), float(low[1]), float(high[0]), float(high[1]))
    height = float(np.median([word.height for word in line]))
    return Phrase(
        text=text.strip(DASHES),
        box=box,
        height=height,
        turned_deg=line[0].turned_deg,
        confidence=min(word.confidence for word in line),
    )
