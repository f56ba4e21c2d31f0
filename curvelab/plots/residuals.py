"""How well a reading agrees with itself: grid lines against the axes, and places of the lines against their curves."""

from collections.abc import Sequence

import numpy as np
from matplotlib import rc_context
from matplotlib.axes import Axes as Canvas
from matplotlib.figure import Figure
from matplotlib.ticker import NullFormatter

from curvelab.plots.ink import GRAPHITE, INK, LINE_STYLE, MAJOR, MINOR, PAPER, QUIET, STYLE, device_ink
from curvelab.plots.ticks import current_label, value_label
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, GridLine
from curvelab.records.curve import COVERAGE_FACTOR
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.residuals import curve_distances, grid_residuals

A4_INCHES = (8.27, 11.69)
LEFT, RIGHT, GAP = 0.125, 0.09, 0.075
"""Margins and the gap between panels, as fractions of the page."""
LEAST_SPAN = 0.05
"""In the sheet's unit: a scale no finer than this, so that nothing looks like something."""


def residual_figure(reading: Reading, free: tuple[float, float] = (0.0, 0.0)) -> Figure:
    """Panels on an A4 page: residuals of both axes' grid lines and marks, and of each line's places, in px or pt."""
    axes, sheet = reading.axes, reading.sheet
    if axes is None or sheet is None:
        raise ValueError("A reading without axes has no residuals")
    traced = [read for read in reading.curves if read.trace is not None]
    with rc_context(STYLE):
        figure = Figure(figsize=A4_INCHES, facecolor=PAPER)
        panels = _panels(figure, 2 + bool(traced), free)
        for panel, name in zip(panels, ("current", "value"), strict=False):
            _draw_axis(panel, axes, name, sheet.unit)
        if traced:
            _draw_curves(panels[2], axes, traced, sheet.unit)
    return figure


def _panels(figure: Figure, count: int, free: tuple[float, float]) -> list[Canvas]:
    above, beneath = free
    room = 1 - above - beneath - 0.04
    height = min((room - GAP * count) / count, 0.24)
    tops = [1 - above - 0.04 - index * (height + GAP) for index in range(count)]
    return [figure.add_axes((LEFT, top - height, 1 - LEFT - RIGHT, height)) for top in tops]


def _draw_axis(panel: Canvas, axes: Axes, name: str, unit: str) -> None:
    axis = axes.current if name == "current" else axes.value
    lines: list[GridLine] = [line for line in axes.grid if line.axis == name]
    what = "Grid lines of the {} axis: measured less fitted" if lines else "Marks of the {} axis: given less fitted"
    values = np.array([line.value for line in lines] or [axis.value_of(mark) for mark in axis.marks])
    found = grid_residuals(axes, lines) if lines else np.array([mark.residual or 0.0 for mark in axis.marks])
    reach = COVERAGE_FACTOR * np.array([line.sd / np.sqrt(len(line.points)) for line in lines] or np.zeros(values.size))
    panel.errorbar(values, found, yerr=reach, fmt="o", markersize=3.2, color=INK, linewidth=0.7, capsize=1.5)
    _scale(panel, axes, name)
    _finish(panel, found, what.format(axis.quantity.replace("_", "-")), unit)
    rms = float(np.sqrt(np.mean(found**2))) if found.size else 0.0
    words, place = f"{values.size} of them, RMS {rms:.3f} {unit}", panel.transAxes
    panel.text(1, 1.03, words, fontsize=7, color=QUIET, ha="right", transform=place)


def _scale(panel: Canvas, axes: Axes, name: str) -> None:
    """The panel's level axis is that of the plot, from one of its sides to the other."""
    axis, index = (axes.current, 0) if name == "current" else (axes.value, 1)
    x0, y0, x1, y1 = axes.frame
    ends = axes.values([(x0, y0), (x1, y0), (x0, y1), (x1, y1)])[index]
    panel.set_xscale(axis.scale)
    panel.set_xlim(ends.min(), ends.max())
    panel.xaxis.set_major_formatter(
        lambda value, _: value_label(value, axis.quantity) if index else current_label(value, axis.base)
    )
    panel.xaxis.set_minor_formatter(NullFormatter())


def _draw_curves(panel: Canvas, axes: Axes, traced: Sequence[ReadCurve], unit: str) -> None:
    everything = []
    for index, read in enumerate(traced):
        distances = curve_distances(axes, read)
        everything.append(distances)
        colour = device_ink(index).colour
        panel.plot(read.current, distances, ".", markersize=1.4, color=colour, alpha=0.55, zorder=2)
        panel.plot([], [], color=colour, linestyle=LINE_STYLE[read.curve.edge], label=_curve_words(read))
    _scale(panel, axes, "current")
    _finish(panel, np.concatenate(everything), "Places of the lines: distance from the fitted curve", unit)
    panel.legend(frameon=False, fontsize=7, loc="upper left", bbox_to_anchor=(0, -0.1), ncols=4, borderpad=0)


def _curve_words(read: ReadCurve) -> str:
    at = "".join(f", {name} = {value:g}" for name, value in sorted(read.curve.at.items()))
    return f"{read.curve.element} {read.curve.edge}{at}"


def _finish(panel: Canvas, found: Floats, title: str, unit: str) -> None:
    span = max(LEAST_SPAN, 1.15 * float(np.nanmax(np.abs(found), initial=0.0)))
    panel.set_ylim(-span, span)
    panel.axhline(0.0, color=GRAPHITE, linewidth=0.6, zorder=1)
    panel.grid(which="major", color=MAJOR, linewidth=0.4)
    panel.grid(which="minor", axis="x", color=MINOR, linewidth=0.3)
    panel.set_axisbelow(True)
    panel.tick_params(labelsize=7, length=3, width=0.5)
    panel.set_ylabel(unit, fontsize=7.5)
    panel.text(0, 1.03, title, fontsize=8, fontweight="bold", transform=panel.transAxes)
