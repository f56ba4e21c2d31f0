"""The truth of every renderer, measured: the centre of a drawn line lies where its truth says.

A line's dark centre of gravity wanders a little with where its edges fall on the pixels; averaged over a slanted line,
which meets every phase, it is the centre of the line.
"""

import numpy as np
import pytest

from demo_curves.drawing.design import Page
from demo_curves.drawing.ink import Fill, Ink, Stroke, rectangle
from demo_curves.drawing.render import RASTER, grey

PAGE = Page(width_px=610, height_px=903, dpi=211)
SHALLOW = np.array([[50.3, 500.2], [550.7, 620.9]])  # px, centre of the top left pixel (0, 0)
STEEP = np.array([[300.3, 50.2], [360.7, 350.9]])
LARGEST_BIAS_PX = {"agg": 0.005, "agg-snapped": 0.005, "agg-stepped": 0.1, "pdfium": 0.005, "resvg": 0.012}


def ink_at(lines_px: list[np.ndarray], width_px: float) -> tuple[Ink, ...]:
    per_pt = PAGE.dpi / 72.0
    strokes = [Stroke(points=(line + 0.5) / per_pt, width_pt=width_px / per_pt, colour="#000000") for line in lines_px]
    return (Fill(points=rectangle(0, 0, PAGE.width_pt, PAGE.height_pt), colour="#ffffff"), *strokes)


def mean_offset_down(dark: np.ndarray, line: np.ndarray) -> float:
    """Mean of the centre of gravity less the truth over the columns of a shallow line alone on its rows."""
    columns = np.arange(np.ceil(line[0, 0]) + 20, np.floor(line[1, 0]) - 20).astype(int)
    truth = np.interp(columns, line[:, 0], line[:, 1])
    rows = np.arange(int(line[0, 1]) - 20, int(line[1, 1]) + 20)
    window = dark[rows][:, columns]
    return float(np.mean((window * rows[:, None]).sum(axis=0) / window.sum(axis=0) - truth))


@pytest.mark.parametrize("renderer", sorted(RASTER))
@pytest.mark.parametrize("width_px", [1.0, 2.3, 3.7])
def test_a_drawn_line_lies_where_its_truth_says(renderer: str, width_px: float) -> None:
    dark = 255.0 - grey(RASTER[renderer](ink_at([SHALLOW], width_px), PAGE))
    assert dark.shape == (PAGE.height_px, PAGE.width_px)
    assert abs(mean_offset_down(dark, SHALLOW)) < LARGEST_BIAS_PX[renderer]
    across = 255.0 - grey(RASTER[renderer](ink_at([STEEP], width_px), PAGE)).T
    assert abs(mean_offset_down(across, STEEP[:, ::-1])) < LARGEST_BIAS_PX[renderer]


@pytest.mark.parametrize("renderer", sorted(RASTER))
def test_only_the_snapping_renderer_moves_an_upright_line(renderer: str) -> None:
    upright = np.array([[100.37, 50.0], [100.37, 300.0]])
    dark = 255.0 - grey(RASTER[renderer](ink_at([upright], 1.0), PAGE))
    window = dark[100:250, 80:120]
    centre = float((window * np.arange(80, 120)).sum() / window.sum())
    if renderer == "agg-snapped":
        assert centre == pytest.approx(101.0, abs=0.02)
    elif renderer == "agg-stepped":
        assert centre == pytest.approx(100.37, abs=0.51)
    else:
        assert centre == pytest.approx(100.37, abs=0.01)
