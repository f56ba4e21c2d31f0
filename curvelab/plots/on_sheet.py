"""Stored bands drawn back over the sheet that one of them was read from."""

from collections.abc import Iterator, Sequence
from pathlib import Path

import numpy as np
from matplotlib import rc_context
from matplotlib.figure import Figure
from matplotlib.patches import Polygon

from curvelab.errors import InputError
from curvelab.plots.ground import Ground
from curvelab.plots.ink import HALO, LINE_STYLE, STYLE
from curvelab.plots.placing import Words
from curvelab.plots.save import picture_format, save_figure
from curvelab.plots.shapes import halo_outlines
from curvelab.plots.subject import curves_in_base, subjects_of
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes
from curvelab.records.curve import Curve, Edge
from curvelab.records.device import DeviceRecord
from curvelab.records.reading import Reading

STEP = 0.01
"""Decades between places: on a bent page a straight line in log-log is no straight line on the sheet."""
EDGE_WIDTH: dict[Edge, float] = {"fast": 0.5, "slow": 1.0, "mean": 0.7}


def draw_on_sheet(reading: Reading, devices: Sequence[DeviceRecord], path: str | Path) -> None:
    """Draw the bands of devices over the sheet of a reading, each where its values lie, as PNG, SVG or PDF.

    What lies outside the plot is left out. Fast edges are thin, slow edges thick, mean lines dashed; the interval of
    95 % is a halo of true width.

    Raises
    ------
    DeviceError
        No device has a curve of the sheet's quantity, or its currents cannot be turned into the sheet's.
    InputError
        The reading has no calibrated sheet, or the picture cannot be written under that name.
    """
    picture_format(path)
    save_figure(on_sheet_figure(reading, devices), path)


def on_sheet_figure(reading: Reading, devices: Sequence[DeviceRecord]) -> Figure:
    """The figure of `draw_on_sheet`, one pixel of the sheet on one of its own."""
    sheet, axes = reading.sheet, reading.axes
    if sheet is None or axes is None:
        raise InputError("The reading has no calibrated sheet to draw on", "", "Draw its bands instead")
    subjects, _ = subjects_of(devices, axes.value.quantity)
    with rc_context(STYLE):
        ground = Ground(sheet)
        named: list[tuple[str, str, Floats]] = []
        for subject in subjects:
            for curve in curves_in_base(subject, axes.current.base):
                lines = list(_draw_curve(ground, axes, curve, subject.ink.colour))
                if lines:
                    named.append((f"{subject.name} · {curve.edge}", subject.ink.colour, max(lines, key=len)))
        _draw_names(ground, axes, named)
    return ground.figure


def _draw_curve(ground: Ground, axes: Axes, curve: Curve, colour: str) -> Iterator[Floats]:
    """Each stretch of it inside the plot, as canvas coordinates."""
    for outline in halo_outlines(curve):
        for places in _on_sheet(axes, outline):
            corners = np.column_stack(ground.at(places))
            ground.canvas.add_patch(Polygon(corners, facecolor=(colour, HALO), edgecolor="none", zorder=3))
    for part in curve.parts:
        for places in _on_sheet(axes, np.column_stack([part.current, part.value])):
            ground.line(places, EDGE_WIDTH[curve.edge], color=colour, linestyle=LINE_STYLE[curve.edge], zorder=4)
            yield np.column_stack(ground.at(places))


def _on_sheet(axes: Axes, points: Floats) -> Iterator[Floats]:
    """The places of a polyline of (current, value), each stretch inside the plot's frame by itself."""
    dense = _dense(np.log10(points))
    scaled = np.column_stack([axes.current.scaled(10 ** dense[:, 0]), axes.value.scaled(10 ** dense[:, 1])])
    x0, y0, x1, y1 = axes.frame
    corners = axes.map.scaled([(x0, y0), (x1, y0), (x0, y1), (x1, y1)])
    inside = np.all((scaled >= corners.min(axis=0)) & (scaled <= corners.max(axis=0)), axis=1)
    for stretch in np.split(np.arange(len(dense)), np.flatnonzero(np.diff(inside)) + 1):
        if stretch.size > 1 and inside[stretch[0]]:
            yield axes.map.places(scaled[stretch])


def _dense(line: Floats) -> Floats:
    """A polyline with places no further apart than a step, its corners kept."""
    lengths = np.hypot(*np.diff(line, axis=0).T)
    along = np.concatenate([[0.0], np.cumsum(lengths)])
    even = np.union1d(along, np.arange(0.0, along[-1], STEP))
    return np.column_stack([np.interp(even, along, line[:, column]) for column in (0, 1)])


def _draw_names(ground: Ground, axes: Axes, named: Sequence[tuple[str, str, Floats]]) -> None:
    """Each line's name beside it, where it covers least."""
    if not named:
        return
    words = Words(lines=[line for *_, line in named], letter=ground.letter, room=ground.room(axes))
    for name, colour, line in named:
        place, right = words.beside(line, name)
        ground.write(place, name, colour, (5.0 if right else -5.0, 0.0))
