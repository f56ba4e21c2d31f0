"""A document as one HTML file with everything in it: pictures inline, style inline, nothing fetched."""

import re
from base64 import b64encode
from functools import singledispatch
from html import escape
from io import BytesIO
from string import Template
from typing import Any

from matplotlib import rc_context
from matplotlib.figure import Figure

from curvelab.plots.ink import STYLE
from curvelab.plots.save import METADATA
from curvelab.reports.document import Block, Document, Facts, Paragraph, Plate, Row, Section, Signatures, Table, typeset
from curvelab.reports.html_page import PAGE

DRAWN: dict[Any, Any] = {"svg.fonttype": "path"}
"""Letters of pictures as outlines: they stand as drawn whatever fonts the reader has."""
DPI = 200
_NAMED = re.compile(r'(\bid="|url\(#|href="#)')


def html_text(document: Document) -> str:
    """The document as HTML."""
    with rc_context(STYLE), rc_context(DRAWN):
        sections = "\n".join(_section(number, section) for number, section in enumerate(document.sections, start=1))
    said = {"title": document.title, "name": document.name, "subtitle": document.subtitle, "program": document.program}
    words = {name: escape(typeset(text)) for name, text in said.items()}
    return Template(PAGE).substitute(words, sections=sections)


def _section(number: int, section: Section) -> str:
    blocks = "\n".join(_block(block, f"s{number}b{place}") for place, block in enumerate(section.blocks))
    look = ' class="plates"' if isinstance(section.blocks[0], Plate) else ""
    return f"<section{look}>\n<h2><span>{number}</span> {escape(section.heading)}</h2>\n{blocks}\n</section>"


def _words(text: str) -> str:
    return escape(typeset(text))


@singledispatch
def _block(block: Block, name: str) -> str:
    raise NotImplementedError(type(block))


@_block.register
def _(block: Paragraph, name: str) -> str:  # noqa: ARG001 - one signature for all blocks
    return f'<p class="{block.look}">{_words(block.words)}</p>'


@_block.register
def _(block: Facts, name: str) -> str:  # noqa: ARG001
    pairs = "".join(f"<div><dt>{_words(label)}</dt><dd>{_words(value)}</dd></div>" for label, value in block.pairs)
    return f"<dl>{pairs}</dl>"


@_block.register
def _(block: Table, name: str) -> str:  # noqa: ARG001
    whole = sum(column.share for column in block.columns)
    widths = "".join(f'<col style="width:{100 * column.share / whole:.2f}%">' for column in block.columns)
    heads = "".join(f'<th scope="col" class="{column.side}">{_words(column.heading)}</th>' for column in block.columns)
    rows = "\n".join(_row(block, row) for row in block.rows)
    return f"<table><colgroup>{widths}</colgroup><thead><tr>{heads}</tr></thead>\n<tbody>\n{rows}\n</tbody></table>"


def _row(table: Table, row: Row) -> str:
    cells = "".join(
        f'<td class="{column.side}">{_words(words)}</td>'
        for column, words in zip(table.columns, row.cells, strict=True)
    )
    beneath = (
        f'<tr class="beneath"><td colspan="{len(row.cells)}">{_words(row.beneath)}</td></tr>' if row.beneath else ""
    )
    return f'<tr class="{row.look}">{cells}</tr>{beneath}'


@_block.register
def _(block: Plate, name: str) -> str:
    figure, caption = block.make((0.0, 0.0)), _words(block.caption)
    picture = _pixels(figure, caption) if block.hatched else _strokes(figure, caption, name)
    return f"<figure>{picture}<figcaption>{caption}</figcaption></figure>"


def _drawn(figure: Figure, ending: str) -> bytes:
    """The figure without the paper about it."""
    content = BytesIO()
    figure.savefig(content, format=ending, dpi=DPI, metadata=METADATA[ending], bbox_inches="tight", pad_inches=0.04)
    return content.getvalue()


def _pixels(figure: Figure, caption: str) -> str:
    return f'<img alt="{caption}" src="data:image/png;base64,{b64encode(_drawn(figure, "png")).decode("ascii")}">'


def _strokes(figure: Figure, caption: str, name: str) -> str:
    svg = _drawn(figure, "svg").decode("utf-8")
    # Names in it hold within one picture; beside others in one page they need to differ.
    named = _NAMED.sub(rf"\g<1>{name}-", svg[svg.index("<svg") :])
    return named.replace("<svg", f'<svg role="img" aria-label="{caption}"', 1)


@_block.register
def _(block: Signatures, name: str) -> str:  # noqa: ARG001
    rows = "".join(
        f"<tr><th>{escape(role)}</th><td>name</td><td>date</td><td>signature</td></tr>" for role in block.roles
    )
    return f'<table class="signatures">{rows}</table>'
