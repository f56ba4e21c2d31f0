"""A stored reading is drawn and read again from the library alone."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from curvelab import digitise, open_library
from curvelab.errors import SheetError
from curvelab.paths import shipped
from curvelab.plots.overlay import draw_overlay
from curvelab.reading.rerun import differences, rerun
from curvelab.reading.restore import restored
from curvelab.records.curve import Part
from curvelab.records.evidence import StoredReading
from curvelab.records.reading import Reading

SHEETS = shipped("demo_curves") / "sheets"


@pytest.fixture(scope="module")
def stored(tmp_path_factory: pytest.TempPathFactory) -> StoredReading:
    with open_library(tmp_path_factory.mktemp("library") / "firm.sqlite") as library:
        reading = digitise(SHEETS / "mcb-b.toml")
        library.store(reading, sheet_files=[SHEETS / reading.worksheet.sheet.file])
        (found,) = library.evidence(reading.devices[0].nameplate.key).readings
        return found


def test_the_overlay_is_the_same_years_later(stored: StoredReading, tmp_path: Path) -> None:
    draw_overlay(digitise(SHEETS / "mcb-b.toml"), tmp_path / "then.png")
    draw_overlay(restored(stored, tmp_path), tmp_path / "now.png")
    assert (tmp_path / "then.png").read_bytes() == (tmp_path / "now.png").read_bytes()


def test_a_rerun_with_the_same_version_differs_in_nothing(stored: StoredReading, tmp_path: Path) -> None:
    assert differences(stored.reading, rerun(stored, tmp_path)) == ()


def scaled(reading: Reading, factor: float) -> Reading:
    """The reading as another version might have found it: the first curve a little later."""
    first = reading.curves[0]
    parts = tuple(
        Part(
            current=part.current,
            value=part.value * factor,
            sd_current=part.sd_current,
            sd_value=part.sd_value,
            sd_common=part.sd_common,
        )
        for part in first.curve.parts
    )
    moved = replace(first, curve=replace(first.curve, parts=parts))
    return replace(reading, curves=(moved, *reading.curves[1:]), program_version="0.0.1")


def test_what_another_version_found_otherwise_is_listed(stored: StoredReading) -> None:
    told = [str(one) for one in differences(stored.reading, scaled(stored.reading, 1.01))]
    assert len(told) == 2
    assert told[0] == f"program version: {stored.reading.program_version} stored, 0.0.1 now"
    assert told[1].startswith("curve 1 (")
    numbers = [float(word) for word in told[1].replace(",", "").split() if word[0].isdigit() and "." in word]
    assert numbers[-1] / numbers[-2] == pytest.approx(1.01, rel=1e-5)


def test_other_differences(stored: StoredReading) -> None:
    reading = stored.reading
    fewer = replace(reading, curves=reading.curves[:-1], findings=(), warnings=())
    told = " ".join(str(one) for one in differences(reading, fewer))
    assert "number of curves" in told
    assert "meets stored, none now" in told
    plane = reading.axes.map
    moved = replace(reading.axes, map=replace(plane, centre=plane.centre + np.array([1.0, 0.0])))
    assert "at the corner" in str(differences(reading, replace(reading, axes=moved))[0])


def test_without_the_bytes_nothing_can_be_drawn(stored: StoredReading, tmp_path: Path) -> None:
    with pytest.raises(SheetError, match="are not in the library"):
        restored(replace(stored, source=None), tmp_path)
