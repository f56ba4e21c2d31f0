"""The XML of an SVG file, parsed without following any reference out of it and within limits."""

from typing import Any
from xml.etree import ElementTree
from xml.etree.ElementTree import Element

from curvelab.errors import SheetError
from curvelab.sheets import limits
from curvelab.sheets.source import Source

SVG = "{http://www.w3.org/2000/svg}svg"


class _Limited(ElementTree.TreeBuilder):
    """Builds the tree while it stays within the limits."""

    def __init__(self, source: Source) -> None:
        super().__init__()
        self._source = source
        self._elements = 0
        self._depth = 0

    def start(self, tag: Any, attrs: Any, /) -> Element:
        self._elements += 1
        self._depth += 1
        if self._elements > limits.ELEMENTS:
            raise self._source.over("elements", limits.ELEMENTS)
        if self._depth > limits.NESTING:
            raise self._source.over("levels of nested elements", limits.NESTING)
        return super().start(tag, attrs)

    def end(self, tag: Any, /) -> Element:
        self._depth -= 1
        return super().end(tag)


def svg_root(source: Source) -> Element:
    """The root element.

    Entities are expanded by the standard library's parser, which refuses those that multiply; external ones are never
    fetched.

    Raises
    ------
    SheetError
        The text is no well-formed XML, its root is not SVG, or it is over the limits.
    """
    if len(source.data) > limits.SVG_BYTES:
        raise source.over("bytes for an SVG file", limits.SVG_BYTES)
    parser = ElementTree.XMLParser(target=_Limited(source))
    try:
        parser.feed(source.data)
        root: Element = parser.close()
    except SheetError:
        raise
    except (ElementTree.ParseError, ValueError, LookupError) as error:
        raise SheetError(
            f"'{source.name}' is not well-formed SVG: {error}", "", "Open it in a viewer and save it again"
        ) from error
    if root.tag not in (SVG, "svg"):
        raise SheetError(f"'{source.name}' is XML, but no SVG", "The root element is expected to be 'svg'")
    return root
