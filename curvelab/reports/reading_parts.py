"""Sections on the reading: the sheet with what was read on it, and axes and residuals."""

from collections.abc import Iterator
from functools import partial

from matplotlib import rc_context
from matplotlib.figure import Figure

from curvelab.plots.ink import PAPER, STYLE
from curvelab.plots.overlay import overlay_figure
from curvelab.plots.residuals import residual_figure
from curvelab.records.axes import Axis
from curvelab.records.reading import Reading
from curvelab.reports.case import Case
from curvelab.reports.device_parts import VALUE_UNITS
from curvelab.reports.document import Block, Column, Facts, Free, Plate, Row, Section, Table
from curvelab.reports.pages import A4_INCHES, LEFT, RIGHT, WIDTH
from curvelab.units import written


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
