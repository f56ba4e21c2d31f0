"""The boundary of a filled area that has no outline, read from a guide place at its edge."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from curvelab.reading.digitise import digitise
from demo_curves.drawing.design import BandFill
from demo_curves.drawing.files import image_file
from demo_curves.drawing.layout import lay_out
from demo_curves.drawing.render import raster
from demo_curves.drawing.worksheet import Clicks, WorksheetHead, worksheet_text
from tests.benchmark.guided import joined
from tests.drawing.shapes import KINDS
from tests.drawing.styles import styled
from tests.drawn import score


@pytest.mark.parametrize(("seed", "colour"), [(45, "#b9cfe4"), (47, "#e8d2c0"), (48, "#b9cfe4")])
def test_a_tint_without_outline_is_read_by_its_edge(seed: int, colour: str, tmp_path: Path) -> None:
    subject = KINDS["breaker"](np.random.default_rng(seed))
    design = styled(replace(subject, bands=()), np.random.default_rng(seed), line_art=False)
    plot = design.plots[0]
    bare = tuple(replace(curve, width_pt=0.0, labels=()) for curve in plot.curves)
    plot = replace(plot, curves=bare, bands=(BandFill(between=("fast", "slow"), colour=colour),), legend=())
    design = replace(design, plots=(plot,))
    drawn = lay_out(design)
    truth = drawn.truth.to_pixels()
    (tmp_path / "tint.png").write_bytes(image_file(raster(drawn, design.page, "agg"), "png", design.page.dpi))
    head = WorksheetHead(file="tint.png", document={"title": "Tint"}, devices=subject.devices)
    text = worksheet_text(truth, head, Clicks(seed=seed, guides=2))
    (tmp_path / "tint.toml").write_text(text, encoding="utf-8")
    reading = digitise(tmp_path / "tint.toml")
    for line, read in zip(truth.plots[0].curves, reading.curves, strict=True):
        assert read.trace is not None
        assert read.trace.boundary
        current, value = joined(read.curve)
        found = score(truth.plots[0], line.design.name, current, value)
        # grid lines cross the edge and are bridged; a stroke is read to 0.05
        assert found.rms <= 0.15
        assert found.completeness >= 0.97
    assert [warning.code for warning in reading.warnings].count("area-edge") == 2
