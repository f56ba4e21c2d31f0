"""One page of a check: the band with its limits, and beneath it what was required and read."""

from collections.abc import Sequence
from pathlib import Path

from matplotlib import rc_context
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

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
    ("Read (95 %)", 0.43),
    ("Margin", 0.665),
    ("Outcome", 0.735),
    ("Clause", 0.835),
)
"""Heading and left end of each column, as fractions of the table's width."""
LETTERS, CLAUSE_LETTERS = 74, 26
"""Of a requirement and of a clause that fit into their columns."""


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
        for (_, at), words in zip(COLUMNS, _cells(finding), strict=True):
            figure.text(_x(at), y, words, fontsize=size, color=_colour(finding), va="bottom")
    if findings:
        standards = ", ".join(dict.fromkeys(finding.standard for finding in findings))
        figure.text(_x(0), top - (len(findings) + 1) * row, _foot(standards), fontsize=size, color=QUIET, va="bottom")


def _foot(standards: str) -> str:
    return f"{standards}. A margin is counted from the limit to the permitted side; * advisory, never a verdict."


def _rule(y: float) -> Line2D:
    return Line2D((LEFT, 1 - RIGHT), (y, y), color=MINOR, linewidth=0.5)


def _cells(finding: Finding) -> tuple[str, ...]:
    return (
        _cut(finding.requirement, LETTERS),
        "" if finding.value is None else written_between(finding.value, finding.interval, finding.unit),
        "" if finding.margin is None else written_percent(finding.margin),
        finding.outcome + (" *" if finding.advisory else ""),
        _cut(finding.clause, CLAUSE_LETTERS),
    )


def _cut(words: str, letters: int) -> str:
    return words if len(words) <= letters else words[: letters - 1] + "…"


def _colour(finding: Finding) -> str:
    if finding.outcome not in SETTLED:
        return QUIET if finding.advisory else WARM
    return GRAPHITE if finding.outcome == "meets" else QUIET


def _x(fraction: float) -> float:
    return LEFT + fraction * (1 - LEFT - RIGHT)
