"""Single characters with their places become runs of text; raised smaller ones become exponents."""

import math
from dataclasses import dataclass

import numpy as np

from curvelab.records.sheet import Word

RAISED = str.maketrans("0123456789+-−–()ni", "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻⁻⁻⁽⁾ⁿⁱ")

SMALLER = 0.9
"""A raised or lowered character is below this share of the size of its base."""

RAISED_BY = 0.18
"""An exponent's baseline stands above its base's by more than this share of the base's size."""

SAME_LINE = 0.7
"""Baselines of one run differ by less than this share of the size: exponents included."""

GAP = 0.6
"""A gap along the line wider than this share of the size starts a new run, a printed space apart."""

DIGIT_ADVANCE = 0.68
"""From the start of one digit to that of the next is less than this share of the size; more is another number."""

TURN_DEG = 2.0


@dataclass(frozen=True, kw_only=True, slots=True)
class Character:
    """One character.

    ``origin`` is the start of its baseline and ``box`` its (x0, y0, x1, y1), both in places; ``size`` the font size in
    the sheet's unit; ``turned_deg`` the reading direction, anticlockwise from rightwards.
    """

    text: str
    origin: tuple[float, float]
    box: tuple[float, float, float, float]
    size: float
    turned_deg: float


def words_of(characters: list[Character]) -> tuple[Word, ...]:
    """Runs of characters that were written one after another on one line.

    A space that the file itself writes keeps a run together (``Current in A``); a wide gap, two spaces, another line
    or another direction end it.
    """
    runs: list[list[Character]] = []
    for character in characters:
        if runs and _continues(runs[-1], character):
            runs[-1].append(character)
        else:
            runs.append([character])
    return tuple(word for run in runs if (word := _word(run)) is not None)


def _along_up(base: Character, other: tuple[float, float]) -> tuple[float, float]:
    """A place relative to a character's origin: along its reading direction, and upwards from its baseline."""
    angle = math.radians(base.turned_deg)
    right, down = other[0] - base.origin[0], other[1] - base.origin[1]
    return right * math.cos(angle) - down * math.sin(angle), -right * math.sin(angle) - down * math.cos(angle)


def _continues(run: list[Character], character: Character) -> bool:
    last, size = run[-1], max(one.size for one in run)
    turn = abs((character.turned_deg - last.turned_deg + 180.0) % 360.0 - 180.0)
    if turn > TURN_DEG or (last.text.isspace() and character.text.isspace()):
        return False
    along, up = _along_up(last, character.origin)
    level = abs(up) <= RAISED_BY * size
    if level and last.text.isdecimal() and character.text.isdecimal() and along > DIGIT_ADVANCE * size:
        return False
    x0, y0, x1, y1 = last.box
    ends = max(_along_up(last, corner)[0] for corner in ((x0, y0), (x0, y1), (x1, y0), (x1, y1)))
    reach = GAP * max(size, character.size)
    return abs(up) <= SAME_LINE * size and -reach <= along - ends <= reach and along >= -0.1 * size


def _word(run: list[Character]) -> Word | None:
    printed = [character for character in run if not character.text.isspace()]
    if not printed:
        return None
    base = max(printed, key=lambda one: one.size)
    text = "".join(one.text.translate(RAISED) if _is_raised(base, one) else one.text for one in run)
    boxes = np.array([character.box for character in printed])
    x0, y0 = boxes[:, :2].min(axis=0)
    x1, y1 = boxes[:, 2:].max(axis=0)
    return Word(
        text=" ".join(text.split()),
        box=(float(x0), float(y0), float(x1), float(y1)),
        height=base.size,
        turned_deg=base.turned_deg,
    )


def _is_raised(base: Character, character: Character) -> bool:
    return character.size < SMALLER * base.size and _along_up(base, character.origin)[1] > RAISED_BY * base.size
