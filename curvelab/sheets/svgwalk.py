"""All painted elements of an SVG tree, uses of others followed, with styles, maps and clips passed down."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from xml.etree.ElementTree import Element

import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Stroke
from curvelab.sheets import limits
from curvelab.sheets.affine import apply, compose, from_six, scale_of
from curvelab.sheets.characters import Character
from curvelab.sheets.clip import Clip, clip_of
from curvelab.sheets.source import Source
from curvelab.sheets.strokes import FLATNESS, Paint, PointCount, Setting, strokes_from
from curvelab.sheets.svgnumbers import colour, length, numbers, transform
from curvelab.sheets.svgshapes import SHAPES, shape_polylines
from curvelab.sheets.svgstyle import INITIAL, Rules, local_name, style_of
from curvelab.sheets.svgtext import characters_of

GROUPS = ("g", "a", "svg", "switch")
LINK = "{http://www.w3.org/1999/xlink}href"


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _State:
    """What is passed down the tree."""

    to_place: Floats
    style: Mapping[str, str]
    clips: tuple[Clip, ...]
    depth: int


class SvgWalk:
    """One walk over a tree; gathers ``strokes``, and in ``texts`` the characters of each text element."""

    def __init__(self, root: Element, rules: Rules, source: Source) -> None:
        self.strokes: list[Stroke] = []
        self.texts: list[list[Character]] = []
        self._rules = rules
        self._source = source
        self._named = {name: element for element in root.iter() if (name := element.get("id"))}
        self._seen = 0
        self._points = PointCount()
        self._paths = 0

    def visit_children(self, root: Element, to_place: Floats) -> None:
        """Walk the tree below the root.

        Raises
        ------
        SheetError
            More elements, strokes or points, or deeper uses of uses, than the limits allow.
        """
        style = style_of(root, INITIAL, self._rules)
        self._children(root, _State(to_place=to_place, style=style, clips=(), depth=0))

    def _children(self, element: Element, state: _State) -> None:
        if state.depth > limits.NESTING:
            raise self._source.over("levels of nested elements", limits.NESTING)
        for child in element:
            self._visit(child, replace(state, depth=state.depth + 1))

    def _visit(self, element: Element, around: _State) -> None:
        self._seen += 1
        if self._seen > limits.ELEMENTS:
            raise self._source.over("elements", limits.ELEMENTS)
        name = local_name(element)
        if name not in SHAPES and name not in GROUPS and name not in ("use", "text"):
            return
        style = style_of(element, around.style, self._rules)
        if style.get("display") == "none" or style.get("opacity") == "0":
            return
        to_place = compose(around.to_place, transform(style.get("transform")))
        state = replace(around, style=style, to_place=to_place)
        state = replace(state, clips=state.clips + self._clips(style, to_place))
        if name == "use":
            self._use(element, state)
        elif name in GROUPS:
            self._children(element, _nested(element, state) if name == "svg" else state)
        elif style["visibility"] == "visible":
            if name == "text":
                self.texts.append(characters_of(element, style, self._rules, to_place))
            else:
                self._shape(element, state)

    def _use(self, element: Element, state: _State) -> None:
        """What another element of the same file draws; references out of the file are not followed."""
        target = self._named.get(_link(element).removeprefix("#"))
        if target is None or not _link(element).startswith("#") or state.depth > limits.NESTING:
            return
        x, y = length(element.get("x")) or 0.0, length(element.get("y")) or 0.0
        moved = replace(state, to_place=compose(state.to_place, from_six((1, 0, 0, 1, x, y))), depth=state.depth + 1)
        if local_name(target) == "symbol":
            self._children(target, _nested(target, moved))
        else:
            self._visit(target, moved)

    def _shape(self, element: Element, state: _State) -> None:
        paint = _paint(state)
        if paint.fill is None and paint.line is None:
            return
        self._paths += 1
        setting = Setting(to_place=state.to_place, clips=state.clips, path=self._paths)
        polylines = shape_polylines(element, setting.tolerance)
        self._points.add(sum(len(points) for points, _ in polylines))
        self.strokes += strokes_from(polylines, paint, setting)
        if len(self.strokes) > limits.STROKES:
            raise self._source.over("strokes", limits.STROKES)

    def _clips(self, style: Mapping[str, str], to_place: Floats) -> tuple[Clip, ...]:
        name = style.get("clip-path", "none").strip("url()\"' ").removeprefix("#")
        area = self._named.get(name)
        if area is None or local_name(area) != "clipPath" or area.get("clipPathUnits") == "objectBoundingBox":
            return ()
        inner = compose(to_place, transform(area.get("transform")))
        polygons: list[Floats] = []
        for child in area:
            shape = self._named.get(_link(child)[1:]) if local_name(child) == "use" else child
            if shape is None or local_name(shape) not in SHAPES:
                continue
            own = compose(inner, transform(shape.get("transform")))
            scale = scale_of(own)
            polylines = shape_polylines(shape, FLATNESS / scale if scale > 0 else FLATNESS)
            polygons += [apply(own, points) for points, _ in polylines]
        return (clip_of(polygons),) if polygons else ()


def _link(element: Element) -> str:
    return element.get("href") or element.get(LINK) or ""


def _nested(element: Element, state: _State) -> _State:
    """The state inside an inner view: moved to its place and scaled to its box."""
    x, y = length(element.get("x")) or 0.0, length(element.get("y")) or 0.0
    to_place = compose(state.to_place, from_six((1, 0, 0, 1, x, y)))
    box = numbers(element.get("viewBox", ""))
    width, height = length(element.get("width")), length(element.get("height"))
    if len(box) == 4 and box[2] > 0 and box[3] > 0 and width and height:
        scale = min(width / box[2], height / box[3])
        left, top = (width - scale * box[2]) / 2, (height - scale * box[3]) / 2
        to_place = compose(to_place, from_six((scale, 0, 0, scale, left - scale * box[0], top - scale * box[1])))
    return replace(state, to_place=to_place)


def _paint(state: _State) -> Paint:
    style, scale = state.style, scale_of(state.to_place)
    width = length(style["stroke-width"])
    width = 1.0 if width is None else width
    dash = tuple(numbers(style["stroke-dasharray"]))
    if style.get("vector-effect") == "non-scaling-stroke" and scale > 0:
        width, dash = width / scale, tuple(part / scale for part in dash)
    if not np.any(dash):
        dash = ()
    return Paint(
        fill=colour(style["fill"], style["color"]) if style["fill-opacity"] != "0" else None,
        line=colour(style["stroke"], style["color"]) if style["stroke-opacity"] != "0" and width > 0 else None,
        width=width,
        dash=dash * 2 if len(dash) % 2 else dash,
    )
