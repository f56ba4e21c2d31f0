"""Text of a PDF page, hidden text behind a scan included, as words with their places."""

import ctypes
import math

import numpy as np
import pypdfium2 as pdfium
from pypdfium2 import raw

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Word
from curvelab.sheets import limits
from curvelab.sheets.affine import apply, compose, from_six, scale_of
from curvelab.sheets.characters import Character, words_of
from curvelab.sheets.source import Source

NO_CHARACTER = (0x0, 0xFFFD, 0xFFFF)
LINE_HYPHENS = (0x2, 0xFFFE)
"""PDFium's marks for a hyphen at the end of a line."""


def words_on(page: pdfium.PdfPage, to_place: Floats, source: Source) -> tuple[Word, ...]:
    """Words of the page.

    Raises
    ------
    SheetError
        The page has more characters than the limit.
    """
    text = page.get_textpage()
    try:
        count = raw.FPDFText_CountChars(text)
        if count > limits.CHARACTERS:
            raise source.over("characters", limits.CHARACTERS)
        found = (_character(text, index, to_place) for index in range(count))
        return words_of([character for character in found if character is not None])
    finally:
        text.close()


def _character(text: pdfium.PdfTextPage, index: int, to_place: Floats) -> Character | None:
    """One character; None for what PDFium itself puts in between."""
    code = raw.FPDFText_GetUnicode(text, index)
    if raw.FPDFText_IsGenerated(text, index) == 1 or code in NO_CHARACTER or chr(code) in "\r\n":
        return None
    matrix = raw.FS_MATRIX()
    raw.FPDFText_GetMatrix(text, index, ctypes.byref(matrix))
    glyph = compose(to_place, from_six((matrix.a, matrix.b, matrix.c, matrix.d, matrix.e, matrix.f)))
    size = raw.FPDFText_GetFontSize(text, index) * scale_of(glyph)
    if not math.isfinite(size) or size <= 0:
        return None
    x, y = ctypes.c_double(), ctypes.c_double()
    raw.FPDFText_GetCharOrigin(text, index, ctypes.byref(x), ctypes.byref(y))
    origin = apply(to_place, np.array([[x.value, y.value]]))[0]
    return Character(
        text="-" if code in LINE_HYPHENS else chr(code),
        origin=(float(origin[0]), float(origin[1])),
        box=_box(text, index, to_place),
        size=size,
        turned_deg=math.degrees(math.atan2(-glyph[1, 0], glyph[0, 0])),
    )


def _box(text: pdfium.PdfTextPage, index: int, to_place: Floats) -> tuple[float, float, float, float]:
    left, right, bottom, top = (ctypes.c_double() for _ in range(4))
    raw.FPDFText_GetCharBox(text, index, *(ctypes.byref(side) for side in (left, right, bottom, top)))
    corners = apply(to_place, np.array([[left.value, bottom.value], [right.value, top.value]]))
    (x0, y0), (x1, y1) = corners.min(axis=0), corners.max(axis=0)
    return float(x0), float(y0), float(x1), float(y1)
