"""The uncertainty budget: what contributes how much to each curve, and how its line was followed."""

from collections.abc import Iterator

import numpy as np

from curvelab.records.budget import CAUSES, Cause, UncertaintyBudget
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.normal import along_normal
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.residuals import curve_distances
from curvelab.reports.case import Case
from curvelab.reports.device_parts import VALUE_UNITS, curve_words
from curvelab.reports.document import Block, Column, Paragraph, Row, Section, Table
from curvelab.units import written, written_current

ALONG = (0.0, 0.25, 0.5, 0.75, 1.0)
"""Where along a curve's points the budget is shown."""


def budget_section(case: Case) -> Section | None:
    """What contributes how much to each curve's uncertainty, at five of its points."""
    # What is declared about a line has that line's uncertainty.
    read = [curve for curve in case.record.curves if curve.basis != "declared"]
    known = [curve for curve in read if any(np.isfinite(part.sd_common).any() for part in curve.parts)]
    typed = len(read) - len(known)
    blocks: list[Block] = []
    if known:
        blocks += [Paragraph(words=EXPLAINED), _budget_table(known)]
    fits = [(read.curve, read.fit.budget) for reading in case.readings for read in reading.curves if read.fit]
    if fits:
        blocks += [Paragraph(words=CAUSES_EXPLAINED), _causes_table(fits)]
    lines = [row for reading in case.readings for row in _trace_rows(reading)]
    if lines:
        blocks += [Paragraph(words=LINES_EXPLAINED), Table(columns=LINE_COLUMNS, rows=tuple(lines))]
    if typed:
        words = f"Of {typed} of the {len(read)} lines no uncertainty is known: their points were typed."
        blocks.append(Paragraph(words=words, look="open"))
    return Section(heading="Uncertainty budget", blocks=tuple(blocks)) if blocks else None


EXPLAINED = (
    "Relative standard uncertainties along the curve's normal in log-log, at five points of each curve. Axes: the "
    "calibration, common to all curves of the sheet. Line: trace and fit, the curve's own, which is the line's "
    "scatter, its correlation, what smoothing may hide, and tabulation. Both add as squares; the share is that of the "
    "squares. The last two columns are half-widths of the 95 % interval. How well the sheet describes the device is "
    "not in them."
)
CAUSE_WORDS: dict[Cause, str] = {
    "calibration": "Marks",
    "warp": "Bends",
    "snapping": "Pixels",
    "trace": "Scatter",
    "correlation": "Alike",
    "smoothing": "Smooth",
    "edge": "Stroke",
    "tabulation": "Points",
}
CAUSES_EXPLAINED = (
    "The causes one by one, root mean squares along each line. "
    + "; ".join(f"{CAUSE_WORDS[cause]} - {text[0].lower()}{text[1:]}" for cause, text, _ in CAUSES)
    + "."
)
LINES_EXPLAINED = (
    "The lines as they were followed: the standard deviation of one place across the line, over how far neighbouring "
    "errors are alike, and how far the places lie from the fitted curve."
)
LINE_COLUMNS = (
    Column("Line", 3),
    Column("Followed", 1.6),
    Column("Places", 1.3, "right"),
    Column("Confidence", 1.6, "right"),
    Column("One place (sd)", 2, "right"),
    Column("Alike over", 2, "right"),
    Column("From the curve, RMS", 2.4, "right"),
)


def _budget_table(curves: list[Curve]) -> Table:
    columns = (
        Column("Curve", 2.5),
        Column("Current", 1.8, "right"),
        Column("Value", 2.3, "right"),
        Column("Axes", 1.8, "right"),
        Column("Line", 1.8, "right"),
        Column("Total", 1.8, "right"),
        Column("Axes' share", 1.5, "right"),
        Column("95 % in current", 1.9, "right"),
        Column("95 % in value", 1.9, "right"),
    )
    return Table(columns=columns, rows=tuple(row for curve in curves for row in _budget_rows(curve)))


def _budget_rows(curve: Curve) -> Iterator[Row]:
    names = ("current", "value", "sd_current", "sd_value", "sd_common")
    current, value, sd_current, sd_value, common = (
        np.concatenate([getattr(part, name) for part in curve.parts]) for name in names
    )
    total = along_normal(sd_current, sd_value)
    own = np.sqrt(np.maximum(total**2 - common**2, 0.0))
    for place, index in enumerate(dict.fromkeys(round(share * (current.size - 1)) for share in ALONG)):
        yield Row(
            cells=(
                curve_words(curve) if place == 0 else "",
                written_current(float(current[index]), curve.base),
                written(float(value[index]), VALUE_UNITS[curve.quantity]),
                *(_percent(float(each[index])) for each in (common, own, total)),
                _share(float(common[index]), float(total[index])),
                *(_percent(COVERAGE_FACTOR * float(each[index])) for each in (sd_current, sd_value)),
            )
        )


def _causes_table(fits: list[tuple[Curve, UncertaintyBudget]]) -> Table:
    columns = (Column("Line", 2.3), *(Column(CAUSE_WORDS[cause], 1.6, "right") for cause, _, _ in CAUSES))
    rows = (
        Row(cells=(curve_words(curve), *(_percent(getattr(budget, cause)) for cause, _, _ in CAUSES)))
        for curve, budget in fits
    )
    return Table(columns=columns, rows=tuple(rows))


def _percent(share: float) -> str:
    return f"{100 * share:.2g} %" if np.isfinite(share) else "-"


def _share(part: float, total: float) -> str:
    return f"{100 * min(1.0, (part / total) ** 2):.0f} %" if np.isfinite(part / total) else "-"


def _trace_rows(reading: Reading) -> Iterator[Row]:
    axes, unit = reading.axes, "px" if reading.sheet is None else reading.sheet.unit
    for read in reading.curves:
        if read.trace is not None and axes is not None and len(read.trace.places):
            away = curve_distances(axes, read)
            yield Row(cells=_trace_cells(read, f"{float(np.sqrt(np.mean(away**2))):.3f} {unit}", unit))


def _trace_cells(read: ReadCurve, away: str, unit: str) -> tuple[str, ...]:
    trace = read.trace
    if trace is None:
        return ()
    scatter, alike = f"{float(np.median(trace.sd)):.3f} {unit}", f"{trace.correlation_length:.1f} {unit}"
    return (
        curve_words(read.curve),
        trace.origin,
        str(len(trace.places)),
        f"{trace.confidence:.2f}",
        scatter,
        alike,
        away,
    )
