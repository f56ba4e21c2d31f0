"""Cuts the picture of a page into tiles at halved resolutions, and into the surroundings of a place, as PNG."""

import io
import math
from dataclasses import dataclass

import cv2
import numpy as np
from PIL import Image

from curvelab.errors import SheetError
from curvelab.records.arrays import Bytes
from curvelab.records.sheet import Pixels

TILE = 256
"""Pixels along a tile's side."""

KEPT_FROM = 2
"""Levels from this one on are kept: a twelfth of the picture; those before are made from it for each tile."""

LARGEST_CUT = 1200
"""Pixels along a cut's side at most."""

PAPER = 255


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Pyramid:
    """A picture and its coarser levels.

    Level 0 is the picture itself, each further level has half as many pixels along either side, rounded up.
    """

    pixels: Pixels
    kept: tuple[Bytes, ...]

    @property
    def image(self) -> Bytes:
        """The picture's levels: shape (rows, columns), or (rows, columns, 3) with colour."""
        return self.pixels.grey if self.pixels.colour is None else self.pixels.colour

    @property
    def levels(self) -> int:
        """How many levels there are; the last fits into one tile."""
        return levels_of(self.image.shape[1], self.image.shape[0])

    def tile(self, level: int, column: int, row: int) -> bytes:
        """One tile as PNG; at the right and lower edge it is smaller.

        Raises
        ------
        SheetError
            There is no such tile.
        """
        rows, columns = self.image.shape[:2]
        if 0 <= level < self.levels and column >= 0 and row >= 0:
            width, height = -(-columns // 2**level) - column * TILE, -(-rows // 2**level) - row * TILE
            if width > 0 and height > 0:
                return png(self._cut(level, column * TILE, row * TILE))
        raise SheetError(f"There is no tile {column}, {row} at level {level}")

    def _cut(self, level: int, left: int, top: int) -> Bytes:
        if level >= KEPT_FROM:
            return self.kept[level - KEPT_FROM][top : top + TILE, left : left + TILE]
        factor = 2**level
        piece = self.image[top * factor : (top + TILE) * factor, left * factor : (left + TILE) * factor]
        return piece if level == 0 else halved(piece)

    def around(self, place: tuple[float, float], radius: float, zoom: float) -> bytes:
        """The surroundings of a place, within ``radius`` of it in places, ``zoom`` pixels a pixel, as PNG.

        What lies off the page is paper.
        """
        x, y = self.pixels.columns_rows(np.array([place]))[0]
        reach = max(1, math.ceil(radius / self.pixels.size_in_places))
        side = 2 * reach + 1
        zoom = min(zoom, LARGEST_CUT / side)
        piece = _padded(self.image, round(float(x)) - reach, round(float(y)) - reach, side)
        size = max(1, round(side * zoom))
        # Enlarged, each pixel stays a square that can be judged.
        how = cv2.INTER_NEAREST if zoom > 1 else cv2.INTER_AREA
        return png(cv2.resize(piece, (size, size), interpolation=how).astype(np.uint8))


def pyramid_of(pixels: Pixels) -> Pyramid:
    """The picture with the levels that are kept."""
    image = pixels.grey if pixels.colour is None else pixels.colour
    kept: list[Bytes] = []
    for level in range(1, levels_of(image.shape[1], image.shape[0])):
        image = halved(image)
        if level >= KEPT_FROM:
            kept.append(image)
    return Pyramid(pixels=pixels, kept=tuple(kept))


def levels_of(columns: int, rows: int) -> int:
    """How many levels a picture has until it fits into one tile."""
    return 1 + max(0, math.ceil(math.log2(max(columns, rows) / TILE)))


def halved(image: Bytes) -> Bytes:
    """Half as many pixels along either side, rounded up; each the mean of four."""
    rows, columns = image.shape[:2]
    if rows % 2 or columns % 2:
        image = cv2.copyMakeBorder(image, 0, rows % 2, 0, columns % 2, cv2.BORDER_REPLICATE).astype(np.uint8)
    size = (image.shape[1] // 2, image.shape[0] // 2)
    return cv2.resize(image, size, interpolation=cv2.INTER_AREA).astype(np.uint8)


def _padded(image: Bytes, left: int, top: int, side: int) -> Bytes:
    """A square of the image; paper where it lies beyond."""
    rows, columns = image.shape[:2]
    piece = np.full((side, side, *image.shape[2:]), PAPER, dtype=np.uint8)
    x0, y0, x1, y1 = max(left, 0), max(top, 0), min(left + side, columns), min(top + side, rows)
    if x0 < x1 and y0 < y1:
        piece[y0 - top : y1 - top, x0 - left : x1 - left] = image[y0:y1, x0:x1]
    return piece


def png(image: Bytes) -> bytes:
    """An image as the bytes of a PNG, quickly rather than small."""
    content = io.BytesIO()
    Image.fromarray(np.ascontiguousarray(image)).save(content, "PNG", compress_level=1)
    return content.getvalue()
