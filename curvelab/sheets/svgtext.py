"""Text elements of SVG become characters with places; widths are estimated, for the file does not carry them."""

import math
from collections.abc import Mapping
from dataclasses import dataclass, field
from xml.etree.ElementTree import Element

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.sheets.affine import apply, scale_of
from curvelab.sheets.characters import Character
from curvelab.sheets.svgnumbers import length, numbers
from curvelab.sheets.svgstyle import Rules, local_name, style_of

NARROW, WIDE = " .,:;'|!ijlIft()[]", "mwMW%@—"
WIDTHS = (0.28, 0.56, 0.85)
"""Width of a narrow, common and wide character as a share of the font size, about as in common sans-serif fonts."""

ASCENT, DESCENT = 0.72, 0.02
"""Height of figures and capitals above and below the baseline as a share of the font size."""

SHIFTS = {"super": 0.4, "sub": -0.2, "baseline": 0.0}


@dataclass(slots=True)
class _Glyph:
    text: str
    size: float
    x: float
    y: float
    starts: bool
    anchor: str


@dataclass(slots=True)
class _Line:
    """Where the next character goes, and what was placed so far."""

    x: float = 0.0
    y: float = 0.0
    placed: list[_Glyph] = field(default_factory=list)

    def put(self, text: str, size: float, raised: float, style: Mapping[str, str], lists: "_Lists") -> None:
        for character in text:
            starts = lists.move(self)
            self.placed.append(_Glyph(character, size, self.x, self.y - raised, starts, style["text-anchor"]))
            self.x += advance(character) * size


@dataclass(slots=True)
class _Lists:
    """The x, y, dx and dy of one element, used up character by character."""

    x: list[float]
    y: list[float]
    dx: list[float]
    dy: list[float]

    def move(self, line: _Line) -> bool:
        """Place the next character; whether a new anchored chunk starts there."""
        starts = bool(self.x or self.y)
        line.x = self.x.pop(0) if self.x else line.x
        line.y = self.y.pop(0) if self.y else line.y
        line.x += self.dx.pop(0) if self.dx else 0.0
        line.y += self.dy.pop(0) if self.dy else 0.0
        return starts


def advance(character: str) -> float:
    """Estimated width of a character as a share of the font size."""
    return WIDTHS[0] if character in NARROW else WIDTHS[2] if character in WIDE else WIDTHS[1]


def characters_of(element: Element, style: Mapping[str, str], rules: Rules, to_place: Floats) -> list[Character]:
    """Characters of one text element, its spans included."""
    line = _Line()
    _place(element, style, rules, line)
    glyphs = _anchored(line.placed)
    scale, turned_deg = scale_of(to_place), math.degrees(math.atan2(-to_place[1, 0], to_place[0, 0]))
    return [_character(glyph, to_place, scale, turned_deg) for glyph in glyphs]


def _place(element: Element, style: Mapping[str, str], rules: Rules, line: _Line) -> None:
    size = length(style["font-size"]) or 0.0
    lists = _Lists(*(_lengths(element.get(name), size) for name in ("x", "y", "dx", "dy")))
    shift = style.get("baseline-shift", "0")
    raised = SHIFTS[shift] * size if shift in SHIFTS else length(shift, em=size, whole=size) or 0.0
    line.put(_collapsed(element.text, line), size, raised, style, lists)
    for child in element:
        if local_name(child) in ("tspan", "textPath", "a"):
            inner = style_of(child, style, rules)
            if inner.get("display") != "none":
                _place(child, inner, rules, line)
        line.put(_collapsed(child.tail, line), size, raised, style, lists)


def _lengths(text: str | None, em: float) -> list[float]:
    parts = (text or "").replace(",", " ").split()
    found = [length(part, em=em) for part in parts]
    return [value for value in found if value is not None] if None not in found else numbers(text or "")


def _collapsed(text: str | None, line: _Line) -> str:
    """Text with white space drawn together, none at the beginning of the element."""
    if not text:
        return ""
    words = " ".join(text.split())
    before = " " if text[0].isspace() and line.placed and not line.placed[-1].text.isspace() else ""
    after = " " if words and text[-1].isspace() else ""
    return before + words + after


def _anchored(glyphs: list[_Glyph]) -> list[_Glyph]:
    """Chunks moved so that their anchor is at their start, middle or end."""
    chunks: list[list[_Glyph]] = []
    for glyph in glyphs:
        if glyph.starts or not chunks:
            chunks.append([])
        chunks[-1].append(glyph)
    for chunk in chunks:
        while len(chunk) > 1 and chunk[-1].text.isspace():
            chunk.pop()
        width = chunk[-1].x + advance(chunk[-1].text) * chunk[-1].size - chunk[0].x
        moved = {"middle": width / 2, "end": width}.get(chunk[0].anchor, 0.0)
        for glyph in chunk:
            glyph.x -= moved
    return [glyph for chunk in chunks for glyph in chunk]


def _character(glyph: _Glyph, to_place: Floats, scale: float, turned_deg: float) -> Character:
    right, top = glyph.x + advance(glyph.text) * glyph.size, glyph.y - ASCENT * glyph.size
    bottom = glyph.y + DESCENT * glyph.size
    corners = np.array([[glyph.x, top], [right, top], [right, bottom], [glyph.x, bottom], [glyph.x, glyph.y]])
    places = apply(to_place, corners)
    (x0, y0), (x1, y1) = places[:4].min(axis=0), places[:4].max(axis=0)
    return Character(
        text=glyph.text,
        origin=(float(places[4, 0]), float(places[4, 1])),
        box=(float(x0), float(y0), float(x1), float(y1)),
        size=glyph.size * scale,
        turned_deg=turned_deg,
    )
