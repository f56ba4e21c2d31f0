"""A document as PDF: A4, without dates, so that the same input gives the same bytes."""

from functools import singledispatch
from io import BytesIO

from matplotlib import rc_context
from matplotlib.backends.backend_pdf import PdfPages

from curvelab.plots.ink import GRAPHITE, MAJOR, MINOR, QUIET, STYLE, WARM
from curvelab.plots.save import METADATA
from curvelab.reports.document import (
    Block,
    Document,
    Facts,
    Look,
    Paragraph,
    Plate,
    Section,
    Signatures,
    Table,
    typeset,
)
from curvelab.reports.pages import BOTTOM, HEIGHT, LEFT, RIGHT, ROOM, TOP, WIDTH, Pages
from curvelab.reports.text import line_mm, width_mm, wrapped

TITLE, SUBTITLE, HEADING, BODY, CELL, BENEATH = 17.0, 9.5, 10.5, 8.2, 7.3, 6.6
"""Sizes of letters in points."""
GAP, PAD = 3.2, 1.1
"""Between blocks, and above and beneath the words of a row, in mm."""
KEEP = 34.0
"""A heading needs so much room beneath it, in mm."""
BETWEEN = 4.0
"""Between columns, in mm."""
SIGNED = 12.0
"""Height in mm of a line to sign on."""
WHOLE, AFTER = 8, 14.0
"""A paragraph of up to so many lines is kept whole, with so much room in mm for the beginning of what follows."""
LABEL_SHARE = 0.38
"""Of a column of facts, for their names."""
COLOURS: dict[Look, str] = {"plain": GRAPHITE, "open": WARM, "quiet": QUIET}
PLATE_FREE = ((TOP + 6.0) / HEIGHT, (BOTTOM + 9.5) / HEIGHT)


def pdf_bytes(document: Document) -> bytes:
    """The document as a PDF file."""
    content = BytesIO()
    with rc_context(STYLE):
        pages = Pages()
        pages.turn()
        _set_title(pages, document)
        for number, section in enumerate(document.sections, start=1):
            _set_section(pages, number, section)
        pages.finish(document)
        metadata = {**METADATA["pdf"], "Title": f"{document.title} {document.name}"}
        with PdfPages(content, metadata=metadata) as file:
            for figure in pages.figures:
                file.savefig(figure)
    return content.getvalue()


def _set_title(pages: Pages, document: Document) -> None:
    for line in wrapped(document.name, ROOM, TITLE, bold=True):
        pages.y += line_mm(TITLE)
        pages.write(LEFT, pages.y - 2.0, line, TITLE, bold=True)
    for line in wrapped(typeset(document.subtitle), ROOM, SUBTITLE):
        pages.y += line_mm(SUBTITLE)
        pages.write(LEFT, pages.y - 1.5, line, SUBTITLE, colour=QUIET)
    pages.y += GAP


def _set_section(pages: Pages, number: int, section: Section) -> None:
    heading = f"{number}   {section.heading}"
    if isinstance(section.blocks[0], Plate):
        for place, block in enumerate(section.blocks):
            _set_block(block, pages)
            if place == 0:
                pages.write(LEFT, TOP, heading, HEADING, bold=True)
        return
    pages.need(KEEP)
    pages.y += GAP + line_mm(HEADING)
    pages.write(LEFT, pages.y, heading, HEADING, bold=True)
    pages.y += 2.6
    for block in section.blocks:
        _set_block(block, pages)


@singledispatch
def _set_block(block: Block, pages: Pages) -> None:
    raise NotImplementedError(type(block))


@_set_block.register
def _(block: Paragraph, pages: Pages) -> None:
    lines = wrapped(typeset(block.words), ROOM, BODY)
    pages.need(line_mm(BODY) * min(len(lines), WHOLE) + AFTER)
    for line in lines:
        pages.need(line_mm(BODY))
        pages.y += line_mm(BODY)
        pages.write(LEFT, pages.y - 1.0, line, BODY, colour=COLOURS[block.look])
    pages.y += 0.5 * GAP


