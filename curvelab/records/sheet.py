"""A sheet: one page that carries curves, as pixels and, where the file has them, exact strokes and words.

A *place* is (x, y) in the sheet's own unit, x to the right and y downwards. Image files: pixels, the centre of the
top left pixel is (0, 0). PDF: points from the top left corner of the crop box, after the page's rotation. SVG: user
units from the top left of the view box.
"""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from curvelab.records.arrays import Bytes, Floats, freeze, lock


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Pixels:
    """The untouched image of a page.

    Parameters
    ----------
    grey : array, shape (height_px, width_px), uint8
        Luminance; 0 is black.
    colour : array, shape (height_px, width_px, 3), uint8, or None
        Red, green, blue; None where the page has no colour.
    to_place : array, shape (2, 3)
        Affine map: place = to_place @ (column, row, 1), pixel centres at whole numbers.
    """

    grey: Bytes
    colour: Bytes | None
    to_place: Floats

    def __post_init__(self) -> None:
        object.__setattr__(self, "grey", lock(self.grey))
        if self.colour is not None:
            object.__setattr__(self, "colour", lock(self.colour))
        freeze(self, to_place=self.to_place)

    def places(self, columns_rows: Floats) -> Floats:
        """Places of pixel coordinates, shape (n, 2) as (column, row)."""
        places: Floats = columns_rows @ self.to_place[:, :2].T + self.to_place[:, 2]
        return places

    def columns_rows(self, places: Floats) -> Floats:
        """Pixel coordinates (column, row) of places, shape (n, 2)."""
        return np.linalg.solve(self.to_place[:, :2], (places - self.to_place[:, 2]).T).T.astype(np.float64)

    @property
    def size_in_places(self) -> float:
        """Length of one pixel in the sheet's unit (geometric mean of both directions)."""
        return float(np.sqrt(abs(np.linalg.det(self.to_place[:, :2]))))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Stroke:
    """One exact piece of a path: a polyline in places, Bezier pieces already flattened.

    Parameters
    ----------
    points : array, shape (n, 2)
        Places; n >= 2.
    colour : tuple of int
        Red, green, blue, 0 to 255.
    width : float
        Line width in the sheet's unit; 0 for a filled outline.
    filled : bool
        True for the outline of a filled area, False for a drawn line.
    closed : bool
        True where the piece returns to its start.
    dash : tuple of float
        Lengths on and off in the sheet's unit; empty for a solid line.
    path : int
        Number of the path object on the page this piece belongs to.
    """

    points: Floats
    colour: tuple[int, int, int]
    width: float
    filled: bool
    closed: bool
    dash: tuple[float, ...]
    path: int

    def __post_init__(self) -> None:
        freeze(self, points=self.points)


@dataclass(frozen=True, kw_only=True, slots=True)
class Word:
    """A run of text with its place.

    ``box`` is (x0, y0, x1, y1) in places; ``height`` is the font size in the sheet's unit; ``turned_deg`` is the
    reading direction, anticlockwise from rightwards; ``confidence`` is 1 where the file itself carries the text.
    A raised exponent is written with Unicode superscripts: ``10²``, ``10⁻¹``. ``alternatives`` are other texts that a
    reader of pixels holds possible, likeliest first, each with its chance.
    """

    text: str
    box: tuple[float, float, float, float]
    height: float
    turned_deg: float = 0.0
    confidence: float = 1.0
    alternatives: tuple[tuple[str, float], ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Sheet:
    """One page of one file.

    ``strokes`` and ``words`` are empty where the file has pixels alone. ``pixels`` is the image itself, or a scan
    embedded in a PDF at its own resolution; None for a vector page, which is rendered for display only and on demand.
    """

    file: str
    sha256: str
    page: int
    pages: int
    width: float
    height: float
    unit: Literal["px", "pt"]
    pixels: Pixels | None
    strokes: tuple[Stroke, ...] = ()
    words: tuple[Word, ...] = ()

    @property
    def is_vector(self) -> bool:
        """True where exact strokes exist: then they are measured, not the pixels."""
        return bool(self.strokes)

    @property
    def pixel(self) -> float:
        """Size of a pixel in the sheet's unit; 0 where there are none."""
        return self.pixels.size_in_places if self.pixels else 0.0
