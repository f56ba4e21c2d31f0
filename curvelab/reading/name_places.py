"""Which words belong to which line: on it, beside it, at the end of a leader, or beside a legend's sample of it."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from curvelab.reading.phrases import Box, Phrase
from curvelab.reading.said import Said, said_by
from curvelab.records.arrays import Floats
from curvelab.trace.found import FoundLine, ShortLine

BESIDE = 2.6
"""Heights of letters within which words stand beside a line."""
MIDDLE = 0.25
"""Weight of the distance from the middle of words beside that from their box: on its own line it lies in the middle."""
CLEARER = 1.7
"""How many times farther the next line is from words that mean one."""
ROW = 0.7
"""Heights by which a legend's sample may lie off the middle of its words."""
FROM_SAMPLE = 4.0
"""Heights between a sample and its words."""
LEVEL = 0.08
"""Largest slope of a sample."""
LEADER_GAP = 1.2
"""Heights between words and their leader, and between the leader and the line it points at."""
LEADS_BEYOND = 0.8
"""Heights that a leader reaches at least."""
COLOUR, WIDTH = 60.0, 0.5
"""Difference of colour levels, and of widths relative to the wider, between a sample and its line."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Label:
    """Words that say something of one line, and how far from it they stand, in heights of their letters."""

    phrase: Phrase
    said: Said
    line: int
    distance: float


@dataclass(frozen=True, kw_only=True, slots=True)
class LegendRow:
    """A sample of a legend with its words, and the lines that are drawn like it."""

    phrase: Phrase
    said: Said
    lines: tuple[int, ...]


def legend_rows(
    phrases: Sequence[Phrase], lines: Sequence[FoundLine], short_lines: Sequence[ShortLine]
) -> tuple[LegendRow, ...]:
    """Rows of a legend: a level sample with words at its right or left."""
    samples = [(line, phrase) for line in short_lines if (phrase := _words_of_sample(line, phrases)) is not None]
    best: dict[int, tuple[ShortLine, Phrase]] = {}
    for line, phrase in samples:
        key = id(phrase)
        if key not in best or _length(line) > _length(best[key][0]):
            best[key] = (line, phrase)
    chosen = list(best.values())
    return tuple(
        LegendRow(phrase=phrase, said=said_by(phrase.text), lines=drawn)
        for (_, phrase), drawn in zip(chosen, _drawn_like([line for line, _ in chosen], lines), strict=True)
    )


def _length(line: ShortLine) -> float:
    return float(np.hypot(line.end[0] - line.start[0], line.end[1] - line.start[1]))


def _words_of_sample(line: ShortLine, phrases: Sequence[Phrase]) -> Phrase | None:
    (x0, y0), (x1, y1) = line.start, line.end
    if abs(y1 - y0) > LEVEL * max(x1 - x0, 1e-9):
        return None
    found = []
    for phrase in phrases:
        level = abs(phrase.middle[1] - (y0 + y1) / 2)
        # a misread piece of the sample may stand before the words
        apart = min(abs(phrase.box[0] - x1), abs(x0 - phrase.box[2]))
        inside = phrase.box[0] < x0 and x1 < phrase.middle[0]
        if level < ROW * phrase.height and (apart < FROM_SAMPLE * phrase.height or inside):
            found.append((apart, phrase))
    return min(found, key=lambda one: one[0])[1] if found else None


def _drawn_like(samples: Sequence[ShortLine], lines: Sequence[FoundLine]) -> list[tuple[int, ...]]:
    """For each sample the lines that are drawn like it and no more like another."""
    costs = np.array([[_unlike(sample, line) for line in lines] for sample in samples]).reshape(
        len(samples), len(lines)
    )
    result: list[tuple[int, ...]] = []
    for row in range(len(samples)):
        others = np.delete(costs, row, axis=0)
        rival = others.min(axis=0) if len(others) else np.full(len(lines), np.inf)
        result.append(tuple(int(k) for k in np.flatnonzero((costs[row] < 1.0) & (costs[row] < rival - 0.15))))
    return result


def _unlike(sample: ShortLine, line: FoundLine) -> float:
    """How differently both are drawn: 1 or more where they cannot be the same."""
    if sample.dashed != line.dashed:
        return 2.0
    wider = max(sample.width, line.trace.width, 1e-9)
    width = abs(sample.width - line.trace.width) / (WIDTH * wider)
    if line.trace.colour is None:
        return width
    own, other = np.array(sample.colour, dtype=float), np.array(line.trace.colour, dtype=float)
    tint = np.abs((own - own.mean()) - (other - other.mean())).max() / COLOUR
    return float(np.hypot(0.5 * min(width, 1.5), tint))


def labels_on(
    phrases: Sequence[Phrase], lines: Sequence[FoundLine], short_lines: Sequence[ShortLine]
) -> tuple[tuple[Label, ...], tuple[Phrase, ...]]:
    """Words that stand on or beside one line, and those that might mean more than one."""
    labels, doubtful = [], []
    courses = [line.trace.places for line in lines]
    for phrase in phrases:
        said = said_by(phrase.text)
        if said.says_nothing:
            continue
        ranked = sorted(_distances(phrase, courses, short_lines))
        if not ranked or ranked[0][0] > BESIDE:
            continue
        nearest, number = ranked[0]
        if len(ranked) > 1 and ranked[1][0] < max(CLEARER * nearest, nearest + 0.25):
            doubtful.append(phrase)
            continue
        labels.append(Label(phrase=phrase, said=said, line=number, distance=nearest))
    return tuple(labels), tuple(doubtful)


def distances(phrase: Phrase, lines: Sequence[FoundLine], short_lines: Sequence[ShortLine]) -> Floats:
    """Distance of words from each line in heights of their letters, along a leader where there is one."""
    courses = [line.trace.places for line in lines]
    found = {number: distance for distance, number in _distances(phrase, courses, short_lines)}
    return np.array([found[number] for number in range(len(lines))])


def _distances(
    phrase: Phrase, courses: Sequence[Floats], short_lines: Sequence[ShortLine]
) -> Iterator[tuple[float, int]]:
    middle = np.array(phrase.middle)
    beside = [
        (_from_box(phrase.box, course) + MIDDLE * _from_place(middle, course)) / phrase.height for course in courses
    ]
    tips = [tip for line in short_lines if (tip := _leads_to(phrase, line)) is not None]
    for number, course in enumerate(courses):
        led = [_from_place(tip, course) / phrase.height for tip in tips]
        pointed = min(led, default=np.inf)
        yield (0.2 * pointed if pointed < LEADER_GAP else beside[number] + 2.0 * bool(tips)), number


def _from_box(box: Box, places: Floats) -> float:
    low, high = np.array(box[:2]), np.array(box[2:])
    outside = np.maximum(np.maximum(low - places, places - high), 0.0)
    return float(np.hypot(*outside.T).min())


def _from_place(place: Floats, places: Floats) -> float:
    return float(np.hypot(*(places - place).T).min())


def _leads_to(phrase: Phrase, line: ShortLine) -> Floats | None:
    """The far end of a line that starts at words; None where it does not."""
    ends = np.array([line.start, line.end])
    away = [_from_box(phrase.box, end[None]) / phrase.height for end in ends]
    near, far = int(np.argmin(away)), int(np.argmax(away))
    return ends[far] if away[near] < LEADER_GAP and away[far] > away[near] + LEADS_BEYOND else None