@_set_block.register
def _(block: Facts, pages: Pages) -> None:
    column = ROOM / 2
    label, room = column * LABEL_SHARE, column * (1 - LABEL_SHARE) - 4.0
    half = -(-len(block.pairs) // 2)
    for left, right in zip(block.pairs[:half], (*block.pairs[half:], ("", "")), strict=False):
        cells = [wrapped(typeset(value), room, BODY) for _, value in (left, right)]
        height = line_mm(BODY) * max(map(len, cells)) + 0.7
        pages.need(height)
        for index, ((name, _), lines) in enumerate(zip((left, right), cells, strict=True)):
            x = LEFT + index * column
            pages.write(x, pages.y + line_mm(BODY) - 1.0, name, BODY, colour=QUIET)
            for place, line in enumerate(lines, start=1):
                pages.write(x + label, pages.y + place * line_mm(BODY) - 1.0, line, BODY)
        pages.y += height
    pages.y += 0.5 * GAP


@_set_block.register
def _(block: Table, pages: Pages) -> None:
    _set_headings(block, pages)
    for row in block.rows:
        cells = [_cell(block, index, words, bold=False) for index, words in enumerate(row.cells)]
        beneath = wrapped(typeset(row.beneath), ROOM - 4.0, BENEATH) if row.beneath else []
        height = line_mm(CELL) * max(map(len, cells)) + line_mm(BENEATH) * len(beneath) + 2 * PAD
        if pages.need(height):
            _set_headings(block, pages)
        pages.rule(pages.y, MINOR)
        _write_cells(pages, block, cells, COLOURS[row.look], bold=False)
        below = pages.y + PAD + line_mm(CELL) * max(map(len, cells))
        for place, line in enumerate(beneath, start=1):
            pages.write(LEFT + 4.0, below + place * line_mm(BENEATH) - 0.8, line, BENEATH, colour=QUIET)
        pages.y += height
    pages.rule(pages.y, MAJOR)
    pages.y += GAP


def _set_headings(table: Table, pages: Pages) -> None:
    cells = [_cell(table, index, column.heading, bold=True) for index, column in enumerate(table.columns)]
    height = line_mm(CELL) * max(map(len, cells)) + 2 * PAD
    pages.need(height + 2 * line_mm(CELL))
    _write_cells(pages, table, cells, GRAPHITE, bold=True)
    pages.y += height
    pages.rule(pages.y, MAJOR, 0.8)


def _room(table: Table, index: int) -> float:
    whole = sum(column.share for column in table.columns)
    return (ROOM - BETWEEN * (len(table.columns) - 1)) * table.columns[index].share / whole


def _cell(table: Table, index: int, words: str, *, bold: bool) -> list[str]:
    return wrapped(typeset(words), _room(table, index), CELL, bold)


def _write_cells(pages: Pages, table: Table, cells: list[list[str]], colour: str, *, bold: bool) -> None:
    x = LEFT
    for index, (column, lines) in enumerate(zip(table.columns, cells, strict=True)):
        room = _room(table, index)
        for place, line in enumerate(lines, start=1):
            start = x + room - width_mm(line, CELL, bold) if column.side == "right" else x
            pages.write(start, pages.y + PAD + place * line_mm(CELL) - 0.8, line, CELL, colour=colour, bold=bold)
        x += room + BETWEEN


@_set_block.register
def _(block: Plate, pages: Pages) -> None:
    pages.add(block.make(PLATE_FREE))
    for place, line in enumerate(wrapped(typeset(block.caption), ROOM, CELL)[:2]):
        pages.write(LEFT, HEIGHT - BOTTOM - 4.5 + place * line_mm(CELL), line, CELL, colour=QUIET)


@_set_block.register
def _(block: Signatures, pages: Pages) -> None:
    pages.need(SIGNED * len(block.roles))
    for role in block.roles:
        pages.y += SIGNED
        pages.write(LEFT, pages.y, role, BODY, colour=QUIET)
        for name, start, end in (("name", 45.0, 100.0), ("date", 104.0, 132.0), ("signature", 136.0, WIDTH - RIGHT)):
            pages.rule(pages.y, GRAPHITE, 0.5, (start, end))
            pages.write(start, pages.y + 3.2, name, BENEATH, colour=QUIET)
    pages.y += GAP
