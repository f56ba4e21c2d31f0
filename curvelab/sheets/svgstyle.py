"""Properties of SVG elements: attributes, style sheets of simple selectors, style attributes, and what is inherited."""

import re
from collections.abc import Mapping
from xml.etree.ElementTree import Element

from curvelab.sheets.svgnumbers import length

INITIAL: Mapping[str, str] = {
    "fill": "black",
    "stroke": "none",
    "stroke-width": "1",
    "stroke-dasharray": "none",
    "fill-opacity": "1",
    "stroke-opacity": "1",
    "color": "black",
    "visibility": "visible",
    "font-size": "16",
    "text-anchor": "start",
}
"""Inherited properties and their first values (SVG 2, property index)."""

DEFAULT_SIZE = 16.0

OWN = ("display", "opacity", "clip-path", "vector-effect", "baseline-shift", "transform")
"""Properties that hold for their element alone."""

COMMENT = re.compile(r"/\*.*?\*/", re.DOTALL)
RULE = re.compile(r"([^{}@]+)\{([^{}]*)\}")
SELECTOR = re.compile(r"\*|[\w-]+|[\w-]*[.#][\w-]+")
FONT_SIZE = re.compile(r"(?:^|\s)(\d*\.?\d+(?:px|pt|pc|mm|cm|in|em|%))(?:\s|/)")
CLASSES_AT_MOST = 16

Declarations = dict[str, str]
Rules = Mapping[str, Declarations]
"""Selector (``*``, ``tag``, ``.class``, ``tag.class`` or ``#id``) -> what it declares."""


def local_name(element: Element) -> str:
    """The element's name without its namespace; empty for comments and instructions."""
    return element.tag.rpartition("}")[2] if isinstance(element.tag, str) else ""


def declarations(text: str) -> Declarations:
    """``a: b; c: d`` as a mapping of the properties that matter here."""
    found: Declarations = {}
    for part in text.split(";"):
        name, _, value = (piece.strip() for piece in part.partition(":"))
        name = name.lower()
        if name == "font" and (size := FONT_SIZE.search(value)):
            found["font-size"] = size[1]
        elif name in INITIAL or name in OWN:
            found[name] = value.replace("!important", "").strip()
    return found


def style_rules(root: Element) -> Rules:
    """Rules of all style elements; selectors of several steps are left out."""
    rules: dict[str, Declarations] = {}
    for element in root.iter():
        if local_name(element) != "style" or not element.text:
            continue
        for selectors, body in RULE.findall(COMMENT.sub("", element.text)):
            for selector in map(str.strip, selectors.split(",")):
                if SELECTOR.fullmatch(selector):
                    rules.setdefault(selector, {}).update(declarations(body))
    return rules


def style_of(element: Element, inherited: Mapping[str, str], rules: Rules) -> Declarations:
    """Properties of an element, by the cascade: attributes, then rules, then its own style attribute."""
    tag, classes = local_name(element), (element.get("class") or "").split()[:CLASSES_AT_MOST]
    selectors = ["*", tag, *(f".{name}" for name in classes), *(f"{tag}.{name}" for name in classes)]
    own = {name: value for name, value in element.attrib.items() if name in INITIAL or name in OWN}
    for selector in [*selectors, f"#{element.get('id')}"]:
        own.update(rules.get(selector, {}))
    if "style" in element.attrib:
        own.update(declarations(element.attrib["style"]))
    kept = {name: value for name, value in inherited.items() if name in INITIAL}
    kept.update({name: value for name, value in own.items() if value != "inherit"})
    if "font-size" in own:
        around = length(inherited["font-size"]) or DEFAULT_SIZE
        kept["font-size"] = repr(length(own["font-size"], em=around, whole=around) or around)
    return kept
