"""A document set on A4 pages, top to bottom: where each thing stands, and what stands on every page."""

from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from curvelab.plots.ink import GRAPHITE, MAJOR, PAPER, QUIET
from curvelab.reports.document import Document
from curvelab.reports.text import line_mm, width_mm

WIDTH, HEIGHT = 210.0, 297.0
LEFT, RIGHT, TOP, BOTTOM = 20.0, 18.0, 27.0, 20.0
"""Margins in mm."""
ROOM = WIDTH - LEFT - RIGHT
HEAD, FOOT = 14.0, 12.0
"""Distances in mm of the running head from the top and of the page number from the bottom."""
A4_INCHES = (WIDTH / 25.4, HEIGHT / 25.4)
SMALL = 7.0


class Pages:
    """Pages that fill from the top; ``y`` is how far the last one is filled, in mm from its top."""

    def __init__(self) -> None:
        self.figures: list[Figure] = []
        self.y = HEIGHT

    def turn(self) -> None:
        """A new page, unless the last is empty."""
        if self.y > TOP or not self.figures:
            self.add(Figure(figsize=A4_INCHES, facecolor=PAPER), TOP)

    def add(self, figure: Figure, y: float = HEIGHT) -> None:
        """A page that is drawn already, filled to ``y``."""
        self.figures.append(figure)
        self.y = y

    def need(self, height: float) -> bool:
        """Turn the page where less than this height is left; whether it was turned."""
        if self.y + height <= HEIGHT - BOTTOM:
            return False
        self.turn()
        return True

    def write(
        self, x: float, baseline: float, words: str, size: float, *, colour: str = GRAPHITE, bold: bool = False
    ) -> None:
        """One line of words on the last page, from x and with its baseline in mm from the top."""
        write(self.figures[-1], (x, baseline), words, size, colour=colour, bold=bold)

    def rule(
        self, y: float, colour: str = MAJOR, width: float = 0.5, ends: tuple[float, float] = (LEFT, WIDTH - RIGHT)
    ) -> None:
        """A level line on the last page."""
        rule(self.figures[-1], y, colour, width, ends)

    def finish(self, document: Document) -> None:
        """Running head and page number on every page, now that their count is known."""
        for number, figure in enumerate(self.figures, start=1):
            write(figure, (LEFT, HEAD), document.name, SMALL, bold=True)
            write(figure, (WIDTH - RIGHT - width_mm(document.title, SMALL), HEAD), document.title, SMALL, colour=QUIET)
            rule(figure, HEAD + 2.2, MAJOR, 0.5, (LEFT, WIDTH - RIGHT))
            foot, of = HEIGHT - FOOT, f"Page {number} of {len(self.figures)}"
            rule(figure, foot - line_mm(SMALL), MAJOR, 0.5, (LEFT, WIDTH - RIGHT))
            write(figure, (LEFT, foot), document.program, SMALL, colour=QUIET)
            write(figure, (WIDTH - RIGHT - width_mm(of, SMALL), foot), of, SMALL, colour=QUIET)


def write(
    figure: Figure, at: tuple[float, float], words: str, size: float, *, colour: str = GRAPHITE, bold: bool = False
) -> None:
    """One line of words, from x and with its baseline in mm from the top left corner."""
    figure.text(
        at[0] / WIDTH,
        1 - at[1] / HEIGHT,
        words,
        fontsize=size,
        fontweight="bold" if bold else "normal",
        color=colour,
        va="baseline",
        parse_math=False,
    )


def rule(figure: Figure, y: float, colour: str, width: float, ends: tuple[float, float]) -> None:
    """A level line, in mm from the top left corner."""
    across = (ends[0] / WIDTH, ends[1] / WIDTH)
    figure.add_artist(Line2D(across, (1 - y / HEIGHT,) * 2, color=colour, linewidth=width))
