"""From a design to ink on the page, and to the truth about it."""

from dataclasses import dataclass

import numpy as np

from demo_curves.drawing.design import BandFill, CurveDesign, PlotDesign, SheetDesign
from demo_curves.drawing.furniture import axis_words, legend_ink, note_ink, title_block_ink
from demo_curves.drawing.geometry import Box, Points, clipped, hatching, split_at_boxes
from demo_curves.drawing.ink import Fill, Ink, Stroke, rectangle
from demo_curves.drawing.labels import label_ink
from demo_curves.drawing.scales import grid_lines, place_matrix, places
from demo_curves.drawing.truth import CurveTruth, PlotTruth, SheetTruth


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class DrawnPage:
    """Ink in drawing order, and the truth in points."""

    ink: tuple[Ink, ...]
    truth: SheetTruth


def lay_out(design: SheetDesign) -> DrawnPage:
    """Ink and truth of a sheet."""
    page = design.page
    ink: list[Ink] = [Fill(points=rectangle(0, 0, page.width_pt, page.height_pt), colour=page.paper)]
    if design.border_pt:
        edge = design.border_pt
        box = rectangle(edge, edge, page.width_pt - edge, page.height_pt - edge)
        ink.append(Stroke(points=box, width_pt=0.8, colour="#000000"))
    over: list[Ink] = []
    hidden: list[Box] = []
    for plot in design.plots:
        ink += _plot_ink(plot)
        for curve in plot.curves:
            for label in curve.labels:
                _extend(over, hidden, label_ink(label, curve, curve_runs(curve, plot), design.font))
        _extend(over, hidden, legend_ink(plot, design.font))
        over += axis_words(plot, design.font)
    for note in design.notes:
        _extend(over, hidden, note_ink(note, design.font))
    if design.title_block is not None:
        over += title_block_ink(design.title_block, design.font)
    plots = tuple(_plot_truth(plot, hidden) for plot in design.plots)
    truth = SheetTruth(width=page.width_pt, height=page.height_pt, unit="pt", dpi=page.dpi, plots=plots)
    return DrawnPage(ink=(*ink, *over), truth=truth)


def _extend(over: list[Ink], hidden: list[Box], drawn: tuple[list[Ink], list[Box]]) -> None:
    over += drawn[0]
    hidden += drawn[1]


def curve_runs(curve: CurveDesign, plot: PlotDesign) -> list[Points]:
    """The stretches of a curve inside the frame, in points."""
    return clipped(places(place_matrix(plot), curve.current, curve.value), plot.frame_pt)


def _plot_ink(plot: PlotDesign) -> list[Ink]:
    ink: list[Ink] = []
    for band in plot.bands:
        ink += _band_ink(plot, band)
    ink += _grid_ink(plot)
    ink.append(
        Stroke(points=rectangle(*plot.frame_pt), width_pt=plot.grid.frame_width_pt, colour=plot.grid.frame_colour)
    )
    for curve in plot.curves:
        if curve.width_pt > 0:
            ink += [
                Stroke(points=run, width_pt=curve.width_pt, colour=curve.colour, dash_pt=curve.dash_pt)
                for run in curve_runs(curve, plot)
            ]
    return ink


def _grid_ink(plot: PlotDesign) -> list[Ink]:
    left, top, right, bottom = plot.frame_pt
    matrix = place_matrix(plot)
    strokes: list[tuple[bool, Ink]] = []
    for column, axis in enumerate((plot.current, plot.value)):
        row = int(np.flatnonzero(matrix[:, column])[0])
        for line in grid_lines(axis, plot.grid.minor):
            at = matrix[row, column] * np.log10(line.value * axis.scale) + matrix[row, 2]
            ends = [[at, top], [at, bottom]] if row == 0 else [[left, at], [right, at]]
            width = plot.grid.major_width_pt if line.major else plot.grid.minor_width_pt
            colour = plot.grid.major_colour if line.major else plot.grid.minor_colour
            strokes.append((line.major, Stroke(points=np.array(ends), width_pt=width, colour=colour)))
    return [stroke for _, stroke in sorted(strokes, key=lambda item: item[0])]


def _band_ink(plot: PlotDesign, band: BandFill) -> list[Ink]:
    """A band's area. Its two lines must enter and leave the frame so that the closing lines run along it."""
    first, second = (next(curve for curve in plot.curves if curve.name == name) for name in band.between)
    one, two = (np.vstack(curve_runs(curve, plot)) for curve in (first, second))
    corners = _frame_corners(one[-1], two[-1], plot.frame_pt)
    polygon = np.vstack([one, *corners, two[::-1], *_frame_corners(two[0], one[0], plot.frame_pt)])
    if not band.hatch_pt:
        return [Fill(points=polygon, colour=band.colour)]
    return [
        Stroke(points=line, width_pt=band.hatch_width_pt, colour=band.colour)
        for line in hatching(polygon, band.hatch_pt)
    ]


def _frame_corners(start: Points, end: Points, frame: Box) -> list[Points]:
    """The frame corner between two ends on neighbouring sides, if they lie so."""
    left, top, right, bottom = frame
    near = 1e-6
    for x in (left, right):
        for y in (top, bottom):
            on_x, on_y = abs(start[0] - x) < near, abs(end[1] - y) < near
            if (on_x and on_y) or (abs(end[0] - x) < near and abs(start[1] - y) < near):
                return [np.array([[x, y]])]
    return []


def _plot_truth(plot: PlotDesign, hidden: list[Box]) -> PlotTruth:
    matrix = place_matrix(plot)
    curves = []
    for curve in plot.curves:
        for run in curve_runs(curve, plot):
            split, visible = split_at_boxes(run, hidden)
            logs = np.linalg.solve(matrix[:, :2], (split - matrix[:, 2]).T)
            curves.append(
                CurveTruth(design=curve, current=10.0 ** logs[0], value=10.0 ** logs[1], places=split, visible=visible)
            )
    return PlotTruth(
        matrix=matrix,
        frame=plot.frame_pt,
        current=plot.current,
        value=plot.value,
        current_direction=plot.current_direction,
        current_lines=tuple(grid_lines(plot.current, plot.grid.minor)),
        value_lines=tuple(grid_lines(plot.value, plot.grid.minor)),
        curves=tuple(curves),
    )
