"""The page by several renderers that have nothing in common but the design."""

import io
from collections.abc import Callable, Mapping
from pathlib import Path
from types import MappingProxyType

import matplotlib
import numpy as np
import pypdfium2
import resvg_py
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties
from numpy.typing import NDArray
from PIL import Image, ImageDraw, ImageFont
from reportlab.lib.colors import HexColor
from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont
from reportlab.pdfgen.canvas import Canvas

from tests.axes.foreign.lay import Pen, lay
from tests.axes.foreign.page import ForeignPage
from tests.axes.foreign.wording import Number

Pixels = NDArray[np.uint8]

SHIPPED = Path(matplotlib.get_data_path()) / "fonts" / "ttf"
INSTALLED = (
    "inter/Inter-Regular.otf", "ebgaramond/EBGaramond12-Regular.otf", "quattrocento/Quattrocento-Regular.otf",
    "comic-neue/ComicNeue-Regular.otf", "fira/FiraCode-Regular.ttf", "public/lm/lmroman10-regular.otf",
    "public/lm/lmsans10-regular.otf", "vollkorn/Vollkorn-Regular.ttf",
)  # fmt: skip
"""Faces that neither train the reader nor fit its confidence, from Debian packages; what is missing is left out."""


def faces() -> list[Path]:
    """Files of the faces pages may be printed in."""
    roots = (
        Path("/usr/share/fonts/opentype"),
        Path("/usr/share/fonts/truetype"),
        Path("/usr/share/texmf/fonts/opentype"),
    )
    found = [root / name for name in INSTALLED for root in roots if (root / name).exists()]
    names = ("DejaVuSans", "DejaVuSerif", "DejaVuSansMono", "STIXGeneral", "cmr10")
    return [SHIPPED / f"{name}.ttf" for name in names[:4]] + found


class _PillowPen(Pen):
    """Pillow at a multiple of the resolution, averaged down by the caller."""

    def __init__(self, page: ForeignPage, face: Path, times: int) -> None:
        self.times, self.face = times, face
        self.image = Image.new("RGB", (page.size[0] * times, page.size[1] * times), "white")
        self.pen = ImageDraw.Draw(self.image)

    def line(self, x0: float, y0: float, x1: float, y1: float, width: float, colour: str) -> None:
        t, half = self.times, 0.5 * width
        if x0 == x1 or y0 == y1:
            box = (
                min(x0, x1) - half * (x0 == x1),
                min(y0, y1) - half * (y0 == y1),
                max(x0, x1) + half * (x0 == x1),
                max(y0, y1) + half * (y0 == y1),
            )
            x0, y0, x1, y1 = (round(t * edge) for edge in box)
            self.pen.rectangle((x0, y0, max(x1 - 1, x0), max(y1 - 1, y0)), fill=colour)
            return
        self.pen.line((t * x0, t * y0, t * x1, t * y1), fill=colour, width=max(1, round(t * width)))

    def words(self, text: str, x: float, y: float, size: float, *, anchor: str, upright: bool = False) -> None:
        t = self.times
        font = ImageFont.truetype(str(self.face), round(t * size))
        where = {"start": "ls", "middle": "ms", "end": "rs"}[anchor]
        if not upright:
            self.pen.text((t * x, t * y), text, fill="black", font=font, anchor=where)
            return
        width, height = round(font.getlength(text)) + 4, round(1.6 * t * size)
        patch = Image.new("RGB", (width, height), "white")
        ImageDraw.Draw(patch).text((2, 0.72 * height), text, fill="black", font=font, anchor="ls")
        turned = patch.rotate(90, expand=True)
        corner = (round(t * x - 0.72 * height), round(t * y - 0.5 * width))
        self.image.paste(turned, corner)

    def width(self, text: str, size: float) -> float:
        return ImageFont.truetype(str(self.face), round(self.times * size)).getlength(text) / self.times


def pillow_pixels(page: ForeignPage, times: int) -> Pixels:
    """The page by Pillow at a multiple of its resolution."""
    pen = _PillowPen(page, _face(page), times)
    lay(page, pen)
    return np.asarray(pen.image)


class _SvgPen(Pen):
    def __init__(self, face: Path) -> None:
        self.face = face
        self.family = ImageFont.truetype(str(face), 12).getname()[0]
        self.parts: list[str] = []

    def line(self, x0: float, y0: float, x1: float, y1: float, width: float, colour: str) -> None:
        self.parts.append(
            f'<line x1="{x0:.3f}" y1="{y0:.3f}" x2="{x1:.3f}" y2="{y1:.3f}" '
            f'stroke="{colour}" stroke-width="{width:.3f}"/>'
        )

    def words(self, text: str, x: float, y: float, size: float, *, anchor: str, upright: bool = False) -> None:
        turn = f' transform="rotate(-90 {x:.2f} {y:.2f})"' if upright else ""
        self.parts.append(
            f'<text x="{x:.2f}" y="{y:.2f}" font-size="{size:.2f}" font-family="{self.family}" '
            f'text-anchor="{anchor}"{turn}>{text}</text>'
        )

    def width(self, text: str, size: float) -> float:
        return ImageFont.truetype(str(self.face), 100).getlength(text) * size / 100


