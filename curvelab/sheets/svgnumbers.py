"""Numbers, lengths, transforms and colours as SVG writes them."""

import math
import re

from PIL import ImageColor

from curvelab.records.arrays import Floats
from curvelab.sheets.affine import IDENTITY, compose, from_six
from curvelab.sheets.strokes import Colour

NUMBER = re.compile(r"[-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?")
LENGTH = re.compile(rf"\s*({NUMBER.pattern})\s*([a-z]*|%)\s*$", re.IGNORECASE)
TRANSFORM = re.compile(r"(matrix|translate|scale|rotate|skewX|skewY)\s*\(([^)]*)\)")

UNITS_PX = {"": 1.0, "px": 1.0, "pt": 96 / 72, "pc": 16.0, "mm": 96 / 25.4, "cm": 96 / 2.54, "in": 96.0, "q": 24 / 25.4}
"""CSS absolute lengths in user units (CSS Values 3, section 6.2)."""

PATTERN_GREY: Colour = (128, 128, 128)
"""A gradient or pattern has no single colour."""


def numbers(text: str) -> list[float]:
    """All numbers of a list."""
    return [float(number) for number in NUMBER.findall(text)]


def length(text: str | None, em: float = 16.0, whole: float = 100.0) -> float | None:
    """A length in user units; None where there is none. ``em`` is the font size, ``whole`` what 100 % is."""
    match = LENGTH.match(text or "")
    if match is None:
        return None
    value, unit = float(match[1]), match[2].lower()
    if not math.isfinite(value):
        return None
    relative = {"em": em, "rem": 16.0, "ex": em / 2, "%": whole / 100}
    factor = UNITS_PX.get(unit, relative.get(unit))
    return None if factor is None else value * factor


def transform(text: str | None) -> Floats:
    """The map of a transform list; what is not understood is left out."""
    result = IDENTITY
    for name, inside in TRANSFORM.findall(text or ""):
        step = _step(name, numbers(inside))
        if step is not None:
            result = compose(result, step)
    return result


def _step(name: str, values: list[float]) -> Floats | None:
    match name, values:
        case "matrix", [_, _, _, _, _, _]:
            return from_six(values)
        case "translate", [x, *rest]:
            return from_six((1, 0, 0, 1, x, rest[0] if rest else 0))
        case "scale", [x, *rest]:
            return from_six((x, 0, 0, rest[0] if rest else x, 0, 0))
        case "rotate", [angle, *rest]:
            return _rotation(math.radians(angle), (rest[0], rest[1]) if len(rest) == 2 else (0.0, 0.0))
        case "skewX" | "skewY", [angle]:
            slope = math.tan(math.radians(angle))
            return from_six((1, 0, slope, 1, 0, 0) if name == "skewX" else (1, slope, 0, 1, 0, 0))
    return None


def _rotation(angle: float, about: tuple[float, float]) -> Floats:
    (x, y), cos, sin = about, math.cos(angle), math.sin(angle)
    return from_six((cos, sin, -sin, cos, x - cos * x + sin * y, y - sin * x - cos * y))


def colour(text: str, current: str = "black") -> Colour | None:
    """Red, green, blue; None where nothing is painted."""
    text = text.strip()
    if text.lower() == "currentcolor":
        text = current
    if text.startswith("url("):
        fallback = text.partition(")")[2].strip()
        return colour(fallback) if fallback else PATTERN_GREY
    if text in ("none", "transparent", ""):
        return None
    try:
        red, green, blue, *alpha = ImageColor.getrgb(text)
    except ValueError:
        return 0, 0, 0
    return None if alpha and alpha[0] == 0 else (red, green, blue)
