"""Pictures of vector PDF pages to look at: nothing is ever measured on them."""

import hashlib
import math

import pypdfium2 as pdfium

from curvelab.errors import SheetError
from curvelab.records.sheet import Pixels
from curvelab.sheets import limits
from curvelab.sheets.affine import from_six
from curvelab.sheets.kind import kind_of
from curvelab.sheets.levels import image_levels
from curvelab.sheets.pdfium import opened_page
from curvelab.sheets.source import Source

POINTS_PER_INCH = 72.0


def render_page(name: str, data: bytes, page: int = 1, dots_per_inch: float = 200.0) -> Pixels:
    """A picture of one page of a PDF, coarser than asked where the page is too large.

    Raises
    ------
    SheetError
        The content is no PDF, is damaged or has no such page.
    """
    if kind_of(data) != "pdf":
        raise SheetError(f"'{name}' is not a PDF, so there is nothing to render", "", "Show the file itself")
    source = Source(name=name, data=data, sha256=hashlib.sha256(data).hexdigest(), page=page)
    with opened_page(source) as (handle, _):
        width, height = handle.get_size()
        scale = min(dots_per_inch / POINTS_PER_INCH, math.sqrt(limits.RENDERED_PIXELS / (width * height)))
        try:
            grey, colour = image_levels(handle.render(scale=scale).to_pil())
        except pdfium.PdfiumError as error:
            raise source.damaged("PDF") from error
    rows, columns = grey.shape
    across, down = width / columns, height / rows
    return Pixels(grey=grey, colour=colour, to_place=from_six((across, 0, 0, down, across / 2, down / 2)))
