"""Who surely clears first, as a strip under the plot: a row for each pair, along the same current axis."""

from collections.abc import Mapping, Sequence

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Rectangle

from curvelab.plots.ink import FILL, GRAPHITE, MAJOR, MINOR, PAPER, QUIET
from curvelab.plots.subject import Subject
from curvelab.records.stretch import NOT_COVERED, UNDECIDED, Sides

ROW, TITLE, UNDER_AXES = 0.0145, 0.016, 0.05
"""Heights as fractions of the page: a row, the strip's title, and the labels of the axes above it."""
BAR = 0.72
"""Of a row's height."""
SHADE, UNDECIDED_HATCH = 0.07, "xxxxxx"


def strip_height(sides: Sequence[Sides]) -> float:
    """What the strip takes of the page, with the labels of the axes above it."""
    return UNDER_AXES + TITLE + ROW * len(sides) if sides else 0.0


def draw_strip(
    figure: Figure, axes: Axes, subjects: Sequence[Subject], sides: Sequence[Sides], units_per_a: float
) -> None:
    """A row for each pair beneath the axes: the device that surely clears first, hatched as above; crossed: undecided.

    Parameters
    ----------
    units_per_a : float
        Units of the axes' current base in an ampere.
    """
    by_name = {subject.name: subject for subject in subjects}
    left, bottom, width, _ = axes.get_position().bounds
    height = ROW * len(sides)
    top = bottom - UNDER_AXES - TITLE
    strip = figure.add_axes((left, top - height, width, height))
    strip.set_xscale("log")
    strip.set_xlim(axes.get_xlim())
    strip.set_ylim(len(sides), 0)
    strip.set_axis_off()
    for row, each in enumerate(sides):
        _draw_row(strip, row, each, by_name, units_per_a)
    _draw_title(figure, left, top)


def shade_undecided(axes: Axes, sides: Sides, units_per_a: float) -> None:
    """Grey over the currents at which neither of two devices surely clears first."""
    for stretch in sides.stretches:
        if stretch.sooner == UNDECIDED:
            start, end = stretch.from_a * units_per_a, stretch.to_a * units_per_a
            axes.axvspan(start, end, facecolor=(GRAPHITE, SHADE), edgecolor="none", zorder=1)


def _draw_title(figure: Figure, left: float, top: float) -> None:
    figure.text(left, top + 0.004, "Surely clears first", fontsize=7.5, fontweight="bold", va="bottom")
    figure.text(
        left + 0.16,
        top + 0.004,
        "by letter; crossed: undecided; empty: not covered",
        fontsize=7,
        color=QUIET,
        va="bottom",
    )


def _draw_row(strip: Axes, row: int, sides: Sides, by_name: Mapping[str, Subject], units_per_a: float) -> None:
    letters = f"{by_name[sides.a].letter} / {by_name[sides.b].letter}"
    strip.annotate(
        letters,
        (0, row + 0.5),
        xycoords=("axes fraction", "data"),
        xytext=(-6, 0),
        textcoords="offset points",
        ha="right",
        va="center",
        fontsize=7,
        annotation_clip=False,
    )
    low, high = strip.get_xlim()
    strip.plot([low, high], [row + 0.5, row + 0.5], color=MINOR, linewidth=0.5, zorder=0)
    for stretch in sides.stretches:
        if stretch.sooner != NOT_COVERED:
            ends = max(stretch.from_a * units_per_a, low), min(stretch.to_a * units_per_a, high)
            _draw_bar(strip, row, ends, by_name.get(stretch.sooner))


def _draw_bar(strip: Axes, row: int, ends: tuple[float, float], sooner: Subject | None) -> None:
    colour, hatch = (MAJOR, UNDECIDED_HATCH) if sooner is None else (sooner.ink.colour, sooner.ink.hatch)
    corner, (low, high) = (ends[0], row + (1 - BAR) / 2), strip.get_xlim()
    strip.add_patch(Rectangle(corner, ends[1] - ends[0], BAR, facecolor=PAPER, edgecolor="none", zorder=1))
    face = "none" if sooner is None else (colour, 2 * FILL)
    strip.add_patch(
        Rectangle(
            corner, ends[1] - ends[0], BAR, facecolor=face, edgecolor=colour, hatch=hatch, linewidth=0.6, zorder=2
        )
    )
    wide_enough = ends[1] / ends[0] > (high / low) ** 0.03
    if sooner is not None and wide_enough:
        strip.text(
            (ends[0] * ends[1]) ** 0.5,
            row + 0.5,
            sooner.letter,
            fontsize=6.5,
            fontweight="bold",
            color=colour,
            ha="center",
            va="center_baseline",
            zorder=3,
            bbox={"boxstyle": "square,pad=0.12", "facecolor": PAPER, "edgecolor": "none"},
        )
