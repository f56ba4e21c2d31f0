"""``verify`` finds whatever was changed behind the library's back; the file's history is kept file by file."""

import hashlib
import shutil
import sqlite3
from pathlib import Path

import pytest

from curvelab.library.connect import SCHEMA_VERSION
from curvelab.library.library import Library, open_library
from tests.library.devices import breaker, curve, reading, said, warning
from tests.library.test_review import forge
from tests.reading.example import reading as full_reading

KEPT = sorted((Path(__file__).parent / "kept").glob("*.sqlite"))


@pytest.fixture
def library(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        given = reading(
            breaker("b32", curve("fast", time_s=20.0), curve(), rated_current_a=32.0), warnings=(warning(),)
        )
        library.store([given, full_reading(), breaker("bare", kind="switch")], author="A. Author")
        yield library


def test_a_sound_library(library: Library) -> None:
    verdict = library.verify()
    assert verdict.problems == ()
    assert verdict.is_sound


@pytest.mark.parametrize(
    ("forgery", "words"),
    [
        ("UPDATE point SET value = value * 1.0001 WHERE curve_id = 1 AND seq = 1", "@1 is not what was stored"),
        ("UPDATE point SET sd_value = 0.5 WHERE curve_id = 1 AND seq = 1", "@1 is not what was stored"),
        ("DELETE FROM point WHERE curve_id = 1 AND seq = 3", "@1 is not what was stored"),
        ("UPDATE curve SET edge = 'mean' WHERE curve_id = 1", "@1 is not what was stored"),
        ("UPDATE revision SET rated_current_a = 40", "b32@1 is not what was stored"),
        ("UPDATE reading SET worksheet = 'format = 1'", "Reading 1 is not what was stored"),
        ("UPDATE read_point SET x = x + 0.1 WHERE seq = 2", "Reading 2 is not what was stored"),
        ("DELETE FROM read_gap", "Reading 2 is not what was stored"),
        ("UPDATE grid_point SET x = 0", "Reading 2 is not what was stored"),
        ("UPDATE finding SET outcome = 'meets'", "Reading 1 is not what was stored"),
        ("UPDATE band_extent SET holds_surely_a = 1e9", "what the search over bands knows of it"),
        ("DELETE FROM current_device WHERE device_key = 'bare'", "The search knows another revision of bare"),
        ("DELETE FROM revision_curve", "is not what was stored"),
        ("DELETE FROM device WHERE device_key = 'bare'", "refers to a row of device that is not there"),
        ("DROP VIEW trip_points", "The view trip_points is missing"),
        ("CREATE TABLE extra (x)", "The table extra does not belong to a library"),
        ("CREATE TRIGGER sly AFTER INSERT ON point BEGIN SELECT 1; END", "The trigger sly does not belong"),
    ],
)
def test_a_forgery_is_found(library: Library, forgery: str, words: str) -> None:
    library.close()
    forge(library.path, forgery)
    problems = library.verify().problems
    assert any(words in problem for problem in problems), problems


def test_the_bytes_of_a_sheet(tmp_path: Path) -> None:
    file = tmp_path / "sheet.png"
    file.write_bytes(b"the sheet")
    with open_library(tmp_path / "firm.sqlite") as library:
        library.store(
            reading(breaker("b32", curve()), sha256=hashlib.sha256(b"the sheet").hexdigest()), sheet_files=[file]
        )
        assert library.verify().is_sound
        library.close()
        forge(library.path, "UPDATE source SET bytes = x'00'")
        assert "The bytes of the sheet" in library.verify().problems[0]


@pytest.mark.parametrize("kept", KEPT, ids=lambda path: path.stem)
def test_a_library_of_every_earlier_schema_opens_after_a_backup(tmp_path: Path, kept: Path) -> None:
    path = Path(shutil.copy(kept, tmp_path / "firm.sqlite"))
    number = int(kept.stem.removeprefix("schema_"))
    with open_library(path) as library:
        first, second = library.record("riverside-b32", 1), library.record("riverside-b32", 2)
        assert (first.state, second.state, library.record("riverside-b32").revision) == ("released", "draft", 1)
        assert said(first)[1][1][-1] != said(second)[1][-1][-1]
        assert first.nameplate.breaking[0].value_a == 6000.0
        assert library.record("mill-mccb").nameplate.derating[0].factor == 0.9
        assert library.verify().problems == ()
        log = library.log("riverside-b32")
        assert log[0].name == "A. Reader"
        assert {"released", "draft"} <= {entry.state for entry in log}
        assert library.store(library.record("mill-mccb"))[0].changed is False
    backup = path.with_name(f"firm.sqlite.schema-{number}.backup")
    database = sqlite3.connect(backup)
    assert database.execute("PRAGMA user_version").fetchone() == (number,)
    assert database.execute("SELECT count(*) FROM revision").fetchone() == (3,)
    database.close()


def test_every_earlier_schema_has_a_kept_library() -> None:
    assert [path.stem for path in KEPT] == [f"schema_{number}" for number in range(1, SCHEMA_VERSION)]
