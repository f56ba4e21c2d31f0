"""The one door to PDFium, which must not be entered by two threads at once."""

import threading
from collections.abc import Iterator
from contextlib import contextmanager

import pypdfium2 as pdfium
from pypdfium2 import raw

from curvelab.errors import SheetError
from curvelab.records.arrays import Floats
from curvelab.sheets.affine import from_six
from curvelab.sheets.source import Source

DECIMALS = 4
"""Single precision keeps a page's sides to about this."""

_pdfium = threading.RLock()


@contextmanager
def opened_page(source: Source) -> Iterator[tuple[pdfium.PdfPage, int]]:
    """The page and the number of pages of its file, with PDFium to oneself.

    Raises
    ------
    SheetError
        The file is damaged or needs a password, or has no such page.
    """
    with _pdfium:
        document = _document(source)
        try:
            pages = len(document)
            source.require_page(pages)
            try:
                page = document[source.page - 1]
            except pdfium.PdfiumError as error:
                raise source.damaged("PDF") from error
            if not all(page.get_size()):
                raise source.damaged("PDF")
            yield page, pages
        finally:
            document.close()


def document_pages(source: Source) -> int:
    """Number of pages of a PDF.

    Raises
    ------
    SheetError
        The file is damaged or needs a password.
    """
    with _pdfium:
        document = _document(source)
        try:
            return len(document)
        finally:
            document.close()


def _document(source: Source) -> pdfium.PdfDocument:
    try:
        return pdfium.PdfDocument(source.data)
    except pdfium.PdfiumError as error:
        if getattr(error, "err_code", None) == raw.FPDF_ERR_PASSWORD:
            raise SheetError(
                f"'{source.name}' needs a password", "", "Save it without one, if its owner permits"
            ) from error
        raise source.damaged("PDF") from error


def page_map(page: pdfium.PdfPage) -> tuple[Floats, float, float]:
    """The map from the page's own space to places, and the page's width and height in points.

    Places count from the top left corner of the visible box, after the page's rotation.
    """
    left, bottom, right, top = (round(side, DECIMALS) for side in page.get_bbox())
    width, height = right - left, top - bottom
    match page.get_rotation():
        case 90:
            return from_six((0, 1, 1, 0, -bottom, -left)), height, width
        case 180:
            return from_six((-1, 0, 0, 1, right, -bottom)), width, height
        case 270:
            return from_six((0, -1, -1, 0, top, right)), height, width
        case _:
            return from_six((1, 0, 0, -1, -left, top)), width, height
