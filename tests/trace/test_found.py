"""Curves found without guides: every printed line once, exactly as its guide leads to it, and nothing else."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from curvelab.axes.calibrate import calibrate
from curvelab.lettering.read import read_words
from curvelab.records.axes import Axes
from curvelab.sheets.open import open_sheet
from curvelab.trace.find import FoundLines, find_lines
from curvelab.trace.guided import trace_guided
from curvelab.trace.hatching import hatch_lines
from curvelab.trace.prepare import prepare
from curvelab.trace.prepared import Prepared
from curvelab.worksheets.read import read_worksheet
from demo_curves.drawing.design import BandFill
from demo_curves.drawing.files import image_file
from demo_curves.drawing.layout import lay_out
from demo_curves.drawing.render import raster
from demo_curves.drawing.worksheet import Clicks, WorksheetHead, worksheet_text
from tests.drawing.shapes import KINDS
from tests.drawing.styles import styled
from tests.drawn import DrawnSheet, random_sheet, score, worded_sheet


def _found(sheet: DrawnSheet, folder: Path) -> tuple[Prepared, FoundLines]:
    """The lines of a sheet of which the axes are given."""
    given = read_worksheet(sheet.written(folder))
    assert given.current is not None
    opened = open_sheet(folder / sheet.name, 1)
    axes, _ = calibrate(opened, given.current, given.value)
    prepared = prepare(opened, axes)
    return prepared, find_lines(prepared, read_words(opened, (axes.frame,)))


def _lines_found(sheet: DrawnSheet, axes: Axes, found: FoundLines) -> dict[str, int]:
    """How many of the found lines each printed line is."""
    plot = sheet.truth.plots[0]
    names = {curve.design.name for curve in plot.curves}
    counts = dict.fromkeys(names, 0)
    for line in found.lines:
        scores = {name: score(plot, name, *axes.values(line.trace.places)) for name in names}
        best = min(names, key=lambda name: scores[name].rms)
        if scores[best].rms < 1.0 and scores[best].completeness > 0.9:
            counts[best] += 1
    return counts


@pytest.mark.parametrize(("seed", "kind"), [(501, "breaker"), (502, "fuse-family"), (503, "residual"), (504, "relay")])
def test_every_line_of_a_clean_page_is_found_once(tmp_path: Path, seed: int, kind: str) -> None:
    sheet = random_sheet(seed, "clean", kind=kind)
    prepared, found = _found(sheet, tmp_path)
    assert set(_lines_found(sheet, prepared.axes, found).values()) == {1}
    assert len(found.lines) == len({curve.design.name for curve in sheet.truth.plots[0].curves})


@pytest.mark.parametrize("kind", ["breaker", "fuse-family", "crossing", "residual", "relay"])
def test_every_line_of_a_vector_page_is_found_once(tmp_path: Path, kind: str) -> None:
    sheet = random_sheet(510, "vector", kind=kind)
    prepared, found = _found(sheet, tmp_path)
    assert set(_lines_found(sheet, prepared.axes, found).values()) == {1}
    assert len(found.lines) == len({curve.design.name for curve in sheet.truth.plots[0].curves})


@pytest.mark.parametrize("quality", ["clean", "vector"])
def test_a_found_line_is_what_its_guide_leads_to(tmp_path: Path, quality: str) -> None:
    prepared, found = _found(random_sheet(521, quality, kind="breaker"), tmp_path)
    for line in found.lines:
        again, _ = trace_guided(prepared, line.guide)
        assert np.array_equal(again.places, line.trace.places)
        assert np.array_equal(again.sd, line.trace.sd)


def test_a_legend_gives_samples_and_no_curves(tmp_path: Path) -> None:
    prepared, found = _found(worded_sheet(40001, "clean"), tmp_path)
    left, top, right, bottom = prepared.axes.frame
    assert len(found.lines) == 4
    level = [line for line in found.short_lines if abs(line.end[1] - line.start[1]) < 2.0]
    assert len(level) == 2
    assert all(left < line.start[0] < line.end[0] < right and top < line.start[1] < bottom for line in level)


def _parallels(offsets: np.ndarray) -> list[np.ndarray]:
    return [np.array([[0.0, offset], [80.0, offset + 80.0]]) for offset in offsets]


def test_evenly_spaced_parallels_are_hatching() -> None:
    spacing = np.array([0.0, 10.0, 20.0, 40.0, 50.0, 60.0, 70.0])
    assert all(hatch_lines(_parallels(spacing)))


def test_a_few_unevenly_spaced_parallels_are_curves() -> None:
    spacing = np.array([0.0, 18.0, 45.0, 60.0, 101.0])
    assert not any(hatch_lines(_parallels(spacing)))


def test_an_area_without_outline_is_found_by_both_its_edges(tmp_path: Path) -> None:
    subject = KINDS["breaker"](np.random.default_rng(45))
    design = styled(replace(subject, bands=()), np.random.default_rng(45), line_art=False)
    plot = design.plots[0]
    bare = tuple(replace(curve, width_pt=0.0, labels=()) for curve in plot.curves)
    band = BandFill(between=("fast", "slow"), colour="#b9cfe4")
    design = replace(design, plots=(replace(plot, curves=bare, bands=(band,), legend=()),))
    drawn = lay_out(design)
    truth = drawn.truth.to_pixels()
    (tmp_path / "tint.png").write_bytes(image_file(raster(drawn, design.page, "agg"), "png", design.page.dpi))
    head = WorksheetHead(file="tint.png", document={}, devices=subject.devices)
    (tmp_path / "tint.toml").write_text(worksheet_text(truth, head, Clicks(seed=45)), encoding="utf-8")
    given = read_worksheet(tmp_path / "tint.toml")
    assert given.current is not None
    opened = open_sheet(tmp_path / "tint.png", 1)
    axes, _ = calibrate(opened, given.current, given.value)
    found = find_lines(prepare(opened, axes), ())
    assert [line.trace.boundary for line in found.lines] == [True, True]
    assert all([warning.code for warning in line.warnings] == ["area-edge"] for line in found.lines)
    for line in found.lines:
        scores = [score(truth.plots[0], name, *axes.values(line.trace.places)) for name in ("fast", "slow")]
        assert min(one.rms for one in scores) < 0.5
