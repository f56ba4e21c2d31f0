"""Words set in lines: how wide they are, and where they are broken."""

from collections.abc import Iterator
from functools import lru_cache

from matplotlib.font_manager import FontProperties
from matplotlib.textpath import text_to_path

FAMILY = "DejaVu Sans"
MM_PER_POINT = 25.4 / 72
LINE = 1.36
"""Distance of lines over the size of letters."""


@lru_cache(maxsize=8192)
def width_mm(words: str, size: float, bold: bool = False) -> float:
    """Width of words on one line; ``size`` in points."""
    font = FontProperties(family=FAMILY, size=size, weight="bold" if bold else "normal")
    width, _, _ = text_to_path.get_text_width_height_descent(words, font, ismath=False)
    return float(width) * MM_PER_POINT


def line_mm(size: float) -> float:
    """Height of a line; ``size`` in points."""
    return size * LINE * MM_PER_POINT


def wrapped(words: str, room_mm: float, size: float, bold: bool = False) -> list[str]:
    """The lines of a paragraph; a word longer than a line is broken within."""
    lines: list[str] = []
    line = ""
    for word in (piece for whole in words.split(" ") for piece in _pieces(whole, room_mm, size, bold)):
        longer = f"{line} {word}" if line else word
        if line and width_mm(longer, size, bold) > room_mm:
            lines.append(line)
            line = word
        else:
            line = longer
    return [*lines, line]


def _pieces(word: str, room_mm: float, size: float, bold: bool) -> Iterator[str]:
    while width_mm(word, size, bold) > room_mm and len(word) > 1:
        fits = max(1, int(len(word) * room_mm / width_mm(word, size, bold)))
        while fits > 1 and width_mm(word[:fits], size, bold) > room_mm:
            fits -= 1
        yield word[:fits]
        word = word[fits:]
    yield word
