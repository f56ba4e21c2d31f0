"""Whose each line is: characteristic, rating, settings and state, by its words and by the lines drawn like it."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from curvelab.reading.name_order import Order, monotone_match
from curvelab.reading.name_places import LegendRow, distances, labels_on
from curvelab.reading.phrases import Phrase
from curvelab.reading.said import Said, said_by
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.trace.found import FoundLine, FoundLines

FEWEST_NUMBERS = 3
"""Labels from which the order of their numbers tells their lines."""
DEAREST = 3.5
"""Heights that a label stands away from its line at most."""
EDGES = 2
"""Lines of one band: more lines that are drawn alike are several bands."""
PLACED = 3.0
"""Heights that it is worth to give a further label its line."""
CLEARER = 0.25
"""Heights that a label stands nearer to its own line than to others, where not every line has a label."""
RATED = (0.9, 3.2)
"""Current at the longest time a line shows, in rated currents."""
SURE = 0.75
"""Confidence from which words read from pixels are taken without a warning."""
PREFERRED = frozenset(
    round(mantissa * decade, 3)
    for decade in (0.1, 1.0, 10.0, 100.0, 1000.0)
    for mantissa in (1, 1.25, 1.3, 1.5, 1.6, 2, 2.24, 2.5, 3, 3.15, 3.2, 3.5, 3.55, 4, 4.5, 5, 6, 6.3, 7, 7.5, 8, 9)
)
"""Rated currents in A: preferred numbers (IEC 60059) and values in common use; others may be misread."""
COLOUR, WIDTH = 40.0, 0.3
"""Largest difference of colour levels, and of widths relative to the wider, of lines drawn alike."""


@dataclass(frozen=True, kw_only=True, slots=True)
class LineSaid:
    """What is said of one line, the words that say it, and those of them that may be misread."""

    said: Said
    label: str = ""
    doubtful: tuple[Phrase, ...] = ()


def said_of_lines(
    found: FoundLines, phrases: Sequence[Phrase], rows: Sequence[LegendRow], axes: Axes, order: Order
) -> list[LineSaid]:
    """What labels and legend say of each line."""
    by_number = _by_numbers(found, phrases, axes, order)
    labels, _ = labels_on([one for one in phrases if id(one) not in by_number], found.lines, found.short_lines)
    result = [LineSaid(said=Said()) for _ in found.lines]
    for row in rows:
        for line in row.lines:
            result[line] = _more(result[line], row.said, row.phrase)
    for line in range(len(result)):
        own = [label for label in labels if label.line == line and label.said.number is None]
        agreed = _agree([label.said for label in own])
        for label in sorted(own, key=lambda one: -one.distance):
            phrase = label.phrase if agreed else replace(label.phrase, confidence=0.0)
            result[line] = _more(result[line], label.said if agreed else Said(), phrase)
    for line, said, phrase in by_number.values():
        result[line] = _more(result[line], said, phrase)
    return result


def _agree(said: Sequence[Said]) -> bool:
    """Whether words that stand at one line can all be about it."""
    for name in ("characteristic", "rating", "edge", "settings"):
        values = [getattr(one, name) for one in said if getattr(one, name)]
        if any(value != values[0] for value in values):
            return False
    return True


def _more(before: LineSaid, said: Said, phrase: Phrase) -> LineSaid:
    label = phrase.text if not before.label else f"{phrase.text}; {before.label}"
    doubtful = (*before.doubtful, phrase) if _is_doubtful(said, phrase) else before.doubtful
    return LineSaid(said=said.over(before.said), label=label, doubtful=doubtful)


def _is_doubtful(said: Said, phrase: Phrase) -> bool:
    """Whether what decides a line's name may have been misread from pixels."""
    if phrase.confidence == 0.0:
        return True
    decisive = identity_of(said) is not None or said.edge is not None
    unusual = said.rating is not None and said.rating not in PREFERRED
    return decisive and (phrase.confidence < SURE or (unusual and phrase.confidence < 1.0))


@dataclass(frozen=True, kw_only=True, slots=True)
class _Numbered:
    """A label that differs from others by its number: a rated current, a setting, or a bare number."""

    what: str
    amount: float
    said: Said
    phrase: Phrase


def _by_numbers(
    found: FoundLines, phrases: Sequence[Phrase], axes: Axes, order: Order
) -> Mapping[int, tuple[int, Said, Phrase]]:
    """Labels that differ by a number, each with its line, by the numbers' order: they rise with the current.

    Ratings, time multipliers, time dials and delays all move a line to larger currents.
    """
    labels = [label for phrase in phrases if (label := _numbered(phrase)) is not None]
    lines = order.sorted(range(len(found.lines)))
    starts = np.array([float(axes.values(found.lines[line].trace.places)[0].min()) for line in lines])
    result: dict[int, tuple[int, Said, Phrase]] = {}
    for what in sorted({label.what for label in labels}):
        members = [label for label in labels if label.what == what]
        amounts = sorted({label.amount for label in members})
        gains = np.full((len(amounts), len(lines)), -np.inf)
        whose: dict[tuple[int, int], _Numbered] = {}
        for label in members:
            row = amounts.index(label.amount)
            away = distances(label.phrase, found.lines, found.short_lines)[lines]
            gain = np.where((away < DEAREST) & _possible(label, starts, axes), DEAREST + PLACED - away, -np.inf)
            for column in np.flatnonzero(gain > gains[row]).tolist():
                gains[row, column] = gain[column]
                whose[row, column] = label
        match = monotone_match(gains)
        if len(match) >= (FEWEST_NUMBERS if what == "number" else 2):
            for row, column in match.items():
                label = whose[row, column]
                said = Said(ratings=(label.amount,)) if what == "number" else label.said
                if len(match) == len(lines) or _is_clear(gains[row], column):
                    result[id(label.phrase)] = (lines[column], said, label.phrase)
    return result


