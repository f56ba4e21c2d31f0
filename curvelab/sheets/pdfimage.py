"""A scan embedded in a PDF page: its own pixels, never rendered again, with their map into the page."""

from typing import Any

import numpy as np
import pypdfium2 as pdfium
from PIL import Image
from pypdfium2 import raw

from curvelab.records.arrays import Bytes, Floats
from curvelab.records.sheet import Pixels
from curvelab.sheets.affine import compose, from_six
from curvelab.sheets.levels import WHITE, banded_levels
from curvelab.sheets.pdfobjects import Painted
from curvelab.sheets.source import Source


def covered_area(image: Painted) -> float:
    """Area of the page under an image, in square points."""
    return float(abs(np.linalg.det(image.to_place[:, :2])))


def pixel_count(image: Painted, page: pdfium.PdfPage) -> int:
    """Pixels that the image itself has."""
    columns, rows = _size(image, page)
    return columns * rows


def scan_pixels(image: Painted, page: pdfium.PdfPage, source: Source) -> Pixels:
    """The image's own pixels, turned by quarter turns and mirrored, if need be, so that they stand upright.

    Raises
    ------
    SheetError
        The image is over the limit, or cannot be decoded.
    """
    columns, rows = _size(image, page)
    source.require_pixels(columns, rows)
    # drawn one pixel to one pixel, the samples come out unchanged, with masks and paint applied
    raw.FPDFImageObj_SetMatrix(image.handle, columns, 0, 0, rows, 0, 0)
    handle = raw.FPDFImageObj_GetRenderedBitmap(page.pdf, page, image.handle)
    if not handle:
        raise source.damaged("a scan")
    grey, colour = _levels(pdfium.PdfBitmap.from_raw(handle))
    if grey.shape != (rows, columns):
        raise source.damaged("a scan")
    # an image fills the unit square of its own space, the first row at the top
    unit = from_six((1 / columns, 0, 0, -1 / rows, 0.5 / columns, 1 - 0.5 / rows))
    return upright(grey, colour, compose(image.to_place, unit))


def _size(image: Painted, page: pdfium.PdfPage) -> tuple[int, int]:
    columns, rows = pdfium.PdfImage(image.handle, page=page, pdf=page.pdf).get_px_size()
    return columns, rows


def _levels(bitmap: pdfium.PdfBitmap) -> tuple[Bytes, Bytes | None]:
    """Levels of a bitmap with blue, green, red and alpha."""
    data, width, stride = np.frombuffer(bitmap.buffer, dtype=np.uint8), bitmap.width, bitmap.stride

    def band(first: int, last: int) -> Image.Image:
        rows = data[first * stride : last * stride]
        image = Image.frombuffer("RGBA", (width, last - first), rows, "raw", "BGRA", stride, 1)
        opaque = image.getchannel("A").getextrema() == (WHITE, WHITE)
        return image.convert("RGB") if opaque else image

    return banded_levels(band, (width, bitmap.height))


def upright(grey: Bytes, colour: Bytes | None, to_place: Floats) -> Pixels:
    """The same pixels in the order that comes nearest to x rightwards and y downwards; nothing is resampled."""
    if abs(to_place[0, 0]) + abs(to_place[1, 1]) < abs(to_place[0, 1]) + abs(to_place[1, 0]):
        grey, colour = _each(np.swapaxes, grey, colour, 0, 1)
        to_place = to_place[:, [1, 0, 2]]
    for axis, direction in ((1, to_place[0, 0]), (0, to_place[1, 1])):
        if direction < 0:
            last = grey.shape[axis] - 1
            grey, colour = _each(np.flip, grey, colour, axis)
            to_place = to_place.copy()
            column = 1 - axis
            to_place[:, 2] += to_place[:, column] * last
            to_place[:, column] *= -1
    return Pixels(
        grey=np.ascontiguousarray(grey),
        colour=None if colour is None else np.ascontiguousarray(colour),
        to_place=to_place,
    )


def _each(turn: Any, grey: Bytes, colour: Bytes | None, *axes: int) -> tuple[Bytes, Bytes | None]:
    return turn(grey, *axes), None if colour is None else turn(colour, *axes)
