"""What stands around the curves: tick labels, axis names, legend, notes and title block."""

import numpy as np

from demo_curves.drawing.design import AxisDesign, Note, PlotDesign, TitleBlock
from demo_curves.drawing.fonts import text_width
from demo_curves.drawing.geometry import Box
from demo_curves.drawing.ink import Fill, Ink, Stroke, Words, rectangle
from demo_curves.drawing.scales import grid_lines, leading_digit, place_matrix, tick_text


def axis_words(plot: PlotDesign, font: str) -> list[Ink]:
    """Numbers along the bottom and the left side, and the axis names."""
    left, _, _, bottom = plot.frame_pt
    matrix = place_matrix(plot)
    ink: list[Ink] = []
    for column, axis in enumerate((plot.current, plot.value)):
        row = int(np.flatnonzero(matrix[:, column])[0])
        widest = 0.0
        for line in grid_lines(axis, axis.labelled):
            if leading_digit(line.value) not in axis.labelled:
                continue
            at = float(matrix[row, column] * np.log10(line.value * axis.scale) + matrix[row, 2])
            where = (at, bottom + 1.35 * plot.tick_size_pt) if row == 0 else (left - 4.0, at)
            number, width = _number(tick_text(line.value, axis.ticks), plot.tick_size_pt, font, where, across=row == 0)
            ink += number
            widest = max(widest, width)
        ink.append(_axis_name(axis, plot, font, across=row == 0, widest=widest))
    return ink


def _number(
    written: tuple[str, str], size: float, font: str, where: tuple[float, float], *, across: bool
) -> tuple[list[Ink], float]:
    """A number centred under a line (across) or ending at its left, an exponent raised and smaller."""
    text, exponent = written
    base_width = text_width(text, font, False, size)
    small = 0.72 * size
    width = base_width + (text_width(exponent, font, False, small) if exponent else 0.0)
    start = where[0] - width / 2 if across else where[0] - width
    baseline = where[1] if across else where[1] + 0.36 * size
    words: list[Ink] = [Words(text=text, at_pt=(start, baseline), size_pt=size, font=font)]
    if exponent:
        raised = (start + base_width, baseline - 0.42 * size)
        words.append(Words(text=exponent, at_pt=raised, size_pt=small, font=font))
    return words, width


def _axis_name(axis: AxisDesign, plot: PlotDesign, font: str, *, across: bool, widest: float) -> Words:
    left, top, right, bottom = plot.frame_pt
    size = plot.label_size_pt
    if across:
        at = ((left + right) / 2, bottom + 1.6 * plot.tick_size_pt + 1.4 * size)
        return Words(text=axis.label, at_pt=at, size_pt=size, font=font, anchor="middle")
    at = (left - widest - 0.9 * size, (top + bottom) / 2)
    return Words(text=axis.label, at_pt=at, size_pt=size, font=font, anchor="middle", rotation=90.0)


def legend_ink(plot: PlotDesign, font: str) -> tuple[list[Ink], list[Box]]:
    """A boxed legend with a sample of each line, and the box it hides."""
    if plot.legend_at_pt is None:
        return [], []
    size = 7.5
    left, top = plot.legend_at_pt
    width = 40.0 + max(text_width(words, font, False, size) for _, words in plot.legend)
    box = (left, top, left + width, top + 1.5 * size * len(plot.legend) + 6.0)
    ink: list[Ink] = [
        Fill(points=rectangle(*box), colour="#ffffff"),
        Stroke(points=rectangle(*box), width_pt=0.6, colour="#000000"),
    ]
    for row, (name, words) in enumerate(plot.legend):
        curve = next(curve for curve in plot.curves if curve.name == name)
        y = top + 3.0 + 1.5 * size * (row + 0.5)
        sample = np.array([[left + 5.0, y], [left + 29.0, y]])
        ink.append(Stroke(points=sample, width_pt=curve.width_pt, colour=curve.colour, dash_pt=curve.dash_pt))
        ink.append(Words(text=words, at_pt=(left + 34.0, y + 0.36 * size), size_pt=size, font=font))
    return ink, [box]


def note_ink(note: Note, font: str) -> tuple[list[Ink], list[Box]]:
    """Lines of a note; a boxed one hides its ground."""
    lines = note.text.split("\n")
    x, y = note.at_pt
    ink: list[Ink] = []
    boxes: list[Box] = []
    if note.boxed:
        width = max(text_width(line, font, note.bold, note.size_pt) for line in lines)
        pad = 0.5 * note.size_pt
        bottom = y + 1.35 * note.size_pt * (len(lines) - 1) + 0.3 * note.size_pt
        box = (x - pad, y - note.size_pt - pad / 2, x + width + pad, bottom + pad / 2)
        ink.append(Fill(points=rectangle(*box), colour="#ffffff"))
        ink.append(Stroke(points=rectangle(*box), width_pt=0.5, colour="#000000"))
        boxes.append(box)
    for row, line in enumerate(lines):
        ink.append(
            Words(
                text=line,
                at_pt=(x, y + 1.35 * note.size_pt * row),
                size_pt=note.size_pt,
                font=font,
                bold=note.bold,
                anchor=note.anchor,
                rotation=note.rotation,
                colour=note.colour,
            )
        )
    return ink, boxes


def title_block_ink(block: TitleBlock, font: str) -> list[Ink]:
    """The ruled table of drawing details."""
    left, top = block.at_pt
    right = left + block.width_pt
    ink: list[Ink] = []
    for row, cells in enumerate(block.rows):
        upper = top + row * block.row_height_pt
        lower = upper + block.row_height_pt
        ink.append(Stroke(points=rectangle(left, upper, right, lower), width_pt=0.7, colour="#000000"))
        step = block.width_pt / len(cells)
        for column, (caption, entry) in enumerate(cells):
            x = left + column * step
            if column:
                ink.append(Stroke(points=np.array([[x, upper], [x, lower]]), width_pt=0.5, colour="#000000"))
            ink.append(Words(text=caption, at_pt=(x + 3, upper + 6.5), size_pt=4.8, font=font, colour="#404040"))
            ink.append(Words(text=entry, at_pt=(x + 3, lower - 5.0), size_pt=7.5, font=font, bold=row == 0))
    return ink
