"""Whose each line is: characteristic, rating, settings and state, by its words and by the lines drawn like it."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from curvelab.reading.name_order import Order, monotone_match
from curvelab.reading.name_places import LegendRow, distances, labels_on
from curvelab.reading.phrases import Phrase
from curvelab.reading.said import Said, said_by
from curvelab.records.axes import Axes
from curvelab.trace.found import FoundLine, FoundLines

FEWEST_NUMBERS = 3
"""Labels from which the order of their numbers tells their lines."""
DEAREST = 3.5
"""Heights that a label stands away from its line at most."""
RATED = (0.9, 3.2)
"""Current at the longest time a line shows, in rated currents, where it starts within the plot."""
COLOUR, WIDTH = 40.0, 0.3
"""Largest difference of colour levels, and of widths relative to the wider, of lines drawn alike."""


@dataclass(frozen=True, kw_only=True, slots=True)
class LineSaid:
    """What is said of one line, and the words that say it."""

    said: Said
    label: str = ""


def said_of_lines(
    found: FoundLines, phrases: Sequence[Phrase], rows: Sequence[LegendRow], axes: Axes, order: Order
) -> list[LineSaid]:
    """What labels and legend say of each line."""
    by_number = _by_numbers(found, phrases, axes, order)
    labels, _ = labels_on([one for one in phrases if id(one) not in by_number], found.lines, found.short_lines)
    result = [LineSaid(said=Said()) for _ in found.lines]
    for row in rows:
        for line in row.lines:
            result[line] = _more(result[line], row.said, row.phrase.text)
    for label in sorted(labels, key=lambda one: -one.distance):
        if label.said.number is None:
            result[label.line] = _more(result[label.line], label.said, label.phrase.text)
    for line, said, text in by_number.values():
        result[line] = _more(result[line], said, text)
    return result


def _more(before: LineSaid, said: Said, text: str) -> LineSaid:
    return LineSaid(said=said.over(before.said), label=text if not before.label else f"{text}; {before.label}")


def _by_numbers(
    found: FoundLines, phrases: Sequence[Phrase], axes: Axes, order: Order
) -> Mapping[int, tuple[int, Said, str]]:
    """Labels that differ by a number, each with its line, by the number's order: it rises with the current.

    Ratings, time multipliers, time dials and delays all move a line to larger currents.
    """
    numbered = [(value, phrase, said) for phrase in phrases if (value := _value(phrase)) for said in [value[1]]]
    result: dict[int, tuple[int, Said, str]] = {}
    for what in {value[0] for value, _, _ in numbered}:
        members = sorted(
            ((said, phrase) for value, phrase, said in numbered if value[0] == what), key=lambda one: _amount(one[0])
        )
        members = [one for one in members if distances(one[1], found.lines, found.short_lines).min() <= DEAREST]
        if len(members) < FEWEST_NUMBERS or len({_amount(said) for said, _ in members}) < len(members):
            continue
        lines = order.sorted(range(len(found.lines)))
        costs = np.array([distances(phrase, found.lines, found.short_lines)[lines] for _, phrase in members])
        match = monotone_match(costs, DEAREST)
        if match is None:
            continue
        placed = [(lines[column], said, phrase) for column, (said, phrase) in zip(match, members, strict=True)]
        meant = _meant(placed, found.lines, axes) if what == "number" else [said for _, said, _ in placed]
        for (line, _, phrase), said in zip(placed, meant, strict=True):
            result[id(phrase)] = (line, said, phrase.text)
    return result


def _value(phrase: Phrase) -> tuple[str, Said] | None:
    said = said_by(phrase.text)
    if said.rating is not None:
        return "rating", said
    if len(said.settings) == 1:
        return next(iter(said.settings)), said
    return ("number", said) if said.number is not None else None


def _amount(said: Said) -> float:
    if said.rating is not None:
        return said.rating
    return said.number if said.number is not None else next(iter(said.settings.values()))


def _meant(placed: Sequence[tuple[int, Said, Phrase]], lines: Sequence[FoundLine], axes: Axes) -> list[Said]:
    """What bare numbers on lines mean: rated currents where every line starts at a usual multiple of its number."""
    numbers = [said.number or 0.0 for _, said, _ in placed]
    if axes.current.base == "A":
        starts = [float(axes.values(lines[line].trace.places)[0].min()) for line, _, _ in placed]
        ratios = [start / number for start, number in zip(starts, numbers, strict=True)]
        if all(RATED[0] <= ratio <= RATED[1] for ratio in ratios):
            return [Said(ratings=(number,)) for number in numbers]
    return [Said() for _ in numbers]


def drawn_alike(one: FoundLine, other: FoundLine) -> bool:
    """Whether two lines have the same colour, width and dashes."""
    if one.dashed != other.dashed or (one.trace.colour is None) != (other.trace.colour is None):
        return False
    if one.trace.colour and other.trace.colour:
        own, others = np.array(one.trace.colour, dtype=float), np.array(other.trace.colour, dtype=float)
        if np.abs(own - others).max() > COLOUR:
            return False
    return abs(one.trace.width - other.trace.width) <= WIDTH * max(one.trace.width, other.trace.width)


Identity = tuple[str | None, float | None, tuple[tuple[str, float], ...], str | None]
"""Characteristic, rated current in A, settings, state it starts from."""


def identity_of(said: Said) -> Identity | None:
    """Whose a line is by what is said of it; None where nothing tells."""
    found = (said.characteristic, said.rating, tuple(sorted(said.settings.items())), said.start)
    return found if any(found) else None


def identities(lines: Sequence[FoundLine], said: Sequence[LineSaid], order: Order) -> list[Identity | None]:
    """The identity of every line; one without words of its own is of those it is drawn like, or paired with."""
    own = [identity_of(one.said) for one in said]
    result = list(own)
    for number, line in enumerate(lines):
        if own[number] is None:
            alike = {own[k] for k, other in enumerate(lines) if own[k] is not None and drawn_alike(line, other)}
            result[number] = next(iter(alike)) if len(alike) == 1 else None
    if None in result and any(own):
        _pair(result, own, order)
    return result


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
