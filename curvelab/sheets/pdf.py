"""One page of a PDF: its exact strokes and words, or the scan that it carries."""

import pypdfium2 as pdfium
from pypdfium2 import raw

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Pixels, Sheet, Stroke
from curvelab.sheets import limits
from curvelab.sheets.apart import read_apart
from curvelab.sheets.pdfimage import covered_area, pixel_count, scan_pixels
from curvelab.sheets.pdfium import opened_page, page_map
from curvelab.sheets.pdfobjects import Painted, Walk
from curvelab.sheets.pdfpaths import strokes_of
from curvelab.sheets.pdftext import words_on
from curvelab.sheets.source import Source
from curvelab.sheets.strokes import PointCount, Setting
from curvelab.sheets.weight import is_light

SCAN_SHARE = 0.1
"""An image below this share of the page is a logo or a photo, not a scanned plot."""

SAME_AREA = 0.9
"""Images of at least this share of the largest one's area are layers of one scan."""

PLOT_LINES = 12
"""A plot has at least this many drawn lines; fewer beside an image are its frame and title block."""


def pdf_page(source: Source) -> Sheet:
    """One page of a PDF; what may cost too much is read in a process of its own.

    Raises
    ------
    SheetError
        The file is damaged, needs a password or is over the limits, or has no such page.
    """
    return pdf_here(source) if is_light(source.data) else read_apart(source)


def pdf_here(source: Source) -> Sheet:
    """One page of a PDF, read in this process, with nothing to bound what PDFium takes."""
    with opened_page(source) as (page, pages):
        to_place, width, height = page_map(page)
        images, strokes = _painted(page, to_place, source)
        pixels = _scan(page, images, strokes, width * height, source)
        return Sheet(
            file=source.name,
            sha256=source.sha256,
            page=source.page,
            pages=pages,
            width=width,
            height=height,
            unit="pt",
            pixels=pixels,
            strokes=() if pixels is not None else tuple(strokes),
            words=words_on(page, to_place, source),
        )


def _painted(page: pdfium.PdfPage, to_place: Floats, source: Source) -> tuple[list[Painted], list[Stroke]]:
    images: list[Painted] = []
    strokes: list[Stroke] = []
    points = PointCount()
    for number, painted in enumerate(Walk(source).objects(page, to_place)):
        if painted.kind == raw.FPDF_PAGEOBJ_IMAGE:
            images.append(painted)
            continue
        found = strokes_of(painted.handle, Setting(to_place=painted.to_place, clips=painted.clips, path=number))
        strokes.extend(found)
        points.add(sum(len(stroke.points) for stroke in found))
        if len(strokes) > limits.STROKES:
            raise source.over("strokes", limits.STROKES)
    return images, strokes


def _scan(
    page: pdfium.PdfPage, images: list[Painted], strokes: list[Stroke], page_area: float, source: Source
) -> Pixels | None:
    """Pixels of the largest image where it, and no drawing, carries the plot."""
    lines = sum(not stroke.filled for stroke in strokes)
    if not images or lines >= PLOT_LINES:
        return None
    largest = max(covered_area(image) for image in images)
    if largest < SCAN_SHARE * page_area:
        return None
    # a scan kept as layers has a coarse one for the paper and a fine one for the ink
    layers = [image for image in images if covered_area(image) > SAME_AREA * largest]
    return scan_pixels(max(layers, key=lambda image: pixel_count(image, page)), page, source)
