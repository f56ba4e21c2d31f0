"""Matplotlib as renderer: Agg pixels with lines where they are or snapped to pixels, and vector PDF and SVG."""

import io
from collections.abc import Iterator
from contextlib import contextmanager

import matplotlib
import numpy as np
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties
from matplotlib.lines import Line2D
from matplotlib.patches import Polygon
from matplotlib.transforms import Affine2D
from numpy.typing import NDArray

from demo_curves.drawing.design import Page
from demo_curves.drawing.fonts import font_file
from demo_curves.drawing.ink import Fill, Ink, Stroke, Words

SETTINGS = {
    "path.simplify": False,  # every vertex of the truth is drawn
    "lines.scale_dashes": False,
    "pdf.fonttype": 42,
    "svg.fonttype": "none",
    "svg.hashsalt": "curves",
}
ANCHORS = {"start": "left", "middle": "center", "end": "right"}


def agg_pixels(ink: tuple[Ink, ...], page: Page, *, snapped: bool = False, stepped: bool = False) -> NDArray[np.uint8]:
    """RGB pixels (height, width, 3).

    `snapped` leaves matplotlib its habit of moving upright and level lines; `stepped` lets each pixel of a line be
    ink or none, as plotting programs do that know no shades.
    """
    with _figure(ink, page, snap=None if snapped else False) as figure:
        for line in figure.findobj(Line2D):
            line.set_antialiased(not stepped)
        canvas = FigureCanvasAgg(figure)
        canvas.draw()
        return np.asarray(canvas.buffer_rgba())[:, :, :3].copy()


def vector_file(ink: tuple[Ink, ...], page: Page, kind: str) -> bytes:
    """The page as `pdf` or `svg`, the same bytes each time."""
    metadata = {"CreationDate": None, "ModDate": None} if kind == "pdf" else {"Date": None}
    target = io.BytesIO()
    with _figure(ink, page, snap=False) as figure:
        figure.savefig(target, format=kind, metadata=metadata)
    return target.getvalue()


@contextmanager
def _figure(ink: tuple[Ink, ...], page: Page, *, snap: bool | None) -> Iterator[Figure]:
    with matplotlib.rc_context(SETTINGS):
        figure = Figure(figsize=(page.width_px / page.dpi, page.height_px / page.dpi), dpi=page.dpi)
        figure.patch.set_visible(False)
        flip = Affine2D().scale(1 / 72, -1 / 72).translate(0, page.height_px / page.dpi)
        to_display = flip + figure.dpi_scale_trans
        for order, mark in enumerate(ink):
            artist = _artist(mark)
            artist.set_transform(to_display)
            artist.set_zorder(order)
            artist.set_snap(snap)
            figure.add_artist(artist)
        yield figure


def _artist(mark: Ink) -> Line2D | Polygon | matplotlib.text.Text:
    match mark:
        case Stroke():
            line = Line2D(
                mark.points[:, 0],
                mark.points[:, 1],
                linewidth=mark.width_pt,
                color=mark.colour,
                solid_capstyle="butt",
                dash_capstyle="butt",
                solid_joinstyle="round",
                dash_joinstyle="round",
            )
            if mark.dash_pt:
                line.set_dashes(mark.dash_pt)
            return line
        case Fill():
            return Polygon(mark.points, closed=True, facecolor=mark.colour, edgecolor="none")
        case Words():
            return matplotlib.text.Text(
                *mark.at_pt,
                mark.text,
                color=mark.colour,
                fontproperties=FontProperties(fname=str(font_file(mark.font, mark.bold)), size=mark.size_pt),
                horizontalalignment=ANCHORS[mark.anchor],
                verticalalignment="baseline",
                rotation=mark.rotation,
                rotation_mode="anchor",
                parse_math=False,
            )
