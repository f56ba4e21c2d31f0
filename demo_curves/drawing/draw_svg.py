"""The page as our own SVG, and as pixels by resvg: a rasteriser that shares nothing with matplotlib's."""

import io
from xml.sax.saxutils import escape, quoteattr

import numpy as np
import resvg_py
from numpy.typing import NDArray
from PIL import Image

from demo_curves.drawing.design import Page
from demo_curves.drawing.fonts import FACES, FAMILIES, font_file
from demo_curves.drawing.ink import Fill, Ink, Stroke, Words


def svg_text(ink: tuple[Ink, ...], page: Page) -> str:
    """An SVG whose user units are points from the page's top left corner."""
    width, height = page.width_pt, page.height_pt
    size = f'width="{width:.6f}pt" height="{height:.6f}pt" viewBox="0 0 {width:.6f} {height:.6f}"'
    return _document(size, ink)


def resvg_pixels(ink: tuple[Ink, ...], page: Page) -> NDArray[np.uint8]:
    """RGB pixels (height, width, 3). The page is whole pixels, so that no size is rounded and nothing is scaled."""
    width, height = page.width_px, page.height_px
    size = f'width="{width}" height="{height}" viewBox="0 0 {width} {height}"'
    png = resvg_py.svg_to_bytes(
        svg_string=_document(size, ink, f' transform="scale({page.dpi / 72.0:.12g})"'),
        skip_system_fonts=True,
        font_files=[str(font_file(*face)) for face in FACES],
    )
    return np.asarray(Image.open(io.BytesIO(bytes(png))).convert("RGB")).copy()


def _document(size: str, ink: tuple[Ink, ...], transform: str = "") -> str:
    head = f'<svg xmlns="http://www.w3.org/2000/svg" {size}><g{transform}>'
    return "\n".join([head, *(_element(mark) for mark in ink), "</g></svg>\n"])


def _element(mark: Ink) -> str:
    match mark:
        case Stroke():
            dash = f' stroke-dasharray="{" ".join(f"{part:g}" for part in mark.dash_pt)}"' if mark.dash_pt else ""
            return (
                f'<path d="{_path(mark.points)}" fill="none" stroke="{mark.colour}" stroke-width="{mark.width_pt:g}" '
                f'stroke-linejoin="round"{dash}/>'
            )
        case Fill():
            return f'<path d="{_path(mark.points)}Z" fill="{mark.colour}"/>'
        case Words():
            return _words(mark)


def _path(points: NDArray[np.float64]) -> str:
    return "M" + "L".join(f"{x:.5f} {y:.5f}" for x, y in points)


def _words(mark: Words) -> str:
    x, y = mark.at_pt
    turn = f' transform="rotate({-mark.rotation:g} {x:.4f} {y:.4f})"' if mark.rotation else ""
    weight = ' font-weight="bold"' if mark.bold else ""
    return (
        f'<text x="{x:.4f}" y="{y:.4f}" font-family={quoteattr(FAMILIES[mark.font])} font-size="{mark.size_pt:g}" '
        f'text-anchor="{mark.anchor}" fill="{mark.colour}"{weight}{turn}>{escape(mark.text)}</text>'
    )
