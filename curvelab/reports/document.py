"""What a document says, before it has a form: sections of paragraphs, facts, tables and plates."""

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Literal, NamedTuple, TypeAlias

from matplotlib.figure import Figure

Look = Literal["plain", "open", "quiet"]
"""``open`` asks for a second look, ``quiet`` is said by the way."""
Free: TypeAlias = tuple[float, float]
"""Of a page, the fractions left free above and beneath."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Paragraph:
    """A few sentences."""

    words: str
    look: Look = "plain"


@dataclass(frozen=True, kw_only=True, slots=True)
class Facts:
    """Names and what they are, in two columns."""

    pairs: tuple[tuple[str, str], ...]


class Column(NamedTuple):
    """A table's column: its heading, its share of the width, and the side it is set to."""

    heading: str
    share: float
    side: Literal["left", "right"] = "left"


def columns_of(shares: Mapping[str, float]) -> tuple[Column, ...]:
    """Columns set to the left, by heading and share."""
    return tuple(Column(heading, share) for heading, share in shares.items())


@dataclass(frozen=True, kw_only=True, slots=True)
class Row:
    """A table's row, and what is said beneath it across the table."""

    cells: tuple[str, ...]
    look: Look = "plain"
    beneath: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class Table:
    """Rows under headings that are repeated on each page."""

    columns: tuple[Column, ...]
    rows: tuple[Row, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class Plate:
    """A picture on a page of its own.

    ``make`` draws it as an A4 figure, ``caption`` says what it shows. One that is ``hatched`` is kept as pixels where
    another program prints it: browsers lose fine hatching on the way to the printer.
    """

    make: Callable[[Free], Figure]
    caption: str
    hatched: bool = False


@dataclass(frozen=True, kw_only=True, slots=True)
class Signatures:
    """Lines to sign on."""

    roles: tuple[str, ...]


Block: TypeAlias = Paragraph | Facts | Table | Plate | Signatures


@dataclass(frozen=True, kw_only=True, slots=True)
class Section:
    """A numbered part of the document."""

    heading: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class Document:
    """A whole document; ``name`` stands on every page: what it is about, with its revision."""

    title: str
    name: str
    subtitle: str
    sections: tuple[Section, ...]
    program: str


NO_BREAK = "\u00a0"
_UNIT = re.compile(r"(?<=[\d³]) (?=(?:[mk]?A|A²s|m?s|min|h|V|Hz|px|pt|%|°C|xI\w+)(?!\w))")


def typeset(words: str) -> str:
    """Powers as they are printed, not as they are typed, and numbers kept together with their units."""
    for typed, printed in (("I2t", "I²t"), ("A2s", "A²s"), ("k2S2", "k²S²"), (" x 10^3", f"{NO_BREAK}×{NO_BREAK}10³")):
        words = words.replace(typed, printed)
    return _UNIT.sub(NO_BREAK, words)
