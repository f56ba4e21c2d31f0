"""What is drawn on a page, in order: grid or ticks, frame, curves, numbers, titles."""

from itertools import pairwise
from typing import Protocol

import numpy as np

from tests.axes.foreign.page import ForeignPage
from tests.axes.foreign.wording import Along, Number

TICK = 0.6
"""Length of a tick in heights of the numbers."""


class Pen(Protocol):
    """What a renderer must draw: straight lines and words."""

    def line(self, x0: float, y0: float, x1: float, y1: float, width: float, colour: str) -> None:
        """A straight line."""

    def words(self, text: str, x: float, y: float, size: float, *, anchor: str, upright: bool = False) -> None:
        """Words at their baseline; anchor start, middle or end."""

    def width(self, text: str, size: float) -> float:
        """How wide the words are."""
        ...


def lay(page: ForeignPage, pen: Pen) -> None:
    """Draw the page: grid or ticks, frame, curves, numbers, titles."""
    left, top, right, bottom = page.frame
    tick = TICK * page.numbers_px
    for axis in (page.current, page.time):
        for values, is_decade in ((axis.others, False), (axis.decades, True)):
            whole = page.grid == "all" or (page.grid == "decades" and is_decade)
            colour = page.colours[0] if is_decade else page.colours[1]
            width = page.widths[0] if is_decade else page.widths[1]
            for value in values:
                at = page.place(axis, value)
                reach = tick if is_decade else 0.6 * tick
                reach = reach if page.ticks_inwards else -reach
                if whole:
                    ends = (at, top, at, bottom) if axis is page.current else (left, at, right, at)
                else:
                    ends = (at, bottom - reach, at, bottom) if axis is page.current else (left, at, left + reach, at)
                    colour, width = "#000000", page.widths[1]
                pen.line(*ends, width, colour)
    for ends in (
        (left, top, right, top),
        (left, bottom, right, bottom),
        (left, top, left, bottom),
        (right, top, right, bottom),
    ):
        pen.line(*ends, page.widths[2], "#000000")
    for curve in page.curves:
        points = np.array([left, top]) + curve * np.array([right - left, bottom - top])
        for start, end in pairwise(points.tolist()):
            pen.line(*start, *end, 1.6 * page.widths[0] + 0.8, "#000000")
    apart = 0.5 * page.numbers_px + (0.0 if page.ticks_inwards or page.grid == "all" else tick)
    widest = max(_number(page, pen, (page.time, number), apart) for number in page.time.numbers)
    for number in page.current.numbers:
        _number(page, pen, (page.current, number), apart)
    size = page.titles_px
    below = bottom + apart + page.numbers_px + 1.4 * size
    if page.title_at_end:
        pen.words(page.current.title, right, below, size, anchor="end")
        pen.words(page.time.title, left, top - 0.9 * size, size, anchor="middle")
        return
    pen.words(page.current.title, 0.5 * (left + right), below, size, anchor="middle")
    pen.words(
        page.time.title, left - apart - widest - 0.7 * size, 0.5 * (top + bottom), size, anchor="middle", upright=True
    )


def _number(page: ForeignPage, pen: Pen, mark: tuple[Along, Number], apart: float) -> float:
    """A number of an axis at its line, its exponent smaller and raised; the width it takes."""
    axis, number = mark
    left, _, _, bottom = page.frame
    size, small = page.numbers_px, 0.7 * page.numbers_px
    width = pen.width(number.text, size)
    whole = width + (pen.width(number.exponent, small) if number.exponent else 0.0)
    if axis is page.current:
        x, y = page.place(page.current, number.value) - 0.5 * whole, bottom + apart + 0.72 * size
    else:
        x, y = left - apart - whole, page.place(page.time, number.value) + 0.36 * size
    pen.words(number.text, x, y, size, anchor="start")
    if number.exponent:
        pen.words(number.exponent.replace("-", "−"), x + width, y - 0.4 * size, small, anchor="start")
    return whole
