"""Sections on the reading: the sheet with what was read on it, axes and residuals, and the uncertainty budget."""

from collections.abc import Iterator
from functools import partial

import numpy as np
from matplotlib import rc_context
from matplotlib.figure import Figure

from curvelab.plots.ink import PAPER, STYLE
from curvelab.plots.overlay import overlay_figure
from curvelab.plots.residuals import residual_figure
from curvelab.records.axes import Axis
from curvelab.records.budget import CAUSES, Cause, UncertaintyBudget
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.normal import along_normal
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.residuals import curve_distances
from curvelab.reports.case import Case
from curvelab.reports.device_parts import VALUE_UNITS, curve_words
from curvelab.reports.document import Block, Column, Facts, Free, Paragraph, Plate, Row, Section, Table
from curvelab.reports.pages import A4_INCHES, LEFT, RIGHT, WIDTH
from curvelab.units import written, written_current

ALONG = (0.0, 0.25, 0.5, 0.75, 1.0)
"""Where along a curve's points the budget is shown."""


def sheets_section(case: Case) -> Section | None:
    """Each sheet with the lines read on it."""
    plates = [
        Plate(make=partial(_overlay, reading), caption=_overlay_caption(reading))
        for reading in case.readings
        if _is_shown(reading)
    ]
    return Section(heading="The sheet, with what was read over it", blocks=tuple(plates)) if plates else None


def _is_shown(reading: Reading) -> bool:
    return reading.sheet is not None and (reading.sheet.pixels is not None or reading.sheet.is_vector)


def _overlay(reading: Reading, free: Free) -> Figure:
    above, beneath = free
    side = LEFT / WIDTH, RIGHT / WIDTH
    with rc_context(STYLE):
        figure = Figure(figsize=A4_INCHES, facecolor=PAPER)
        place = (side[0], beneath, 1 - sum(side), 1 - above - beneath)
        return overlay_figure(reading, (figure, place))


def _overlay_caption(reading: Reading) -> str:
    entry = reading.worksheet.sheet
    name = f"{entry.file}, page {entry.page}" if entry else "The sheet"
    return (
        f"{name}: the untouched page; over it in blue-green the measured grid, fast edges thin, slow edges thick, mean "
        "lines dashed; in brown marks given by hand, gaps and open warnings."
    )


def axes_section(case: Case) -> Section | None:
    """Of each reading: how the axes were calibrated, its marks with their residuals, and all residuals drawn."""
    blocks: list[Block] = []
    for number, reading in enumerate(case.readings, start=1):
        blocks += _axes_blocks(number, reading)
    return Section(heading="Axes and residuals", blocks=tuple(blocks)) if blocks else None


def residuals_section(case: Case) -> Section | None:
    """Of each reading: every residual drawn."""
    plates = [
        Plate(
            make=partial(residual_figure, reading),
            caption="Bars: 95 % of a grid line's own scatter. What they share is in the budget as calibration.",
        )
        for reading in case.readings
        if reading.axes is not None and reading.sheet is not None
    ]
    return Section(heading="Residuals", blocks=tuple(plates)) if plates else None


def _axes_blocks(number: int, reading: Reading) -> Iterator[Block]:
    axes = reading.axes
    if axes is None:
        return
    unit = "pt" if reading.sheet is not None and reading.sheet.unit == "pt" else "px"
    grid = "none measured"
    if axes.grid_residual_rms is not None:
        grid = f"{len(axes.grid)}, RMS {axes.grid_residual_rms:.3f} {unit}"
    how = "read from the sheet" if axes.automatic else "marks given by hand, then every grid line"
    yield Facts(
        pairs=(
            (f"Document {number}", how),
            ("Current axis", _axis_words(axes.current)),
            ("Grid lines", grid),
            ("Second axis", _axis_words(axes.value)),
        )
    )
    columns = (
        Column("Axis", 2),
        Column("Value", 2, "right"),
        Column(f"Place, {unit}", 3, "right"),
        Column("From", 2),
        Column(f"Residual, {unit}", 2, "right"),
    )
    yield Table(columns=columns, rows=tuple(row for axis in (axes.current, axes.value) for row in _mark_rows(axis)))


def _axis_words(axis: Axis) -> str:
    factor = "" if axis.factor == 1 else f" × {axis.factor:g}"
    return f"{axis.quantity.replace('_', '-')} in {axis.unit}{factor}, {axis.scale}, along {axis.direction}"


def _mark_rows(axis: Axis) -> Iterator[Row]:
    unit = axis.base if axis.quantity in ("current", "peak") else VALUE_UNITS[axis.quantity]
    for mark in axis.marks:
        residual = "-" if mark.residual is None else f"{mark.residual:+.2f}"
        place = f"{mark.at[0]:.1f}, {mark.at[1]:.1f}"
        cells = (axis.quantity.replace("_", "-"), written(axis.value_of(mark), unit), place, mark.origin, residual)
        yield Row(cells=cells)


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
