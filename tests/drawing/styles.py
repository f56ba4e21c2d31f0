"""Random looks: page, frame, grid, widths, colours, dashes, labels and faces for a subject."""

import math
from dataclasses import replace

import numpy as np

from demo_curves.drawing.design import (
    CurveDesign,
    CurveLabel,
    GridStyle,
    Note,
    Page,
    PlotDesign,
    SheetDesign,
    TitleBlock,
)
from tests.drawing.shapes import Subject

COLOURS = ("#000000", "#b02020", "#1a3f9c", "#1d6b34", "#6a2c7f", "#303030")
GRIDS = (("#808080", "#c4c4c4"), ("#5a5a5a", "#b0b0b0"), ("#7ba37b", "#c3dcc3"), ("#d08a70", "#efcfc2"))
LINE_ART_GRID = ("#303030", "#484848")
MINORS = ((2, 3, 4, 5, 6, 7, 8, 9), (2, 3, 4, 5, 6, 8), (2, 5))


def styled(subject: Subject, rng: np.random.Generator, *, line_art: bool) -> SheetDesign:
    """A page for the subject; decades of 150 to 500 px. Line art (to be thresholded) has black lines and no tint."""
    dpi = float(rng.choice([150, 200, 250, 300]))
    per_px = 72.0 / dpi
    decades = [math.log10(axis.high / axis.low) for axis in (subject.current, subject.time)]
    lengths_px = [_decade_px(count, limit, rng) for count, limit in zip(decades, (1900, 2300), strict=True)]
    left, top = rng.uniform(62, 90), rng.uniform(58, 90)
    right = left + decades[0] * lengths_px[0] * per_px
    bottom = top + decades[1] * lengths_px[1] * per_px
    page = Page(
        width_px=math.ceil((right + rng.uniform(30, 60)) / per_px),
        height_px=math.ceil((bottom + rng.uniform(80, 120)) / per_px),
        dpi=dpi,
    )
    plot = PlotDesign(
        frame_pt=(left, top, right, bottom),
        current=subject.current,
        value=subject.time,
        curves=tuple(_dressed(curve, rng, per_px, line_art=line_art) for curve in subject.curves),
        grid=_line_art_grid(rng, per_px) if line_art else _grid(rng, per_px),
        bands=() if line_art else subject.bands,
        tick_size_pt=float(rng.uniform(7, 9)),
    )
    block = TitleBlock(
        at_pt=(left, bottom + 46), width_pt=right - left, rows=((("Sheet", "Trial"), ("Scale", "log / log")),)
    )
    return SheetDesign(
        page=page,
        plots=(plot,),
        font=str(rng.choice(["sans", "serif", "mono", "stix"])),
        notes=(Note(text=subject.title, at_pt=(left, 30), size_pt=13, bold=True),),
        title_block=block if rng.integers(2) else None,
    )


def _decade_px(decades: float, largest_px: float, rng: np.random.Generator) -> float:
    return float(rng.uniform(min(220.0, largest_px / decades - 10.0), min(500.0, largest_px / decades)))


def _grid(rng: np.random.Generator, per_px: float) -> GridStyle:
    major, minor = GRIDS[rng.integers(len(GRIDS))]
    thin = rng.uniform(0.8, 1.5)
    return GridStyle(
        major_width_pt=thin * rng.uniform(1.0, 1.8) * per_px,
        minor_width_pt=thin * per_px,
        major_colour=major,
        minor_colour=minor,
        minor=MINORS[rng.integers(len(MINORS))],
        frame_width_pt=rng.uniform(1.5, 3.0) * per_px,
    )


def _line_art_grid(rng: np.random.Generator, per_px: float) -> GridStyle:
    major, minor = LINE_ART_GRID
    return replace(
        _grid(rng, per_px),
        major_colour=major,
        minor_colour=minor,
        minor_width_pt=1.3 * per_px,
        major_width_pt=rng.uniform(1.5, 2.2) * per_px,
    )


def _dressed(curve: CurveDesign, rng: np.random.Generator, per_px: float, *, line_art: bool) -> CurveDesign:
    """A line of 1 to 4 px, one in four dashed, one in three with words on it or beside it."""
    dash = tuple(np.array([rng.uniform(10, 24), rng.uniform(4, 8)]) * per_px) if rng.random() < 0.25 else ()
    on_line = bool(rng.integers(2))
    label = CurveLabel(
        text=curve.name,
        along=float(rng.uniform(0.25, 0.75)),
        offset_pt=(0.0, 0.0) if on_line else (14.0, -8.0),
        boxed=on_line,
        leader=False,
        size_pt=7.0,
    )
    return replace(
        curve,
        colour=COLOURS[0 if line_art else rng.integers(len(COLOURS))],
        width_pt=rng.uniform(2.4 if line_art else 1.3, 4.0) * per_px,
        dash_pt=dash,
        labels=(label,) if rng.random() < 0.35 else (),
    )
