"""What the axes are looked for on: the straight pieces of a page, from its strokes or from its pixels."""

from dataclasses import dataclass, replace

import cv2
import numpy as np

from curvelab.axes.flatten import Flattening, flattening
from curvelab.axes.marks import pixel_size
from curvelab.axes.segments import Segments, straight_segments
from curvelab.axes.tracks import track_lines
from curvelab.records.arrays import Bytes, Floats
from curvelab.records.sheet import Pixels, Sheet, Word

IMAGE_SD = 0.6
"""Pixels by which a line is off its place in the search, on images that are turned or noisy too."""

BENT_SD = 1.2
"""The same on pages seen at an angle, which as a rule are curled too."""

VECTOR_SD = 0.1
"""The same of exact strokes, in pixels of the page as it is seen."""

IMAGE_NEAR = 12.0
"""Pixels by which ends that meet may seem apart on images."""

VECTOR_NEAR = 4.0


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Page:
    """Straight pieces told apart by x and by y, in pixels of an image made flat or places of a vector page.

    ``near`` is how far ends that meet may be apart, ``sd`` how well places across are known.
    """

    upright: Segments
    level: Segments
    size: tuple[float, float]
    near: float
    sd: float
    pixels: Pixels | None
    flattening: Flattening

    def places(self, points: Floats) -> Floats:
        """Places of the sheet, shape (n, 2), of points of this page."""
        points = self.flattening.seen(points)
        return self.pixels.places(points) if self.pixels else points

    def points(self, places: Floats) -> Floats:
        """Points of this page, shape (n, 2), of places of the sheet."""
        return self.flattening.flat(self.pixels.columns_rows(places) if self.pixels else places)

    def word(self, word: Word) -> Word:
        """A word with its box and height in this page's unit."""
        if self.pixels is None:
            return word
        x0, y0, x1, y1 = word.box
        corners = self.points(np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]]))
        low, high = corners.min(axis=0), corners.max(axis=0)
        box = (float(low[0]), float(low[1]), float(high[0]), float(high[1]))
        return replace(word, box=box, height=word.height / self.pixels.size_in_places)

    def area(self, box: tuple[float, float, float, float]) -> tuple[float, float, float, float]:
        """A box of this page in places of the sheet."""
        x0, y0, x1, y1 = box
        corners = self.places(np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]]))
        low, high = corners.min(axis=0), corners.max(axis=0)
        return float(low[0]), float(low[1]), float(high[0]), float(high[1])

    @property
    def swapped(self) -> bool:
        """Whether x of this page runs along y of the sheet."""
        return self.pixels is not None and abs(self.pixels.to_place[0, 0]) < abs(self.pixels.to_place[1, 0])


def page_of(sheet: Sheet) -> Page:
    """The straight pieces of a sheet."""
    if sheet.pixels is None:
        upright, level = straight_segments(sheet.strokes)
        pixel = pixel_size(sheet)
        return Page(
            upright=upright,
            level=level,
            size=(sheet.width, sheet.height),
            near=VECTOR_NEAR * pixel,
            sd=VECTOR_SD * pixel,
            pixels=None,
            flattening=Flattening(centre=np.zeros(2), far=np.zeros(2)),
        )
    grey = sheet.pixels.grey
    turned: Bytes = np.ascontiguousarray(cv2.transpose(grey))
    upright, level = (track_lines(image) for image in (grey, turned))
    size = (float(grey.shape[1]), float(grey.shape[0]))
    flat = flattening(upright, level, size)
    return Page(
        upright=flat.segments(upright, 0),
        level=flat.segments(level, 1),
        size=size,
        near=IMAGE_NEAR,
        sd=IMAGE_SD if flat.is_straight else BENT_SD,
        pixels=sheet.pixels,
        flattening=flat,
    )
