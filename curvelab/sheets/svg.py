"""One SVG file: its exact strokes and words, in user units from the top left of the view box."""

from xml.etree.ElementTree import Element

from curvelab.errors import SheetError
from curvelab.records.arrays import Floats
from curvelab.records.sheet import Sheet
from curvelab.sheets.affine import from_six
from curvelab.sheets.characters import words_of
from curvelab.sheets.source import Source
from curvelab.sheets.svgnumbers import length, numbers
from curvelab.sheets.svgstyle import style_rules
from curvelab.sheets.svgtree import svg_root
from curvelab.sheets.svgwalk import SvgWalk


def svg_page(source: Source) -> Sheet:
    """The page of an SVG file.

    Raises
    ------
    SheetError
        It is not well-formed SVG, has no size, or is over the limits.
    """
    source.require_page(1)
    root = svg_root(source)
    to_place, width, height = _view(root, source)
    walk = SvgWalk(root, style_rules(root), source)
    walk.visit_children(root, to_place)
    return Sheet(
        file=source.name,
        sha256=source.sha256,
        page=source.page,
        pages=1,
        width=width,
        height=height,
        unit="px",
        pixels=None,
        strokes=tuple(walk.strokes),
        words=tuple(word for characters in walk.texts for word in words_of(characters)),
    )


def _view(root: Element, source: Source) -> tuple[Floats, float, float]:
    """Map from user units to places, and the size of the view box."""
    box = numbers(root.get("viewBox", ""))
    if len(box) == 4 and box[2] > 0 and box[3] > 0:
        return from_six((1, 0, 0, 1, -box[0], -box[1])), box[2], box[3]
    width, height = length(root.get("width")), length(root.get("height"))
    if not width or not height or width < 0 or height < 0:
        raise SheetError(f"'{source.name}' has no size", "An SVG file needs a viewBox, or a width and height")
    return from_six((1, 0, 0, 1, 0, 0)), width, height