def _is_clear(gains: Floats, column: int) -> bool:
    """Whether a label stands plainly nearer to its line than to any other."""
    return bool(np.delete(gains, column).max(initial=-np.inf) < gains[column] - CLEARER)


def _numbered(phrase: Phrase) -> _Numbered | None:
    said = said_by(phrase.text)
    if said.rating is not None:
        return _Numbered(what="rating", amount=said.rating, said=said, phrase=phrase)
    if len(said.settings) == 1:
        ((name, value),) = said.settings.items()
        return _Numbered(what=name, amount=value, said=said, phrase=phrase)
    if said.number is not None:
        return _Numbered(what="number", amount=said.number, said=said, phrase=phrase)
    return None


def _possible(label: _Numbered, starts: Floats, axes: Axes) -> NDArray[np.bool_]:
    """Whether lines that start at these currents can be of a rated current; bare numbers are nothing else."""
    if label.what not in ("rating", "number"):
        return np.ones(starts.size, dtype=bool)
    if axes.current.base != "A":
        return np.full(starts.size, label.what == "rating")
    ratio = starts / max(label.amount, 1e-9)
    possible: NDArray[np.bool_] = (ratio >= RATED[0]) & (ratio <= RATED[1])
    return possible


def drawn_alike(one: FoundLine, other: FoundLine) -> bool:
    """Whether two lines have the same colour, width and dashes."""
    if one.dashed != other.dashed or (one.trace.colour is None) != (other.trace.colour is None):
        return False
    if one.trace.colour and other.trace.colour:
        own, others = np.array(one.trace.colour, dtype=float), np.array(other.trace.colour, dtype=float)
        if np.abs(own - others).max() > COLOUR:
            return False
    return abs(one.trace.width - other.trace.width) <= WIDTH * max(one.trace.width, other.trace.width)


Identity = tuple[str | None, float | None, tuple[float, float] | None, tuple[tuple[str, float], ...], str | None]
"""Characteristic, rated current in A, or from which to which, settings, state it starts from."""


def identity_of(said: Said) -> Identity | None:
    """Whose a line is by what is said of it; None where nothing tells."""
    found = (said.characteristic, said.rating, said.rating_range, tuple(sorted(said.settings.items())), said.start)
    return found if any(found) else None


def identities(
    lines: Sequence[FoundLine], said: Sequence[LineSaid], order: Order, characteristics: Sequence[str]
) -> list[Identity | None]:
    """The identity of every line; one without words of its own is of those it is drawn like, or paired with.

    Of the characteristics a sheet names, lines drawn alike have the one that is left over.
    """
    own = [identity_of(one.said) for one in said]
    result = list(own)
    for number, line in enumerate(lines):
        alike = [k for k, other in enumerate(lines) if drawn_alike(line, other)]
        known = {own[k] for k in alike if own[k] is not None}
        if own[number] is None and len(known) == 1 and len(alike) <= EDGES:
            result[number] = next(iter(known))
    if None in result and any(own):
        _pair(result, own, order)
    _left_over(result, lines, characteristics)
    return result


def _left_over(result: list[Identity | None], lines: Sequence[FoundLine], characteristics: Sequence[str]) -> None:
    used = {whose[0] for whose in result if whose is not None}
    free = [one for one in characteristics if one not in used]
    unnamed = [number for number, whose in enumerate(result) if whose is None]
    if len(free) != 1 or used != set(characteristics) - set(free) or not used or not unnamed:
        return
    if all(drawn_alike(lines[unnamed[0]], lines[number]) for number in unnamed):
        for number in unnamed:
            result[number] = (free[0], None, None, (), None)


def _pair(result: list[Identity | None], own: Sequence[Identity | None], order: Order) -> None:
    """Bands of two lines of which one carries the words: every second line, or all those on one side."""
    lines = order.sorted(range(len(own)))
    marked = [own[line] is not None for line in lines]
    half = len(lines) // 2
    if len(lines) % 2 or sum(marked) != half or len({own[line] for line in lines}) != half + 1:
        return
    if all(marked[k] != marked[k + 1] for k in range(0, len(lines), 2)) and len(set(marked[::2])) == 1:
        pairs = [(lines[k], lines[k + 1]) for k in range(0, len(lines), 2)]
    elif len(set(marked[:half])) == 1:
        pairs = list(zip(lines[:half], lines[half:], strict=True))
    else:
        return
    for one, other in pairs:
        whose = own[one] or own[other]
        result[one] = result[other] = whose
