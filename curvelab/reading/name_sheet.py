"""What a sheet says of all its lines together: in its title, beside its axes, in its notes."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import reduce

from curvelab.reading.phrases import Box, Phrase
from curvelab.reading.said import Said, said_by, without

LONGEST_NAME = 6
"""Words up to which a line of text may name a device; longer ones explain."""
SURE = 0.5
"""Confidence from which words about the whole sheet are taken without a warning."""
FEWEST_WORDS = 4
"""Words from which a text within the plot explains something; shorter ones belong to a line."""
NAMES = ("kind", "characteristic", "characteristics", "ratings", "rating_range", "residual_current_a", "residual_delay")


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetSaid:
    """The sheet's title, what it says of every line, and words that name a device and may be misread."""

    title: str
    said: Said
    doubtful: tuple[Phrase, ...]


def inside(phrase: Phrase, frame: Box) -> bool:
    """Whether words stand within the plot."""
    x, y = phrase.middle
    return frame[0] < x < frame[2] and frame[1] < y < frame[3]


def sheet_said(phrases: Sequence[Phrase], frame: Box) -> SheetSaid:
    """What the words about a plot say; what is said above it goes before what is said below.

    Parameters
    ----------
    phrases : sequence of Phrase
        All of the sheet that are no label and no legend.
    frame : tuple
        (x0, y0, x1, y1) of the plot.
    """
    around = [one for one in phrases if not inside(one, frame) and not _is_number(one)]
    above = sorted((one for one in around if one.box[3] < frame[1] and not one.turned_deg), key=_by_height)
    beside = [one for one in around if one not in above]
    notes = [one for one in phrases if inside(one, frame) and len(one.text.split()) >= FEWEST_WORDS]
    title = above[0] if above else max(beside, key=lambda one: one.height, default=None)
    spoken = [*_of(above, explains=False), *_of(beside, explains=True), *_of(notes, explains=True)]
    named = [one for one in around if one.confidence < SURE and _names(one)]
    return SheetSaid(title=title.text if title else "", said=reduce(Said.over, spoken, Said()), doubtful=tuple(named))


def _names(phrase: Phrase) -> bool:
    """Whether words say which type, rated current or setting a device has, so that one wrong letter matters."""
    said = said_by(phrase.text)
    return bool(said.characteristics or said.ratings or said.residual_current_a) and not _explains(phrase)


def _explains(phrase: Phrase) -> bool:
    return len(phrase.text.split()) > LONGEST_NAME or phrase.text.rstrip().endswith(".")


def _by_height(phrase: Phrase) -> tuple[float, float]:
    return -phrase.height, phrase.box[1]


def _is_number(phrase: Phrase) -> bool:
    return said_by(phrase.text).number is not None or not any(letter.isalpha() for letter in phrase.text)


def _of(phrases: Sequence[Phrase], *, explains: bool) -> Iterator[Said]:
    """What each says; words that explain something do not name the device or its elements."""
    for phrase in phrases:
        said = without(said_by(phrase.text), "number")
        if explains:
            said = without(said, "element", "edge", "settings")
            if _explains(phrase):
                said = without(said, *NAMES)
        yield said
