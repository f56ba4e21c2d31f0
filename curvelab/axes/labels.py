"""The numbers printed beside a plot, as what they may say and where along their axis they stand."""

from collections.abc import Collection, Iterable
from dataclasses import dataclass, replace
from typing import Literal

from curvelab.axes.plots import Plot
from curvelab.axes.seen import Seen
from curvelab.lettering.numbers import number_of
from curvelab.records.sheet import Word

REACH_LEVEL, REACH_UPRIGHT = 3.0, 4.0
"""Heights of a word by which a number stands apart from the frame at most, below or above it, and beside it."""

INSIDE = 0.15
"""Heights by which it may reach into the frame."""

BEYOND = 1.5
"""Heights by which its middle may lie beyond the frame's corners."""

LEAST_CHANCE = 0.02

Side = Literal["above", "below", "left", "right"]

SIDES: tuple[tuple[Side, Side], tuple[Side, Side]] = (("above", "below"), ("left", "right"))
"""Sides of the frame at which the numbers of lines told apart by x, and by y, stand."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Reading:
    """A number, the unit printed with it, and the chance that the label says so."""

    value: float
    unit: str | None
    chance: float


@dataclass(frozen=True, kw_only=True, slots=True)
class Label:
    """A number beside a plot.

    ``at`` is its middle across the lines, moved along their slope to where lines are told apart; ``half`` is half the
    height of its characters.
    """

    text: str
    readings: tuple[Reading, ...]
    at: float
    half: float
    side: Side
    box: tuple[float, float, float, float]


def labels_beside(words: Iterable[Word], plot: Plot, seen: tuple[Seen, Seen], across: int) -> list[Label]:
    """Numbers beside the frame that may label the lines told apart by x (0) or y (1)."""
    labels = []
    for word in words:
        side = _side(word, plot, seen, across)
        readings = _readings(word) if side else ()
        if side and readings:
            place = _middle(word.box)
            half = 0.5 * min(word.box[2] - word.box[0], word.box[3] - word.box[1], word.height)
            labels.append(
                Label(
                    text=word.text,
                    readings=readings,
                    at=place[across] - seen[across].slope_at(place[across]) * (place[1 - across] - seen[across].middle),
                    half=max(half, 0.25 * word.height),
                    side=side,
                    box=word.box,
                )
            )
    return labels


def labels_in(labels: Iterable[Label], units: Collection[str]) -> list[Label]:
    """Labels with the readings that are in one of some units, or in none."""
    kept = (
        replace(label, readings=tuple(each for each in label.readings if each.unit is None or each.unit in units))
        for label in labels
    )
    return [label for label in kept if label.readings]


def _middle(box: tuple[float, float, float, float]) -> tuple[float, float]:
    return 0.5 * (box[0] + box[2]), 0.5 * (box[1] + box[3])


def _side(word: Word, plot: Plot, seen: tuple[Seen, Seen], across: int) -> Side | None:
    """The side of the frame that a word stands at as a number of an axis does; None where it stands elsewhere."""
    other = 1 - across
    place = _middle(word.box)
    low, high = plot.span(across)
    reach = BEYOND * word.height
    if not low - reach <= place[across] <= high + reach:
        return None
    # The frame's sides lean as the lines across do.
    lean = seen[other].slope * (place[across] - 0.5 * (low + high))
    start, end = (edge + lean for edge in plot.span(other))
    first, last = word.box[other], word.box[other + 2]
    furthest = (REACH_LEVEL if other == 1 else REACH_UPRIGHT) * word.height
    if -furthest <= last - start <= INSIDE * word.height:
        return SIDES[across][0]
    if -INSIDE * word.height <= first - end <= furthest:
        return SIDES[across][1]
    return None


def _readings(word: Word) -> tuple[Reading, ...]:
    texts = ((word.text, word.confidence), *word.alternatives)
    found: dict[tuple[float, str | None], float] = {}
    for text, chance in texts:
        for number in number_of(text):
            key = (number.value, number.unit)
            found[key] = found.get(key, 0.0) + chance * number.weight
    return tuple(
        Reading(value=value, unit=unit, chance=min(chance, 1.0))
        for (value, unit), chance in found.items()
        if chance >= LEAST_CHANCE
    )
