"""A page as it is looked at: its own pixels, a rendering of a PDF, or the strokes and words of an SVG drawn."""

import math
from itertools import groupby

import cv2
import numpy as np
from numpy.typing import NDArray
from PIL import Image, ImageDraw, ImageFont

from curvelab.records.arrays import Bytes, Floats
from curvelab.records.sheet import Pixels, Sheet, Stroke
from curvelab.sheets import limits
from curvelab.sheets.kind import kind_of
from curvelab.sheets.render import POINTS_PER_INCH, render_page

VECTOR_DPI = 200.0
"""Resolution of a rendered vector page."""
SVG_PIXELS = 2400
"""Longer side of the picture of an SVG, whose user units say nothing of its size."""
SUBPIXELS = 4
"""Bits of a place below the pixel."""


def picture_of(sheet: Sheet, data: bytes) -> Pixels:
    """What is shown of a sheet: upright, and one place the same length across and down the page.

    Parameters
    ----------
    sheet : Sheet
    data : bytes
        Of its file; a PDF is rendered from it.

    Raises
    ------
    SheetError
        The page cannot be rendered.
    """
    if kind_of(data) == "pdf":
        finest = POINTS_PER_INCH / sheet.pixels.size_in_places if sheet.pixels else VECTOR_DPI
        return render_page(sheet.file, data, sheet.page, finest)
    return sheet.pixels or _drawn(sheet)


def _drawn(sheet: Sheet) -> Pixels:
    """Strokes and words of a vector page on white paper."""
    scale = min(
        SVG_PIXELS / max(sheet.width, sheet.height), math.sqrt(limits.RENDERED_PIXELS / (sheet.width * sheet.height))
    )
    columns, rows = max(1, round(sheet.width * scale)), max(1, round(sheet.height * scale))
    image = np.full((rows, columns, 3), 255, dtype=np.uint8)
    for (_, is_filled), same in groupby(sheet.strokes, key=lambda stroke: (stroke.path, stroke.filled)):
        if is_filled:
            _fill(image, list(same), scale)
        else:
            for stroke in same:
                _draw(image, stroke, scale)
    picture = Image.fromarray(image)
    pen = ImageDraw.Draw(picture)
    for word in sheet.words:
        x0, y0, x1, y1 = (edge * scale for edge in word.box)
        font = ImageFont.load_default(max(1.0, word.height * scale))
        pen.text(((x0 + x1) / 2, (y0 + y1) / 2), word.text, fill=0, font=font, anchor="mm")
    colour = np.asarray(picture)
    across, down = sheet.width / columns, sheet.height / rows
    return Pixels(
        grey=cv2.cvtColor(colour, cv2.COLOR_RGB2GRAY).astype(np.uint8),
        colour=colour,
        to_place=np.array([[across, 0.0, across / 2], [0.0, down, down / 2]]),
    )


def _fixed(points: Floats, scale: float) -> NDArray[np.int32]:
    """Places as the drawing library's whole numbers of a fraction of a pixel."""
    fixed: NDArray[np.int32] = np.round((points * scale - 0.5) * 2**SUBPIXELS).astype(np.int32)
    return fixed


def _fill(image: Bytes, outlines: list[Stroke], scale: float) -> None:
    """Fill the outlines of one path together, so that holes stay holes; a line encloses nothing."""
    pieces = [_fixed(stroke.points, scale) for stroke in outlines]
    areas = [piece for piece in pieces if cv2.contourArea(piece) > 0]
    if areas:
        cv2.fillPoly(image, areas, outlines[0].colour, cv2.LINE_AA, SUBPIXELS)


def _draw(image: Bytes, stroke: Stroke, scale: float) -> None:
    width = max(1, round(stroke.width * scale))
    pieces = _dashes(stroke, scale) if stroke.dash else [_fixed(stroke.points, scale)]
    is_closed = stroke.closed and not stroke.dash
    cv2.polylines(image, pieces, is_closed, stroke.colour, width, cv2.LINE_AA, SUBPIXELS)


def _dashes(stroke: Stroke, scale: float) -> list[NDArray[np.int32]]:
    """The pieces of a dashed line that are drawn."""
    points = np.concatenate([stroke.points, stroke.points[:1]]) if stroke.closed else stroke.points
    along = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
    pattern = stroke.dash * 2 if len(stroke.dash) % 2 else stroke.dash
    period = sum(pattern)
    if period * scale < 1:
        return [_fixed(points, scale)]
    pieces = []
    for start in np.arange(0.0, along[-1], period):
        at = start
        for on, off in zip(pattern[::2], pattern[1::2], strict=True):
            inner = along[(along > at) & (along < at + on)]
            stops = np.concatenate([[at], inner, [min(at + on, along[-1])]])
            piece = np.stack([np.interp(stops, along, points[:, k]) for k in (0, 1)], axis=1)
            pieces.append(_fixed(piece, scale))
            at += on + off
    return pieces
