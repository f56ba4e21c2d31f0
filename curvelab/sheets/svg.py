"""One SVG file: its exact strokes and words."""

from curvelab.errors import SheetError
from curvelab.records.sheet import Sheet
from curvelab.sheets.source import Source


def svg_page(source: Source) -> Sheet:
    """The page of an SVG file."""
    raise SheetError(f"'{source.name}' is an SVG file, which is not read yet", "", "Save it as PDF")
