"""A reading laid over its sheet: the untouched page, and on it in hairlines what was measured and followed."""

from collections.abc import Iterator, Sequence
from pathlib import Path

import numpy as np
from matplotlib import rc_context
from matplotlib.figure import Figure
from matplotlib.patches import Polygon

from curvelab.errors import InputError
from curvelab.plots.ground import Ground, PagePlace
from curvelab.plots.ink import INK, STYLE, WARM
from curvelab.plots.placing import Words
from curvelab.plots.save import picture_format, save_figure
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, Axis, Mark
from curvelab.records.curve import Edge
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.trace import Place, Trace
from curvelab.units import written_current, written_time

HAIRLINE = 0.35
EDGE_WIDTH: dict[Edge, float] = {"fast": 0.45, "slow": 0.9, "mean": 0.6}


def draw_overlay(reading: Reading, path: str | Path) -> None:
    """Draw the sheet as it is, pixel for pixel, with the reading over it, as PNG, SVG or PDF by the file's ending.

    Blue-green is what was read: grid hairlines, fast edges thin, slow edges thicker, mean lines dashed. The warm colour
    is what a person gave or should look at: marks, guide places, rectangles left out, gaps, open warnings.

    Raises
    ------
    InputError
        The reading has no sheet, or the picture cannot be written under that name.
    """
    picture_format(path)
    save_figure(overlay_figure(reading), path)


def overlay_figure(reading: Reading, page: tuple[Figure, PagePlace] | None = None) -> Figure:
    """The figure of `draw_overlay`, one pixel of the sheet on one of its own; or within a place of another figure."""
    sheet = reading.sheet
    if sheet is None:
        raise InputError("The reading has no sheet to draw on", "", "Draw its bands instead")
    with rc_context(STYLE):
        ground = Ground(sheet, page)
        if reading.axes is not None:
            _draw_axes(ground, reading.axes)
        traced = [
            (curve, curve.trace) for curve in reading.curves if curve.trace is not None and len(curve.trace.places)
        ]
        for curve, trace in traced:
            _draw_trace(ground, curve.curve.edge, trace)
        if traced:
            _draw_names(ground, reading.axes, traced)
        _draw_given(ground, reading)
    return ground.figure


def _draw_axes(ground: Ground, axes: Axes) -> None:
    for line in axes.grid:
        ground.line(line.points, HAIRLINE, color=INK, alpha=0.6, zorder=2)
    for axis in (axes.current, axes.value):
        for mark in axis.marks:
            _draw_mark(ground, axis, mark)


def _draw_mark(ground: Ground, axis: Axis, mark: Mark) -> None:
    colour = WARM if mark.origin == "given" else INK
    across, down = ground.at(mark.at)
    ground.canvas.plot(
        across, down, marker="+", markersize=7, markeredgewidth=0.6, color=colour, linestyle="none", zorder=5
    )
    ground.canvas.plot(
        across,
        down,
        marker="o",
        markersize=4.5,
        markeredgewidth=0.5,
        markerfacecolor="none",
        color=colour,
        linestyle="none",
        zorder=5,
    )
    ground.write((float(across[0]), float(down[0])), _mark_words(axis, mark), colour, (4.5, -5.0))


def _mark_words(axis: Axis, mark: Mark) -> str:
    value = axis.value_of(mark)
    if axis.quantity == "time":
        return written_time(value)
    if axis.quantity == "let_through":
        return f"{value:g} A²s"
    return written_current(value, axis.base)


def _stretches(trace: Trace) -> Iterator[Floats]:
    """The trace's places, cut where a gap lies between two of them."""
    before = {int(np.argmin(np.hypot(*(trace.places - np.array(gap.start)).T))) for gap in trace.gaps}
    yield from np.split(trace.places, sorted(index + 1 for index in before))


def _draw_trace(ground: Ground, edge: Edge, trace: Trace) -> None:
    for stretch in _stretches(trace):
        dashes = (0.0, (5.0, 2.0)) if edge == "mean" else "-"
        ground.line(stretch, EDGE_WIDTH[edge], color=INK, linestyle=dashes, zorder=4)
    for gap in trace.gaps:
        ground.line([gap.start, gap.end], 0.6, color=WARM, linestyle=(0.0, (1.0, 1.5)), zorder=4)


def _draw_names(ground: Ground, axes: Axes | None, traced: Sequence[tuple[ReadCurve, Trace]]) -> None:
    """Each curve's name beside it, where it covers least; a dot says which line is meant."""
    lines = [np.column_stack(ground.at(trace.places)) for _, trace in traced]
    words = Words(lines=lines, letter=ground.letter, room=ground.room(axes))
    for line, (curve, _) in zip(lines, traced, strict=True):
        name = _curve_words(curve)
        place, right = words.beside(line, name)
        ground.canvas.plot(*place, marker="o", markersize=2.2, color=INK, linestyle="none", zorder=5)
        ground.write(place, name, INK, (5.0 if right else -5.0, 0.0))


def _curve_words(curve: ReadCurve) -> str:
    names = curve.devices if len(curve.devices) <= 1 else (f"{curve.devices[0]} and {len(curve.devices) - 1} more",)
    element = () if curve.curve.element == "whole" else (curve.curve.element,)
    return " · ".join([*names, *element, curve.curve.edge])


def _draw_given(ground: Ground, reading: Reading) -> None:
    """What the worksheet says of places, and where something is open."""
    for entry in reading.worksheet.curves:
        _points(ground, entry.through, marker="D", size=3.2)
        for x0, y0, x1, y1 in entry.avoid:
            corners = np.column_stack(ground.at([[x0, y0], [x1, y0], [x1, y1], [x0, y1]]))
            ground.canvas.add_patch(
                Polygon(corners, fill=False, edgecolor=WARM, linewidth=0.5, linestyle="--", zorder=3)
            )
    open_places = [each.at for each in reading.warnings if each.at is not None and each.accepted is None]
    _points(ground, open_places, marker="o", size=12.0)


def _points(ground: Ground, places: Sequence[Place], *, marker: str, size: float) -> None:
    if places:
        across, down = ground.at(places)
        ground.canvas.plot(
            across,
            down,
            marker=marker,
            markersize=size,
            markeredgewidth=0.6,
            markerfacecolor="none",
            markeredgecolor=WARM,
            linestyle="none",
            zorder=5,
        )
