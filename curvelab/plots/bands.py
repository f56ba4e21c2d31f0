"""The bands of one device or several on log-log paper, a page to print."""

from collections.abc import Sequence
from pathlib import Path

from matplotlib import rc_context
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Polygon

from curvelab.plots.header import draw_header, header_height
from curvelab.plots.ink import FILL, HALO, HATCH, LINE_STYLE, LINE_WIDTH, PAPER, STYLE
from curvelab.plots.limits import draw_limit, placed_limits
from curvelab.plots.paper import Paper, draw_paper
from curvelab.plots.save import picture_format, save_figure
from curvelab.plots.shapes import between_outlines, halo_outlines
from curvelab.plots.sides import draw_strip, shade_undecided, strip_height
from curvelab.plots.subject import Subject, amperes_per_unit, ranges, subjects_of, units_per_unit
from curvelab.plots.tags import draw_tags
from curvelab.records.curve import Curve, Edge
from curvelab.records.device import DeviceRecord
from curvelab.records.finding import Finding
from curvelab.records.stretch import Sides

A4_INCHES = (8.27, 11.69)
DPI = 200
LEFT, RIGHT, BOTTOM, SLIM = 0.13, 0.115, 0.065, 0.022
"""Margins about the axes, and beneath a strip, as fractions of the page."""
TOP_SCALE = 0.022
"""What a second current scale on top takes of the page."""


def draw_bands(
    devices: Sequence[DeviceRecord],
    path: str | Path,
    *,
    findings: Sequence[Finding] = (),
    sides: Sequence[Sides] = (),
    quantity: str = "time",
) -> None:
    """Draw the curves of devices over each other on one A4 page, as PNG, SVG or PDF by the file's ending.

    Devices of one base and rating are drawn in it, others in amperes. Fast edges are thin, slow edges thick, mean lines
    dashed; the interval of 95 % is a halo of true width; each gap stays open.

    Parameters
    ----------
    devices : sequence of DeviceRecord
        An adjustable device's curves are turned into amperes at the settings they are drawn for.
    path : path
    findings : sequence of Finding
        Their limits are drawn as brackets open to the permitted side; of a time-current plot only.
    sides : sequence of Sides
        Who clears first: a strip beneath; where one pair alone is undecided, the plot is shaded.
    quantity : str
        ``time``, ``let_through`` or ``peak``.

    Raises
    ------
    DeviceError
        There is nothing to draw, or currents cannot be turned into amperes.
    InputError
        The picture cannot be written under that name.
    """
    picture_format(path)
    save_figure(bands_figure(devices, findings=findings, sides=sides, quantity=quantity), path)


def bands_figure(
    devices: Sequence[DeviceRecord],
    *,
    findings: Sequence[Finding] = (),
    sides: Sequence[Sides] = (),
    quantity: str = "time",
    free: tuple[float, float] = (0.0, 0.0),
) -> Figure:
    """The figure of `draw_bands`; of the page, ``free`` above and beneath is left to others."""
    subjects, base = subjects_of(devices, quantity)
    limits = placed_limits(findings, subjects, base) if quantity == "time" else ()
    amperes = amperes_per_unit(subjects, base)
    currents, values = ranges(
        (curve for subject in subjects for curve in subject.curves), [(each.current, each.time_s) for each in limits]
    )
    paper = Paper(base=base, quantity=quantity, currents=currents, values=values, amperes_per_unit=amperes)
    with rc_context(STYLE):
        figure = Figure(figsize=A4_INCHES, dpi=DPI, facecolor=PAPER)
        above, beneath = free
        top = above + header_height(subjects) + (TOP_SCALE if amperes is not None else 0.0)
        bottom = beneath + (SLIM + strip_height(sides) if sides else BOTTOM)
        axes = draw_paper(figure, (LEFT, bottom, 1 - LEFT - RIGHT, 1 - bottom - top), paper)
        for subject in subjects:
            _draw_subject(axes, subject)
        draw_tags(axes, subjects)
        for limit in limits:
            draw_limit(axes, limit)
        if sides:
            units_per_a = units_per_unit(subjects[0], "A", base) or 1.0
            draw_strip(figure, axes, subjects, sides, units_per_a)
            if len(sides) == 1:
                shade_undecided(axes, sides[0], units_per_a)
        draw_header(figure, subjects, LEFT, above)
    return figure


def _draw_subject(axes: Axes, subject: Subject) -> None:
    colour = subject.ink.colour
    for band in subject.bands:
        if band.fast is not None and band.slow is not None:
            for outline in between_outlines(band.fast, band.slow, axes.get_ylim()[0]):
                axes.add_patch(Polygon(outline, facecolor=(colour, FILL), edgecolor="none", zorder=2))
                if subject.ink.hatch:
                    # The hatch takes the edge's colour; without a width the edge itself is not drawn.
                    ink = (colour, HATCH)
                    axes.add_patch(Polygon(outline, fill=False, edgecolor=ink, linewidth=0, hatch=subject.ink.hatch))
        for edge, curve in band.edges.items():
            _draw_edge(axes, edge, curve, colour)


def _draw_edge(axes: Axes, edge: Edge, curve: Curve, colour: str) -> None:
    for outline in halo_outlines(curve):
        axes.add_patch(Polygon(outline, facecolor=(colour, HALO), edgecolor="none", zorder=3))
    for part in curve.parts:
        axes.plot(
            part.current,
            part.value,
            color=colour,
            linewidth=LINE_WIDTH[edge],
            linestyle=LINE_STYLE[edge],
            solid_capstyle="butt",
            solid_joinstyle="miter",
            zorder=4,
        )
