"""The renderers by name: a laid-out page becomes pixels or a vector file, with its truth in that file's places."""

from collections.abc import Callable, Mapping
from types import MappingProxyType

import cv2
import numpy as np
from numpy.typing import NDArray

from demo_curves.drawing.design import Page
from demo_curves.drawing.draw_matplotlib import agg_pixels, vector_file
from demo_curves.drawing.draw_reportlab import pdfium_pixels, reportlab_pdf
from demo_curves.drawing.draw_svg import resvg_pixels, svg_text
from demo_curves.drawing.ink import Ink
from demo_curves.drawing.layout import DrawnPage

Pixels = NDArray[np.uint8]

RASTER: Mapping[str, Callable[[tuple[Ink, ...], Page], Pixels]] = MappingProxyType(
    {
        "agg": agg_pixels,
        "agg-snapped": lambda ink, page: agg_pixels(ink, page, snapped=True),
        "agg-stepped": lambda ink, page: agg_pixels(ink, page, stepped=True),
        "resvg": resvg_pixels,
        "pdfium": pdfium_pixels,
    }
)
"""Renderers to RGB pixels.

Only "agg-snapped" moves level and upright lines to whole pixels; only "agg-stepped" draws lines without shades.
"""

VECTOR: Mapping[str, Callable[[tuple[Ink, ...], Page], bytes]] = MappingProxyType(
    {
        "matplotlib-pdf": lambda ink, page: vector_file(ink, page, "pdf"),
        "matplotlib-svg": lambda ink, page: vector_file(ink, page, "svg"),
        "reportlab-pdf": reportlab_pdf,
        "svg": lambda ink, page: svg_text(ink, page).encode(),
    }
)
"""Renderers to vector files, whose truth is the page's own, in points."""


def enlarged(page: Page, times: int) -> Page:
    """The same page at a multiple of its resolution."""
    return Page(width_px=page.width_px * times, height_px=page.height_px * times, dpi=page.dpi * times)


def grey(pixels: Pixels) -> Pixels:
    """Luminance (ITU-R BT.601 weights), rounded."""
    return np.asarray(cv2.cvtColor(pixels, cv2.COLOR_RGB2GRAY))


def raster(drawn: DrawnPage, page: Page, renderer: str) -> Pixels:
    """RGB pixels by a named renderer."""
    return RASTER[renderer](drawn.ink, page)
