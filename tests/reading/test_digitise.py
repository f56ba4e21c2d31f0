"""The way of a reading on one drawn page: what comes out, what is refused in one line, what is the same twice."""

import json
import re
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from curvelab.errors import InputError
from curvelab.reading.as_json import json_text, reading_json
from curvelab.reading.complete import completed
from curvelab.reading.digitise import digitise, read
from curvelab.records.reading import Reading
from curvelab.worksheets.write import worksheet_text
from tests.drawn import DrawnSheet, random_sheet, score


@pytest.fixture(scope="module")
def sheet() -> DrawnSheet:
    return random_sheet(8, "clean", kind="relay")


@pytest.fixture(scope="module")
def folder(sheet: DrawnSheet, tmp_path_factory: pytest.TempPathFactory) -> Path:
    place = tmp_path_factory.mktemp("sheet")
    sheet.written(place)
    return place


@pytest.fixture(scope="module")
def path(sheet: DrawnSheet, folder: Path) -> Path:
    return (folder / sheet.name).with_suffix(".toml")


@pytest.fixture(scope="module")
def reading(path: Path) -> Reading:
    return digitise(path)


def test_every_line_is_read_to_a_small_part_of_a_pixel(sheet: DrawnSheet, reading: Reading) -> None:
    plot = sheet.truth.plots[0]
    for truth, read_curve in zip(plot.curves, reading.curves, strict=True):
        found = score(plot, truth.design.name, read_curve.curve.parts[0].current, read_curve.curve.parts[0].value)
        # the figure a clean page must reach, see the benchmark
        assert found.rms <= 0.05
        assert found.completeness >= 0.99


def test_time_multipliers_scale_the_lines_they_are_drawn_for(reading: Reading) -> None:
    curves = reading.devices[0].curves
    assert {curve.time_setting for curve in curves} == {"tms"}
    assert {curve.time_setting_at for curve in curves} == {0.1, 0.3, 1.0}


def test_stated_uncertainties_are_never_zero(reading: Reading) -> None:
    for each in reading.curves:
        for part in each.curve.parts:
            stated = np.concatenate([part.sd_current, part.sd_value, part.sd_common])
            assert np.all(stated[~np.isnan(stated)] > 0)


def test_the_same_worksheet_gives_the_same_json(path: Path, reading: Reading) -> None:
    assert json_text(reading_json(digitise(path))) == json_text(reading_json(reading))


def test_the_completed_worksheet_repeats_the_reading(folder: Path, reading: Reading) -> None:
    again = folder / "again.toml"
    again.write_text(worksheet_text(completed(reading)), encoding="utf-8")
    first, second = reading_json(reading), reading_json(digitise(again))
    assert json.dumps(first["bands"]) == json.dumps(second["bands"])
    assert second["sheet"]["sha256"] in again.read_text(encoding="utf-8")


def changed(folder: Path, path: Path, edits: dict[str, str]) -> Path:
    """A copy of the worksheet in which the first entry of each key stands as given."""
    text = path.read_text(encoding="utf-8")
    for key, line in edits.items():
        text, count = re.subn(
            rf"^{key} = (\[\n(.|\n)*?\n\]|.*)$", lambda _, line=line: line, text, count=1, flags=re.MULTILINE
        )
        assert count == 1, key
    copy = folder / "changed.toml"
    copy.write_text(text, encoding="utf-8")
    return copy


REFUSED = {
    "marks coincide": (
        {"marks": "marks = [{ at = [400.0, 300.0], value = 1 }, { at = [400.5, 300.0], value = 10 }]"},
        "400",
    ),
    "mark off the page": (
        {"marks": "marks = [{ at = [400, 300], value = 1 }, { at = [99999, 300], value = 10 }]"},
        "99999",
    ),
    "value not positive": ({"marks": "marks = [{ at = [400, 300], value = 0 }, { at = [700, 300], value = 10 }]"}, "0"),
    "no line there": ({"through": "through = [[3.0, 3.0]]"}, "(3"),
    "another file": ({"file": 'file = "other.png"'}, "other.png"),
    "file outside": ({"file": 'file = "../other.png"'}, "../other.png"),
    "changed file": ({"file": None}, "SHA-256"),
    "unknown key": ({"scale": 'scael = "log"'}, "scael"),
    "unknown unit": ({"unit": 'unit = "furlong"'}, "furlong"),
}


@pytest.mark.parametrize(("edits", "named"), REFUSED.values(), ids=REFUSED.keys())
def test_bad_input_is_refused_in_one_line(
    folder: Path, path: Path, sheet: DrawnSheet, edits: dict[str, str | None], named: str
) -> None:
    lines = {key: line or f'file = "{sheet.name}"\nsha256 = "{"0" * 64}"' for key, line in edits.items()}
    with pytest.raises(InputError) as refusal:
        digitise(changed(folder, path, lines))
    assert named in str(refusal.value)
    assert "\n" not in str(refusal.value)


def test_guides_on_different_lines_are_refused(path: Path, reading: Reading) -> None:
    worksheet = reading.worksheet
    first, second, *others = worksheet.curves
    mixed = replace(first, through=(first.through[0], second.through[-1]))
    with pytest.raises(InputError, match="different lines"):
        read(replace(worksheet, curves=(mixed, second, *others)), path.parent)


def test_a_page_out_of_range_is_refused(folder: Path, sheet: DrawnSheet) -> None:
    with pytest.raises(InputError, match="page"):
        digitise(folder / sheet.name, page=2)


def test_work_can_be_stopped(path: Path) -> None:
    stages = []

    def watch(stage: str, fraction: float) -> None:
        stages.append((stage, fraction))
        if stage == "Tracing curves":
            raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        digitise(path, watch=watch)
    assert stages[0] == ("Opening the sheet", 0.0)
