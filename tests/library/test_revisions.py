"""Revisions: what makes one, what carries forward, what is refused, which is current."""

import hashlib
import json
import sqlite3
from pathlib import Path

import pytest

from curvelab.errors import DeviceError, NotFoundError
from curvelab.library.library import Library, open_library
from curvelab.records.curve import Conditions, SheetKey
from curvelab.records.device import Breaking, Setting
from tests.library.devices import breaker, curve, reading, said, warning


@pytest.fixture
def library(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        yield library


def set_state(library: Library, key: str, number: int, state: str) -> None:
    """Bring a revision to a state by the way that leads there."""
    for step in ("checked", "released") if state == "released" else (state,):
        library.review(key, number, state=step, name={"released": "B. Second"}.get(step, "A. First"), reason="for good")


def current(library: Library, key: str) -> int:
    return library.record(key).revision


def test_identical_content_makes_no_revision_and_writes_nothing(library: Library) -> None:
    given = reading(breaker("b32", curve("fast", time_s=20.0), curve()))
    library.store(given)
    library.close()
    before = library.path.read_bytes()
    (again,) = library.store(given)
    library.close()
    assert (again.revision, again.changed) == (1, False)
    assert library.path.read_bytes() == before


@pytest.mark.parametrize(
    "changed",
    [
        reading(breaker("b32", curve(time_s=61.0))),
        reading(breaker("b32", curve(), rated_current_a=32.0)),
        reading(breaker("b32", curve()), title="Riverside sheet, second issue"),
        reading(breaker("b32", curve()), warnings=(warning("A. Checker"),)),
    ],
    ids=["points", "nameplate", "document", "acceptance"],
)
def test_anything_said_differently_is_a_new_revision(library: Library, changed: object) -> None:
    library.store(reading(breaker("b32", curve())))
    (stored,) = library.store(changed)
    assert (stored.revision, stored.changed) == (2, True)


def test_the_name_of_the_file_does_not_count(library: Library) -> None:
    for name in ("scan.png", "renamed.png"):
        (stored,) = library.store(breaker("b32", curve(sheet=SheetKey(sha256="a" * 64, file=name))))
    assert not stored.changed
    assert library.record("b32").curves[0].sheet.file == "scan.png"


def test_only_curves_of_the_same_identity_are_replaced(library: Library) -> None:
    hot = Conditions(start="hot")
    kept = [
        curve("fast"),
        curve(conditions=hot),
        curve(at={"ir": 0.8}),
        curve(quantity="let_through"),
        curve(element="residual", base="xIdn"),
    ]
    library.store(breaker("b32", curve(), *kept))
    library.store(breaker("b32", curve(time_s=70.0)))
    found = library.record("b32")
    assert {said(breaker("b32", line))[1] for line in found.curves} == {
        said(breaker("b32", line))[1] for line in (*kept, curve(time_s=70.0))
    }
    assert said(library.record("b32", 1))[1] == said(breaker("b32", curve(), *kept))[1]


def test_a_device_from_two_sheets(library: Library) -> None:
    overcurrent = reading(breaker("rcbo", curve(), kind="rcbo", characteristic="B"), sha256="a" * 64)
    residual = reading(
        breaker("rcbo", curve(element="residual", base="xIdn"), kind="rcbo", rated_residual_current_a=0.03),
        sha256="b" * 64,
    )
    stored = library.store([overcurrent, residual])
    assert [one.revision for one in stored] == [1, 2]
    found = library.record("rcbo")
    assert [line.element for line in found.curves] == ["whole", "residual"]
    assert (found.nameplate.characteristic, found.nameplate.rated_residual_current_a) == ("B", 0.03)
    assert not any(one.changed for one in library.store([overcurrent, residual]))


def test_nameplate_fields_not_given_carry_forward(library: Library) -> None:
    capacity = (Breaking(quantity="Icn", value_a=6000.0),)
    library.store(breaker("b32", rated_current_a=32.0, maker="Riverside", breaking=capacity))
    library.store(breaker("b32", maker="Riverside Works", settings=(Setting(name="ir", steps=(0.8, 1.0)),)))
    plate = library.record("b32").nameplate
    assert (plate.rated_current_a, plate.maker, plate.breaking) == (32.0, "Riverside Works", capacity)
    assert plate.settings == (Setting(name="ir", steps=(0.8, 1.0)),)


def test_a_key_of_another_kind_is_refused_and_nothing_of_the_call_is_stored(library: Library) -> None:
    library.store(breaker("b32", curve()))
    with pytest.raises(DeviceError, match=r"'b32' is already used by a device of kind mcb, this one is of kind fuse"):
        library.store(reading(breaker("new", curve()), breaker("b32", curve(), kind="fuse")))
    assert library.keys() == ["b32"]
    assert [row["revision"] for row in library.history("b32")] == [1]


def test_two_kinds_in_one_call_are_refused(library: Library) -> None:
    with pytest.raises(DeviceError, match="already used"):
        library.store([breaker("b32"), breaker("b32", kind="fuse")])


def test_the_current_revision_follows_the_states(library: Library) -> None:
    for time_s in (60.0, 61.0, 62.0):
        library.store(breaker("b32", curve(time_s=time_s)))
    assert current(library, "b32") == 3
    set_state(library, "b32", 1, "released")
    assert current(library, "b32") == 1
    set_state(library, "b32", 2, "released")
    assert current(library, "b32") == 2
    set_state(library, "b32", 2, "withdrawn")
    set_state(library, "b32", 1, "withdrawn")
    assert current(library, "b32") == 3
    set_state(library, "b32", 3, "withdrawn")
    with pytest.raises(
        NotFoundError, match=r"Every revision of 'b32' is withdrawn\. Ask for one by number, as in b32@3"
    ):
        library.record("b32")
    assert library.record("b32", 2).state == "withdrawn"
    assert library.index() == []


def test_nothing_is_built_on_a_withdrawn_revision(library: Library) -> None:
    library.store(breaker("b32", curve()))
    library.store(breaker("b32", curve("fast")))
    set_state(library, "b32", 2, "withdrawn")
    (stored,) = library.store(breaker("b32", curve("mean")))
    assert stored.revision == 3
    assert [line.edge for line in library.record("b32").curves] == ["slow", "mean"]
    for number in (1, 3):
        set_state(library, "b32", number, "withdrawn")
    library.store(breaker("b32", curve("mean")))
    assert [line.edge for line in library.record("b32").curves] == ["mean"]


@pytest.mark.parametrize(
    "statement",
    [
        "UPDATE revision SET rated_current_a = 1",
        "DELETE FROM revision",
        "UPDATE curve SET edge = 'fast'",
        "DELETE FROM curve",
        "UPDATE point SET value = 1",
        "DELETE FROM point",
        "UPDATE revision_curve SET seq = 9",
        "UPDATE device SET device_key = 'x'",
        "UPDATE trip_points SET time_s = 1",
    ],
)
def test_no_program_changes_what_is_stored_by_mistake(library: Library, statement: str) -> None:
    library.store(breaker("b32", curve(), rated_current_a=32.0))
    database = sqlite3.connect(library.path)
    with pytest.raises(sqlite3.Error, match=r"is never|cannot modify"):
        database.execute(statement)
    database.close()


def test_the_evidence_is_kept(library: Library, tmp_path: Path) -> None:
    file = tmp_path / "sheet.png"
    file.write_bytes(b"the sheet")
    given = reading(
        breaker("b32", curve()), warnings=(warning("A. Checker"),), sha256=hashlib.sha256(b"the sheet").hexdigest()
    )
    library.store(given, author="A. Reader", reason="first issue", sheet_files=[file])
    row = library.history("b32")[0]
    assert (row["author"], row["reason"]) == ("A. Reader", "first issue")
    database = library.open()
    title, worksheet, axes, plot, content = database.execute(
        "SELECT title, worksheet, axes, plot, bytes FROM reading JOIN sheet USING (sheet_id) JOIN source USING (sha256)"
    ).fetchone()
    assert (title, worksheet, plot, content) == ("Riverside sheet", given.worksheet.text, 2, b"the sheet")
    assert json.loads(axes)["map"]["covariance"] == given.axes.map.covariance.tolist()
    assert database.execute("SELECT outcome, value FROM finding").fetchall() == [("not covered", None)]
    assert database.execute("SELECT x, y, accepted_name FROM reading_warning").fetchall() == [(3.0, 4.0, "A. Checker")]
