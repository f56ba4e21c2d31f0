"""Random sheets: the same from the same seed, and their truth lies on their ink whatever was done to the page."""

import tomllib
from pathlib import Path

import numpy as np
import pytest
from scipy.ndimage import map_coordinates

from demo_curves.drawing.degrade import Scan, scanned
from demo_curves.drawing.design import Page
from demo_curves.drawing.files import pixels_of
from demo_curves.drawing.geometry import densified
from demo_curves.drawing.ink import Fill, Stroke, rectangle
from demo_curves.drawing.layout import DrawnPage, lay_out
from demo_curves.drawing.render import grey
from tests.drawing.shapes import KINDS
from tests.drawing.styles import styled
from tests.drawn import QUALITIES, random_sheet, score

OFFSETS = np.arange(-8.0, 8.01, 0.25)


def offsets_along_normals(dark: np.ndarray, points: np.ndarray) -> np.ndarray:
    """Centre of gravity across the line at the middle of each segment, px."""
    middle = (points[1:] + points[:-1]) / 2
    direction = np.diff(points, axis=0)
    direction /= np.hypot(*direction.T)[:, None]
    normal = np.column_stack([-direction[:, 1], direction[:, 0]])
    at = middle[:, None, :] + OFFSETS[None, :, None] * normal[:, None, :]
    levels = map_coordinates(dark, [at[:, :, 1], at[:, :, 0]], order=1)
    return (levels * OFFSETS).sum(axis=1) / levels.sum(axis=1)


@pytest.mark.parametrize("renderer", ["agg", "resvg", "pdfium"])
def test_a_scanned_line_lies_where_its_truth_says(renderer: str) -> None:
    page = Page(width_px=700, height_px=900, dpi=200)
    design = styled(KINDS["relay"](np.random.default_rng(3)), np.random.default_rng(3), line_art=True)
    drawn = lay_out(design)
    name = drawn.truth.plots[0].curves[0].design.name
    line = drawn.truth.plots[0].curve(name).places
    inside = line[(line[:, 0] < 240) & (line[:, 1] < 310)]
    white = Fill(points=rectangle(0, 0, page.width_pt, page.height_pt), colour="#ffffff")
    ink = (white, Stroke(points=inside, width_pt=1.0, colour="#000000"))
    scan = Scan(angle_deg=1.3, stretch=(1.002, 0.998), noise=0.0, light=0.0, paper=255.0, ink=0.0, renderer=renderer)
    pixels, truth = scanned(DrawnPage(ink=ink, truth=drawn.truth), page, scan)
    scale = page.dpi / 72.0
    expected = truth.plots[0].place_map.forward(inside * scale - 0.5)
    away = offsets_along_normals(255.0 - pixels.astype(float), expected)[5:-5]
    assert abs(np.mean(away)) < 0.008
    assert np.std(away) < 0.03


@pytest.mark.parametrize("quality", sorted(QUALITIES))
def test_the_same_seed_gives_the_same_sheet(quality: str) -> None:
    first, again = (random_sheet(7, quality, QUALITIES[quality][0], "relay") for _ in range(2))
    assert first.data == again.data
    assert first.worksheet == again.worksheet
    assert random_sheet(12, quality, QUALITIES[quality][0], "relay").data != first.data


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_guides_lie_on_dark_ink_near_their_line(kind: str) -> None:
    sheet = random_sheet(11, "clean", renderer="agg", kind=kind)
    plot = sheet.truth.plots[0]
    worksheet = tomllib.loads(sheet.worksheet)
    assert len(worksheet["curves"]) == len(plot.curves)
    for curve, entry in zip(plot.curves, worksheet["curves"], strict=True):
        for place in entry["through"]:
            assert np.min(np.hypot(*(densified(curve.places, 0.5) - place).T)) < 6.0
    dark = 255 - grey(pixels_of(sheet.data)) if pixels_of(sheet.data).ndim == 3 else 255 - pixels_of(sheet.data)
    for curve in plot.curves:
        for run in curve.visible_runs():
            middle = np.rint(run[len(run) // 2]).astype(int)
            if not curve.design.dash_pt:
                assert dark[middle[1], middle[0]] > 60


def test_marks_lie_on_their_grid_lines_within_the_hands_scatter() -> None:
    sheet = random_sheet(5, "grey")
    plot = sheet.truth.plots[0]
    worksheet = tomllib.loads(sheet.worksheet)
    off = []
    for mark in worksheet["axes"]["current"]["marks"]:
        top = plot.places(np.array([mark["value"] * plot.current.scale]), np.array([plot.value.low]))[0]
        off.append(abs(top[0] - mark["at"][0]))
    assert max(off) < 4.0
    assert min(off) > 0.0


def test_a_reading_is_scored_by_its_normal_distance_and_its_reach() -> None:
    plot = random_sheet(4, "clean", kind="relay").truth.plots[0]
    curve = plot.curves[0]
    name = curve.design.name
    exact = score(plot, name, curve.current, curve.value)
    assert exact.largest < 1e-9
    assert exact.completeness == 1.0
    half = len(curve.current) // 2
    part = score(plot, name, curve.current[:half], curve.value[:half])
    assert 0.2 < part.completeness < 0.8
    per_decade = abs(plot.matrix[1, 1])
    moved = score(plot, name, curve.current, curve.value * 10.0 ** (1.0 / per_decade))
    assert 0.2 < moved.rms < 1.0
    assert score(plot, name, np.array([np.nan]), np.array([np.nan])).completeness == 0.0


def test_files_are_written_side_by_side(tmp_path: Path) -> None:
    worksheet = random_sheet(1, "vector").written(tmp_path)
    named = tomllib.loads(worksheet.read_text(encoding="utf-8"))["sheet"]["file"]
    assert (tmp_path / named).read_bytes().startswith(b"%PDF")
