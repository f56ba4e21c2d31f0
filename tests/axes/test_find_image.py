"""Axes read from images with nothing given: a clean page, one seen at an angle, and one that is beyond reading."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from curvelab.axes.bending import bend
from curvelab.axes.calibrate import calibrate
from curvelab.errors import AxesError
from curvelab.records.worksheet import AxisEntry
from curvelab.sheets.open import open_sheet
from tests.benchmark.axes import RIGHT, largest_error
from tests.drawn import DrawnSheet, random_sheet

CURRENT = AxisEntry(quantity="current")


def opened(sheet: DrawnSheet, folder: Path):  # type: ignore[no-untyped-def]
    """The sheet as the program opens it."""
    (folder / sheet.name).write_bytes(sheet.data)
    return open_sheet(folder / sheet.name, 1)


def test_a_clean_page_and_the_marks_it_gives(tmp_path: Path) -> None:
    drawn = random_sheet(3002, "clean", kind="fuse-family")
    sheet = opened(drawn, tmp_path)
    axes, warnings = calibrate(sheet, CURRENT, None)
    assert {warning.code for warning in warnings} <= {"grid-snapped"}
    assert largest_error(drawn.truth.plots[0], axes) <= RIGHT
    entries = [
        AxisEntry(
            quantity=axis.quantity,
            scale=axis.scale,
            unit=axis.unit,
            factor=axis.factor,
            direction=axis.direction,
            marks=tuple(replace(mark, residual=None) for mark in axis.marks),
        )
        for axis in (axes.current, axes.value)
    ]
    again, _ = calibrate(sheet, entries[0], entries[1])
    np.testing.assert_allclose(again.map.projective, axes.map.projective, rtol=1e-9)


def test_a_photograph_is_right_or_says_so(tmp_path: Path) -> None:
    drawn = random_sheet(3006, "photo", kind="crossing")
    try:
        axes, warnings = calibrate(opened(drawn, tmp_path), CURRENT, None)
    except AxesError:
        return
    assert bend(axes) > 3.0
    assert "page-bent" in {warning.code for warning in warnings}
    assert largest_error(drawn.truth.plots[0], axes) <= 5 * RIGHT


def test_a_crumpled_photograph_is_refused(tmp_path: Path) -> None:
    drawn = random_sheet(3002, "clean", kind="fuse-family")
    sheet = opened(drawn, tmp_path)
    grey = sheet.pixels.grey
    rows = np.arange(grey.shape[0])
    waves = np.rint(12.0 * np.sin(rows / 40.0)).astype(int)
    columns = np.clip(np.arange(grey.shape[1])[None, :] + waves[:, None], 0, grey.shape[1] - 1)
    crumpled = np.take_along_axis(grey, columns, axis=1)
    crumpled = np.take_along_axis(crumpled, np.clip(rows[:, None] + _folds(grey.shape), 0, rows[-1]), axis=0)
    with pytest.raises(AxesError):
        calibrate(replace(sheet, pixels=replace(sheet.pixels, grey=crumpled, colour=None)), CURRENT, None)


def _folds(shape: tuple[int, int]) -> np.ndarray:  # type: ignore[type-arg]
    """Pixels by which each column is moved down."""
    return np.rint(12.0 * np.sin(np.arange(shape[1]) / 35.0)).astype(int)[None, :]
