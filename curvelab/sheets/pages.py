"""How many pages a file has, without reading them."""

import os

from curvelab.sheets.kind import kind_of
from curvelab.sheets.open import read_file
from curvelab.sheets.pdfium import document_pages
from curvelab.sheets.raster import image_frames
from curvelab.sheets.source import Source


def page_count(path: str | os.PathLike[str]) -> int:
    """Pages of a PDF, images of a TIFF; 1 of any other sheet.

    Raises
    ------
    SheetError
        The file is missing or too large, or a PDF or image that is damaged.
    """
    name = os.fspath(path)
    source = Source(name=name, data=read_file(name), sha256="", page=1)
    kind = kind_of(source.data)
    if kind == "pdf":
        return document_pages(source)
    return image_frames(source) if kind == "raster" else 1
