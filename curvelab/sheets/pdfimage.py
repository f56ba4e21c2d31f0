"""A scan embedded in a PDF page: its own pixels, never rendered again, with their map into the page."""

from typing import Any

import numpy as np
import pypdfium2 as pdfium

from curvelab.records.arrays import Bytes, Floats
from curvelab.records.sheet import Pixels
from curvelab.sheets.affine import compose, from_six
from curvelab.sheets.levels import grey_and_colour
from curvelab.sheets.pdfobjects import Painted
from curvelab.sheets.source import Source


def covered_area(image: Painted) -> float:
    """Area of the page under an image, in square points."""
    return float(abs(np.linalg.det(image.to_place[:, :2])))


def scan_pixels(image: Painted, page: pdfium.PdfPage, source: Source) -> Pixels:
    """The image's own pixels, turned by quarter turns and mirrored, if need be, so that they stand upright.

    Raises
    ------
    SheetError
        The image is over the limit, or cannot be decoded.
    """
    handle = pdfium.PdfImage(image.handle, page=page, pdf=page.pdf)
    columns, rows = handle.get_px_size()
    source.require_pixels(columns, rows)
    try:
        bitmap = handle.get_bitmap(render=False)
    except pdfium.PdfiumError as error:
        raise source.damaged("a scan") from error
    try:
        grey, colour = grey_and_colour(bitmap.to_pil())
    finally:
        bitmap.close()
    # an image fills the unit square of its own space, the first row at the top
    unit = from_six((1 / columns, 0, 0, -1 / rows, 0.5 / columns, 1 - 0.5 / rows))
    return upright(grey, colour, compose(image.to_place, unit))


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