def svg_file(page: ForeignPage) -> bytes:
    """The page as SVG; user units are pixels."""
    pen = _SvgPen(_face(page))
    lay(page, pen)
    width, height = page.size
    head = f'<svg xmlns="http://www.w3.org/2000/svg" width="{width}" height="{height}" viewBox="0 0 {width} {height}">'
    return "".join([head, f'<rect width="{width}" height="{height}" fill="white"/>', *pen.parts, "</svg>"]).encode()


def resvg_pixels(page: ForeignPage, times: int) -> Pixels:
    """The SVG by resvg."""
    text = svg_file(page).decode()
    file = resvg_py.svg_to_bytes(svg_string=text, width=page.size[0] * times, font_files=[str(_face(page))], dpi=96)
    return np.asarray(Image.open(io.BytesIO(bytes(file))).convert("RGB"))


class _PdfPen(Pen):
    """One point a pixel."""

    def __init__(self, page: ForeignPage, face: Path) -> None:
        self.target = io.BytesIO()
        self.height = page.size[1]
        self.canvas = Canvas(self.target, pagesize=page.size, invariant=1)
        pdfmetrics.registerFont(TTFont(face.stem, str(face)))
        self.name = face.stem

    def line(self, x0: float, y0: float, x1: float, y1: float, width: float, colour: str) -> None:
        self.canvas.setStrokeColor(HexColor(colour))
        self.canvas.setLineWidth(width)
        self.canvas.line(x0, self.height - y0, x1, self.height - y1)

    def words(self, text: str, x: float, y: float, size: float, *, anchor: str, upright: bool = False) -> None:
        self.canvas.saveState()
        self.canvas.translate(x, self.height - y)
        self.canvas.rotate(90 if upright else 0)
        self.canvas.setFont(self.name, size)
        shift = {"start": 0.0, "middle": 0.5, "end": 1.0}[anchor] * self.width(text, size)
        self.canvas.drawString(-shift, 0, text)
        self.canvas.restoreState()

    def width(self, text: str, size: float) -> float:
        return float(pdfmetrics.stringWidth(text, self.name, size))


def pdf_file(page: ForeignPage) -> bytes:
    """The page as PDF, a point for each pixel of the design."""
    usable = [face for face in faces() if face.suffix == ".ttf"]
    pen = _PdfPen(page, usable[page.face % len(usable)])
    lay(page, pen)
    pen.canvas.save()
    return pen.target.getvalue()


def pdfium_pixels(page: ForeignPage, times: int) -> Pixels:
    """The PDF by PDFium."""
    document = pypdfium2.PdfDocument(pdf_file(page))
    try:
        return np.asarray(document[0].render(scale=times).to_numpy())[:, :, 2::-1].copy()
    finally:
        document.close()


def matplotlib_pixels(page: ForeignPage, times: int) -> Pixels:
    """The plot as matplotlib draws it by itself: its own axes, ticks and snapping; numbers by the design."""
    dpi = 100.0 * times
    width, height = page.size
    left, top, right, bottom = page.frame
    figure = Figure(figsize=(width / 100, height / 100), dpi=dpi)
    axes = figure.add_axes(
        (left / width, 1 - bottom / height, (right - left) / width, (bottom - top) / height), xscale="log", yscale="log"
    )
    axes.set_xlim(page.current.low, page.current.high)
    axes.set_ylim(page.time.low, page.time.high)
    font = FontProperties(fname=str(_face(page)))
    point = 72 / 100
    for which, axis in ((axes.xaxis, page.current), (axes.yaxis, page.time)):
        which.set_ticks([number.value for number in axis.numbers], [_mathtext(number) for number in axis.numbers])
        minor = [value for value in (*axis.decades, *axis.others) if value not in {one.value for one in axis.numbers}]
        which.set_ticks(minor, minor=True)
        which.set_minor_formatter(matplotlib.ticker.NullFormatter())
        for label in which.get_ticklabels():
            label.set_fontproperties(font)
            label.set_fontsize(page.numbers_px * point)
    axes.tick_params(which="both", direction="in" if page.ticks_inwards else "out", width=page.widths[1] * point)
    if page.grid == "all":
        axes.grid(True, which="both", color=page.colours[1], linewidth=page.widths[1] * point)
    elif page.grid == "decades":
        for values, draw in ((page.current.decades, axes.axvline), (page.time.decades, axes.axhline)):
            for value in values:
                draw(value, color=page.colours[0], linewidth=page.widths[0] * point)
    for curve in page.curves:
        axes.plot(curve[:, 0], 1 - curve[:, 1], color="black", transform=axes.transAxes, linewidth=1.5)
    axes.set_xlabel(page.current.title, fontproperties=font, fontsize=page.titles_px * point)
    axes.set_ylabel(page.time.title, fontproperties=font, fontsize=page.titles_px * point)
    canvas = FigureCanvasAgg(figure)
    canvas.draw()
    return np.asarray(canvas.buffer_rgba())[:, :, :3].copy()


def _mathtext(number: Number) -> str:
    return f"$\\mathdefault{{10^{{{number.exponent}}}}}$" if number.exponent else number.text


def _face(page: ForeignPage) -> Path:
    known = faces()
    return known[page.face % len(known)]


RENDERERS: Mapping[str, Callable[[ForeignPage, int], Pixels]] = MappingProxyType(
    {"matplotlib": matplotlib_pixels, "pillow": pillow_pixels, "resvg": resvg_pixels, "pdfium": pdfium_pixels}
)
"""Renderers to RGB pixels at a multiple of the design's resolution."""
