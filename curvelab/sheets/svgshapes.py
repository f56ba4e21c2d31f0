"""Basic shapes of SVG become polylines (SVG 2, chapter 10)."""

import math
from xml.etree.ElementTree import Element

import numpy as np

from curvelab.sheets import svgpath
from curvelab.sheets.ellipse import Ellipse
from curvelab.sheets.strokes import Polyline
from curvelab.sheets.svgnumbers import length, numbers
from curvelab.sheets.svgstyle import local_name

SHAPES = ("path", "line", "polyline", "polygon", "rect", "circle", "ellipse")


def shape_polylines(element: Element, tolerance: float) -> list[Polyline]:
    """Polylines of a shape in its own user units, curves within ``tolerance``."""
    match local_name(element):
        case "path":
            return svgpath.polylines(element.get("d", ""), tolerance)
        case "line":
            ends = [[_number(element, "x1"), _number(element, "y1")], [_number(element, "x2"), _number(element, "y2")]]
            return [(np.array(ends), False)]
        case "polyline":
            return _corners(element, closed=False)
        case "polygon":
            return _corners(element, closed=True)
        case "rect":
            return _rectangle(element, tolerance)
        case _:
            return _round(element, tolerance)


def _number(element: Element, name: str) -> float:
    return length(element.get(name)) or 0.0


def _corners(element: Element, closed: bool) -> list[Polyline]:
    values = numbers(element.get("points", ""))
    points = np.reshape(values[: len(values) // 2 * 2], (-1, 2))
    if len(points) < 2:
        return []
    return [(np.vstack([points, points[:1]]) if closed else points, closed)]


def _rectangle(element: Element, tolerance: float) -> list[Polyline]:
    x, y, width, height = (_number(element, name) for name in ("x", "y", "width", "height"))
    if width <= 0 or height <= 0:
        return []
    rx, ry = length(element.get("rx")), length(element.get("ry"))
    rx, ry = rx if rx is not None else ry or 0.0, ry if ry is not None else rx or 0.0
    rx, ry = min(max(rx, 0.0), width / 2), min(max(ry, 0.0), height / 2)
    right, bottom = x + width, y + height
    if rx == 0 or ry == 0:
        return [(np.array([[x, y], [right, y], [right, bottom], [x, bottom], [x, y]]), True)]
    arc = f"A{rx!r} {ry!r} 0 0 1"
    data = (
        f"M{x + rx!r} {y!r}H{right - rx!r}{arc} {right!r} {y + ry!r}V{bottom - ry!r}{arc} {right - rx!r} {bottom!r}"
        f"H{x + rx!r}{arc} {x!r} {bottom - ry!r}V{y + ry!r}{arc} {x + rx!r} {y!r}Z"
    )
    return svgpath.polylines(data, tolerance)


def _round(element: Element, tolerance: float) -> list[Polyline]:
    radius = _number(element, "r")
    radii = (radius, radius) if local_name(element) == "circle" else (_number(element, "rx"), _number(element, "ry"))
    if min(radii) <= 0:
        return []
    ellipse = Ellipse(centre=(_number(element, "cx"), _number(element, "cy")), radii=radii)
    points = ellipse.points(0.0, math.tau, tolerance)
    points[-1] = points[0]
    return [(points, True)]
