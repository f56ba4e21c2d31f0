"""A line that is found and is no curve is told and left out; it never stops the reading of the others."""

from pathlib import Path

import pytest

import curvelab
from curvelab.errors import FitError
from curvelab.reading import model
from curvelab.records.trace import Trace

SHEET = Path(__file__).parents[2] / "demo_curves" / "sheets" / "vector" / "mcb-b.pdf"


def test_a_line_that_is_no_curve_is_left_out_with_a_warning(monkeypatch: pytest.MonkeyPatch) -> None:
    whole = curvelab.digitise(SHEET)
    assert len(whole.curves) == 2
    fit_points = model.fit_points

    def one_scatters(trace: Trace, *rest: object) -> object:
        if abs(trace.places[:, 0].max() - whole.curves[0].trace.places[:, 0].max()) < 1.0:  # type: ignore[union-attr]
            raise FitError("The points scatter")
        return fit_points(trace, *rest)  # type: ignore[arg-type]

    monkeypatch.setattr(model, "fit_points", one_scatters)
    part = curvelab.digitise(SHEET)
    assert len(part.curves) == len(part.worksheet.curves) == 1
    (told,) = [warning for warning in part.warnings if warning.code == "line-no-curve"]
    assert told.at == whole.worksheet.curves[0].through[0]
