"""Words on a sheet: from its file where that carries text, else read from its pixels."""

from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from curvelab.lettering.exact import plain_word, with_exponents
from curvelab.lettering.ink import GLYPH_PX, find_ink
from curvelab.lettering.page import words_of_ink
from curvelab.records.sheet import Pixels, Sheet, Word

Box = tuple[float, float, float, float]

AROUND_PX = GLYPH_PX + 10
"""Pixels around an area that are looked at too: lines that cross it must be seen to be longer than a character."""


def read_words(sheet: Sheet, areas: tuple[Box, ...] | None = None) -> tuple[Word, ...]:
    """Words on a sheet, whole page or in rectangles.

    Parameters
    ----------
    sheet : Sheet
    areas : tuple of (x0, y0, x1, y1), optional
        Rectangles in places; a word belongs to an area by its middle.

    Returns
    -------
    tuple of Word
        Read from pixels, ``confidence`` is the chance that the text is right to the last character, and
        ``alternatives`` are what it may say instead, with their chances.
    """
    if sheet.words or sheet.pixels is None:
        words = with_exponents([plain_word(word) for word in sheet.words])
        return tuple(word for word in words if areas is None or any(_within(word, area) for area in areas))
    return tuple(word for part in _parts(sheet.pixels, areas) for word in part)


def _within(word: Word, area: Box) -> bool:
    x, y = (word.box[0] + word.box[2]) / 2, (word.box[1] + word.box[3]) / 2
    return area[0] <= x <= area[2] and area[1] <= y <= area[3]


def _parts(pixels: Pixels, areas: tuple[Box, ...] | None) -> Iterator[list[Word]]:
    rows, columns = pixels.grey.shape
    for area in (None,) if areas is None else areas:
        left, top, right, bottom = (0, 0, columns, rows) if area is None else _pixel_area(pixels, area)
        if right <= left or bottom <= top:
            continue
        left, top, right, bottom = left - AROUND_PX, top - AROUND_PX, right + AROUND_PX, bottom + AROUND_PX
        left, top, right, bottom = max(0, left), max(0, top), min(columns, right), min(rows, bottom)
        found = words_of_ink(find_ink(pixels.grey[top:bottom, left:right]))
        placed = [_placed(word, pixels, left, top) for word in found]
        yield [word for word in placed if area is None or _within(word, area)]


def _pixel_area(pixels: Pixels, area: Box) -> tuple[int, int, int, int]:
    rows, columns = pixels.grey.shape
    x0, y0, x1, y1 = area
    corners = pixels.columns_rows(np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]]))
    low, high = np.floor(corners.min(axis=0) + 0.5), np.ceil(corners.max(axis=0) + 0.5)
    left, top = (int(value) for value in np.clip(low, 0, (columns, rows)))
    right, bottom = (int(value) for value in np.clip(high, 0, (columns, rows)))
    return left, top, right, bottom


def _placed(word: Word, pixels: Pixels, left: int, top: int) -> Word:
    """A word in pixels of a part (edges whole) in places of the sheet (pixel centres whole)."""
    x0, y0, x1, y1 = word.box
    corners = np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]]) + np.array([left - 0.5, top - 0.5])
    places = pixels.places(corners)
    low, high = places.min(axis=0), places.max(axis=0)
    box = (float(low[0]), float(low[1]), float(high[0]), float(high[1]))
    return replace(word, box=box, height=word.height * pixels.size_in_places)
