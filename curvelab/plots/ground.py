"""The sheet as the ground of a picture: its own pixels one to one, or its exact strokes and words drawn again."""

from collections.abc import Sequence
from itertools import groupby
from typing import Any

import numpy as np
from matplotlib.axes import Axes as Canvas
from matplotlib.figure import Figure
from matplotlib.patches import PathPatch
from matplotlib.path import Path
from matplotlib.patheffects import withStroke
from numpy.typing import ArrayLike

from curvelab.plots.ink import PAPER
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.records.sheet import Pixels, Sheet, Stroke, Word

A4_LONGER_INCHES = 11.69
"""A page is taken to be of this length, so that hairlines are hairlines at any resolution."""
COARSEST_DPI = 110.0
"""A small image is taken to be smaller than a page, so that words on it can be read."""
VECTOR_PIXELS = 2339
"""Longer side of the picture of a vector page: 200 dots an inch on A4."""


PagePlace = tuple[float, float, float, float]
"""Left, bottom, width, height as fractions of a figure."""
LETTERS = 5.5
"""In points."""


class Ground:
    """A figure that shows the sheet, and the way from places to it.

    Parameters
    ----------
    sheet : Sheet
        With pixels: drawn one to one. Without: its strokes and words are drawn.
    page : tuple, optional
        A figure and the place in it that the sheet is fitted into; left out, a figure of its own, pixel for pixel.
    """

    def __init__(self, sheet: Sheet, page: tuple[Figure, PagePlace] | None = None) -> None:
        self._pixels = sheet.pixels
        if self._pixels is not None:
            height, width = self._pixels.grey.shape
            self._scale = 1.0
        else:
            self._scale = VECTOR_PIXELS / max(sheet.width, sheet.height)
            width, height = round(sheet.width * self._scale), round(sheet.height * self._scale)
        self.figure, place = page or _own_page(width, height)
        inches = self.figure.get_size_inches()
        shrunk = min(inches[0] * place[2] / width, inches[1] * place[3] / height)
        across, down = shrunk * width / inches[0], shrunk * height / inches[1]
        # Centred across, at the top of its place.
        corner = place[0] + (place[2] - across) / 2, place[1] + place[3] - down
        self.canvas: Canvas = self.figure.add_axes((*corner, across, down))
        self.canvas.set_axis_off()
        if self._pixels is not None:
            _show(self.canvas, self._pixels)
        self.canvas.set_xlim(-0.5, width - 0.5)
        self.canvas.set_ylim(height - 0.5, -0.5)
        self._points = 72 * shrunk
        if self._pixels is None:
            self._draw_strokes(sheet.strokes, self._scale * self._points)
            self._draw_words(sheet.words, self._scale * self._points)

    @property
    def letter(self) -> tuple[float, float]:
        """Width and height of a letter in canvas coordinates."""
        return 0.6 * LETTERS / self._points, 1.3 * LETTERS / self._points

    def line(self, places: ArrayLike, width: float, **look: Any) -> None:
        """A polyline through places; width in points."""
        across, down = self.at(places)
        self.canvas.plot(across, down, linewidth=width, solid_capstyle="butt", **look)

    def write(self, at: tuple[float, float], words: str, colour: str, offset: tuple[float, float]) -> None:
        """Words at an offset in points from canvas coordinates, on the side the offset goes to."""
        self.canvas.annotate(
            words,
            at,
            xytext=offset,
            textcoords="offset points",
            fontsize=LETTERS,
            color=colour,
            ha="left" if offset[0] >= 0 else "right",
            va="center",
            path_effects=[withStroke(linewidth=1.6, foreground=PAPER)],
            zorder=6,
            annotation_clip=False,
        )

    def room(self, axes: Axes | None) -> tuple[float, float, float, float]:
        """Left, top, right and bottom, in canvas coordinates, of a plot; of the whole canvas without one."""
        if axes is None:
            (left, right), (bottom, top) = self.canvas.get_xlim(), self.canvas.get_ylim()
            return left, top, right, bottom
        (left, right), (top, bottom) = self.at([axes.frame[:2], axes.frame[2:]])
        return float(left), float(top), float(right), float(bottom)

    def at(self, places: object) -> tuple[Floats, Floats]:
        """Places, shape (n, 2), as coordinates across and down the canvas."""
        array = np.asarray(places, dtype=np.float64).reshape(-1, 2)
        # The corner of a vector page is its corner; the first pixel's centre lies half a pixel inside.
        found = array * self._scale - 0.5 if self._pixels is None else self._pixels.columns_rows(array)
        return found[:, 0], found[:, 1]

    def _path(self, strokes: Sequence[Stroke]) -> Path:
        """One path of several pieces, so that holes stay holes."""
        vertices, codes = [], []
        for stroke in strokes:
            corners = np.column_stack(self.at(stroke.points))
            if stroke.closed:
                corners = np.concatenate([corners, corners[:1]])
            vertices.append(corners)
            last = Path.CLOSEPOLY if stroke.closed else Path.LINETO
            codes.append(np.array([Path.MOVETO, *[Path.LINETO] * (len(corners) - 2), last], dtype=Path.code_type))
        return Path(np.concatenate(vertices), np.concatenate(codes))

    def _draw_strokes(self, strokes: Sequence[Stroke], points: float) -> None:
        for _, pieces in groupby(strokes, key=lambda stroke: (stroke.path, stroke.filled)):
            same = list(pieces)
            first = same[0]
            colour = tuple(part / 255 for part in first.colour)
            dashes = (0.0, tuple(max(length * points, 0.01) for length in first.dash)) if first.dash else "-"
            self.canvas.add_patch(
                PathPatch(
                    self._path(same),
                    fill=first.filled,
                    facecolor=colour,
                    edgecolor="none" if first.filled else colour,
                    linewidth=first.width * points,
                    linestyle=dashes,
                    capstyle="butt",
                    zorder=0,
                )
            )

    def _draw_words(self, words: Sequence[Word], points: float) -> None:
        for word in words:
            x0, y0, x1, y1 = word.box
            across, down = self.at([((x0 + x1) / 2, (y0 + y1) / 2)])
            self.canvas.text(
                float(across[0]),
                float(down[0]),
                word.text,
                fontsize=word.height * points,
                rotation=word.turned_deg,
                ha="center",
                va="center",
                parse_math=False,
                zorder=0,
            )


def _own_page(width: int, height: int) -> tuple[Figure, PagePlace]:
    dpi = max(COARSEST_DPI, max(height, width) / A4_LONGER_INCHES)
    # A little more than whole pixels: the size is rounded down when the figure is drawn.
    size = (width + 0.01) / dpi, (height + 0.01) / dpi
    return Figure(figsize=size, dpi=dpi, facecolor=PAPER), (0.0, 0.0, 1.0, 1.0)


def _show(canvas: Canvas, pixels: Pixels) -> None:
    """The image as it is: three channels, since a grey scale of colours would round the levels."""
    image = np.repeat(pixels.grey[:, :, None], 3, axis=2) if pixels.colour is None else pixels.colour
    canvas.imshow(image, interpolation="none", aspect="auto", zorder=0)
