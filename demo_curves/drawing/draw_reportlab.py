"""The page as a PDF by ReportLab, in the classic PDF faces, and as pixels by PDFium."""

import io

import numpy as np
import pypdfium2
from numpy.typing import NDArray
from pypdfium2 import raw
from reportlab.lib.colors import HexColor
from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont
from reportlab.pdfgen.canvas import Canvas

from demo_curves.drawing.design import Page
from demo_curves.drawing.fonts import font_file
from demo_curves.drawing.ink import Fill, Ink, Stroke, Words

CLASSIC = {
    ("sans", False): "Helvetica",
    ("sans", True): "Helvetica-Bold",
    ("stix", False): "Times-Roman",
    ("stix", True): "Times-Bold",
    ("mono", False): "Courier",
    ("mono", True): "Courier-Bold",
}


def reportlab_pdf(ink: tuple[Ink, ...], page: Page) -> bytes:
    """The PDF file, the same bytes each time."""
    target = io.BytesIO()
    canvas = Canvas(target, pagesize=(page.width_pt, page.height_pt), invariant=1, pageCompression=1)
    canvas.setLineJoin(1)
    for mark in ink:
        match mark:
            case Stroke():
                _stroke(canvas, mark, page)
            case Fill():
                canvas.setFillColor(HexColor(mark.colour))
                path = _path(canvas, mark.points, page)
                path.close()
                canvas.drawPath(path, stroke=0, fill=1)
            case Words():
                _words(canvas, mark, page)
    canvas.showPage()
    canvas.save()
    return target.getvalue()


def pdfium_pixels(ink: tuple[Ink, ...], page: Page) -> NDArray[np.uint8]:
    """RGB pixels (height, width, 3) of the ReportLab page, fitted to whole pixels without rounding its size up."""
    document = pypdfium2.PdfDocument(reportlab_pdf(ink, page))
    try:
        leaf = document[0]
        bitmap = pypdfium2.PdfBitmap.new_native(page.width_px, page.height_px, raw.FPDFBitmap_BGRx, rev_byteorder=True)
        bitmap.fill_rect((255, 255, 255, 255), 0, 0, page.width_px, page.height_px)
        size = (0, 0, page.width_px, page.height_px)
        raw.FPDF_RenderPageBitmap(bitmap.raw, leaf.raw, *size, 0, raw.FPDF_REVERSE_BYTE_ORDER)
        return np.asarray(bitmap.to_numpy())[:, :, :3].copy()
    finally:
        document.close()


def _stroke(canvas: Canvas, mark: Stroke, page: Page) -> None:
    canvas.setStrokeColor(HexColor(mark.colour))
    canvas.setLineWidth(mark.width_pt)
    canvas.setDash(list(mark.dash_pt), 0) if mark.dash_pt else canvas.setDash()
    canvas.drawPath(_path(canvas, mark.points, page), stroke=1, fill=0)


def _path(canvas: Canvas, points: NDArray[np.float64], page: Page):
    path = canvas.beginPath()
    path.moveTo(points[0, 0], page.height_pt - points[0, 1])
    for x, y in points[1:]:
        path.lineTo(x, page.height_pt - y)
    return path


def _face(mark: Words) -> str:
    """A classic face where it has every letter, else an embedded one."""
    key = (mark.font, mark.bold)
    if key in CLASSIC and mark.text.isascii():
        return CLASSIC[key]
    name = font_file(*key).stem
    if name not in pdfmetrics.getRegisteredFontNames():
        pdfmetrics.registerFont(TTFont(name, str(font_file(*key))))
    return name


def _words(canvas: Canvas, mark: Words, page: Page) -> None:
    canvas.saveState()
    canvas.setFillColor(HexColor(mark.colour))
    canvas.setFont(_face(mark), mark.size_pt)
    canvas.translate(mark.at_pt[0], page.height_pt - mark.at_pt[1])
    canvas.rotate(mark.rotation)
    draw = {"start": canvas.drawString, "middle": canvas.drawCentredString, "end": canvas.drawRightString}
    draw[mark.anchor](0, 0, mark.text)
    canvas.restoreState()
