"""One page of a check: the band with its limits, and beneath it what was required and read."""

from collections.abc import Iterator, Sequence
from itertools import pairwise
from pathlib import Path

from matplotlib import rc_context
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.text import Text

from curvelab.plots.bands import bands_figure
from curvelab.plots.ink import GRAPHITE, MINOR, QUIET, STYLE, WARM
from curvelab.plots.limits import SETTLED
from curvelab.plots.save import picture_format, save_figure
from curvelab.records.device import DeviceRecord
from curvelab.records.finding import Finding
from curvelab.units import written_between, written_percent

LEFT, RIGHT, BOTTOM = 0.055, 0.055, 0.03
ROW, GAP = 0.0148, 0.03
"""Heights of a row and of what separates the table from the plot, as fractions of the page."""
TALLEST = 0.5
"""Of the page, for the table: rows grow smaller rather than the band."""
COLUMNS = (
    ("Requirement", 0.0),
    ("Read (95 %)", 0.415),
    ("Margin", 0.685),
    ("Outcome", 0.755),
    ("Clause", 0.85),
)
"""Heading and left end of each column, as fractions of the table's width."""
BETWEEN = 0.012
"""Free space at a column's right end, as a fraction of the table's width."""


def draw_check_page(device: DeviceRecord, findings: Sequence[Finding], path: str | Path) -> None:
    """Band, limits and the table of findings on one A4 page, as PDF, PNG or SVG by the file's ending.

    Raises
    ------
    DeviceError
        The device has no time-current curve to draw.
    InputError
        The picture cannot be written under that name.
    """
    picture_format(path)
    height = min(TALLEST, ROW * (len(findings) + 2) + GAP)
    with rc_context(STYLE):
        figure = bands_figure([device], findings=findings, free=(0.0, height))
        _draw_table(figure, findings, height - GAP)
    save_figure(figure, path)


def _draw_table(figure: Figure, findings: Sequence[Finding], height: float) -> None:
    row = height / (len(findings) + 2)
    size = min(6.6, 6.6 * row / ROW)
    top = BOTTOM + height - row
    for words, at in COLUMNS:
        figure.text(_x(at), top, words, fontsize=size, fontweight="bold", color=GRAPHITE, va="bottom")
    for index, finding in enumerate(findings, start=1):
        y = top - index * row
        figure.add_artist(_rule(y + row * 0.93))
        for (start, end), words in zip(
            pairwise([*(at for _, at in COLUMNS), 1 + BETWEEN]), _cells(finding), strict=True
        ):
            cell = figure.text(_x(start), y, words, fontsize=size, color=_colour(finding), va="bottom")
            _fit(cell, _x(end - BETWEEN) - _x(start))
    if findings:
        standards = ", ".join(dict.fromkeys(finding.standard for finding in findings))
        figure.text(_x(0), top - (len(findings) + 1) * row, _foot(standards), fontsize=size, color=QUIET, va="bottom")


def _spans() -> Iterator[tuple[float, float]]:
    """Start of each column and of the next."""
    return pairwise([*(at for _, at in COLUMNS), 1 + BETWEEN])


def _fit(cell: Text, room: float) -> None:
    """Print a cell smaller where its words are wider than the room, a fraction of the page's width."""
    figure = cell.get_figure(root=True)
    assert figure is not None
    wide = cell.get_window_extent().width / figure.bbox.width
    # letters grow in steps of whole pixels, so that a little room is kept
    cell.set_fontsize(float(cell.get_fontsize()) * min(1.0, 0.97 * room / max(wide, 1e-9)))


def _foot(standards: str) -> str:
    return f"{standards}. A margin is counted from the limit to the permitted side; * advisory, never a verdict."


def _rule(y: float) -> Line2D:
    return Line2D((LEFT, 1 - RIGHT), (y, y), color=MINOR, linewidth=0.5)


def _cells(finding: Finding) -> tuple[str, ...]:
    return (
        finding.requirement,
        "" if finding.value is None else written_between(finding.value, finding.interval, finding.unit),
        "" if finding.margin is None else written_percent(finding.margin),
        finding.outcome + (" *" if finding.advisory else ""),
        finding.clause,
    )


def _colour(finding: Finding) -> str:
    if finding.outcome not in SETTLED:
        return QUIET if finding.advisory else WARM
    return GRAPHITE if finding.outcome == "meets" else QUIET


def _x(fraction: float) -> float:
    return LEFT + fraction * (1 - LEFT - RIGHT)
