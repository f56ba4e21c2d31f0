"""Guided traces of sheets drawn at random, against the exact truth; the axes are the truth's, so only tracing errs."""

import numpy as np
import pytest

from curvelab.trace.guided import trace_guided
from curvelab.trace.prepare import prepare
from tests.drawn import random_sheet
from tests.trace.truthful import TraceScore, axes_of, guides_of, score_trace, sheet_of

SEEDS = (3, 4, 6)


def traced(seed: int, quality: str) -> list[TraceScore]:
    drawn = random_sheet(seed, quality)
    sheet, plot = sheet_of(drawn), drawn.truth.plots[0]
    prepared = prepare(sheet, axes_of(sheet, plot))
    guides = guides_of(drawn)
    return [score_trace(trace_guided(prepared, guides[c.design.name])[0], c) for c in plot.curves]


@pytest.mark.parametrize(
    ("quality", "rms", "completeness"),
    [("clean", 0.05, 0.99), ("snapped", 0.05, 0.99), ("stepped", 0.3, 0.99), ("grey", 0.15, 0.98)],
)
def test_lines_are_followed_to_a_fraction_of_a_pixel(quality: str, rms: float, completeness: float) -> None:
    scores = [score for seed in SEEDS for score in traced(seed, quality)]
    assert np.sqrt(np.mean([score.rms**2 for score in scores])) < rms
    assert min(score.completeness for score in scores) > completeness
    assert np.mean([score.inside for score in scores]) > 0.9


def test_exact_strokes_are_exact() -> None:
    scores = [score for seed in (0, 1, 2) for score in traced(seed, "vector")]
    # 1e-4 decade is 0.01 pt at 100 pt a decade
    assert max(score.largest for score in scores) < 0.01
    assert min(score.completeness for score in scores) > 0.999
