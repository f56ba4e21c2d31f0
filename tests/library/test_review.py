"""Review: which state follows which, who may release, and the log that shows any change of its past."""

import re
import sqlite3
from pathlib import Path

import pytest

from curvelab.errors import InputError, NotFoundError
from curvelab.library.library import Library, open_library
from tests.library.devices import breaker, curve


@pytest.fixture
def library(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        library.store(breaker("b32", curve()), author="A. Author", reason="first issue")
        yield library


def release(library: Library, key: str = "b32", revision: int | None = None) -> None:
    library.review(key, revision, state="checked", name="B. Checker")
    library.review(key, revision, state="released", name="C. Releaser", reason="for use")


def test_the_way_of_a_revision_and_its_log(library: Library) -> None:
    library.review("b32", name="B. Checker", reason="sheet is faint at 3 In")
    release(library)
    library.store(breaker("b32", curve(time_s=61.0)), author="A. Author")
    assert (library.record("b32").revision, library.record("b32").state) == (1, "released")
    library.review("b32", 1, state="withdrawn", name="C. Releaser", reason="sheet superseded")
    assert library.record("b32").revision == 2
    assert library.record("b32", 1).state == "withdrawn"
    assert [(one.revision, one.action, one.state, one.name, one.reason) for one in library.log("b32")] == [
        (1, "stored", "draft", "A. Author", "first issue"),
        (1, "noted", "draft", "B. Checker", "sheet is faint at 3 In"),
        (1, "reviewed", "checked", "B. Checker", ""),
        (1, "reviewed", "released", "C. Releaser", "for use"),
        (2, "stored", "draft", "A. Author", ""),
        (1, "reviewed", "withdrawn", "C. Releaser", "sheet superseded"),
    ]
    assert library.verify().problems == ()


def test_without_a_number_the_newest_revision_is_reviewed(library: Library) -> None:
    release(library)
    library.store(breaker("b32", curve(time_s=61.0)))
    assert library.review("b32", state="checked", name="B. Checker").revision == 2


@pytest.mark.parametrize(
    ("steps", "words"),
    [
        (
            [("released", "C. Releaser", "")],
            r"is draft and cannot become released\. It can become checked or withdrawn",
        ),
        ([("draft", "B. Checker", "x")], "is draft and cannot become draft"),
        ([("withdrawn", "B. Checker", "  ")], "cannot become withdrawn without a reason"),
        ([("checked", "B. Checker", ""), ("draft", "B. Checker", "")], "cannot become draft without a reason"),
        ([("checked", " ", "")], "needs a name"),
        ([(None, "B. Checker", "")], "is empty"),
        ([("withdrawn", "B", "x"), ("draft", "B", "x")], "store a new revision"),
        ([("checked", "B. Checker", ""), ("released", " a.  AUTHOR ", "")], "stored b32@1 and cannot release it too"),
    ],
)
def test_what_review_refuses_changes_nothing(library: Library, steps: list[tuple[str, str, str]], words: str) -> None:
    *before, (state, name, reason) = steps
    for earlier, who, why in before:
        library.review("b32", 1, state=earlier, name=who, reason=why)
    log = library.log()
    with pytest.raises(InputError, match=words) as caught:
        library.review("b32", 1, state=state, name=name, reason=reason)
    assert len(str(caught.value).splitlines()) == 1
    assert library.log() == log


def test_where_no_author_is_known_the_one_who_checked_may_not_release(library: Library) -> None:
    library.store(breaker("unsigned", curve()))
    library.review("unsigned", state="checked", name="B. Checker")
    with pytest.raises(InputError, match=r"B\. Checker checked unsigned@1 and cannot release it too"):
        library.review("unsigned", state="released", name="B. Checker")
    library.review("unsigned", state="released", name="C. Releaser")
    assert library.record("unsigned").state == "released"


def test_a_key_or_revision_that_is_not_there(library: Library) -> None:
    with pytest.raises(NotFoundError, match="no device 'b33'"):
        library.review("b33", state="checked", name="B")
    with pytest.raises(NotFoundError, match="has no revision 9"):
        library.review("b32", 9, state="checked", name="B")


def test_the_view_shows_the_log(library: Library) -> None:
    release(library)
    rows = library.open().execute("SELECT seq, device_key, revision, name, action, state, reason FROM review_log")
    assert rows.fetchall() == [
        (1, "b32", 1, "A. Author", "stored", "draft", "first issue"),
        (2, "b32", 1, "B. Checker", "reviewed", "checked", ""),
        (3, "b32", 1, "C. Releaser", "reviewed", "released", "for use"),
    ]


@pytest.mark.parametrize(
    "statement", ["UPDATE log SET name = 'x'", "DELETE FROM log", "UPDATE revision SET state='released'"]
)
def test_no_program_changes_the_log_or_a_state_by_mistake(library: Library, statement: str) -> None:
    database = sqlite3.connect(library.path)
    with pytest.raises(sqlite3.Error, match="never"):
        database.execute(statement)
    database.close()


def forge(path: Path, *statements: str) -> None:
    """Change a library with its guards taken off and put back, as someone could who means to."""
    database = sqlite3.connect(path, isolation_level=None)
    guards = database.execute("SELECT name, sql FROM sqlite_master WHERE type = 'trigger'").fetchall()
    for name, _ in guards:
        database.execute(f"DROP TRIGGER {name}")
    for statement in (*statements, *(sql for _, sql in guards)):
        database.execute(statement)
    database.close()


@pytest.mark.parametrize(
    ("forgery", "words"),
    [
        ("UPDATE log SET reason = 'whatever' WHERE seq = 1", "Entry 1 of the log"),
        ("UPDATE log SET at = '2001-01-01' WHERE seq = 2", "Entry 2 of the log"),
        ("UPDATE log SET name = 'A. Author' WHERE seq = 3", "Entry 3 of the log"),
        ("DELETE FROM log WHERE seq = 2", "Entry 3 of the log"),
        ("DELETE FROM log WHERE seq = 3", "b32@1 is released, but the log says checked"),
        ("UPDATE revision SET state = 'withdrawn'", "b32@1 is withdrawn, but the log says released"),
        ("UPDATE revision SET content_sha256 = zeroblob(32)", "Entry 1 of the log"),
    ],
)
def test_a_changed_past_is_found(library: Library, forgery: str, words: str) -> None:
    release(library)
    library.close()
    forge(library.path, forgery)
    problems = library.verify().problems
    assert any(re.search(words, problem) for problem in problems), problems


def test_the_last_hash_stands_for_the_whole_log(library: Library) -> None:
    before = library.verify().log_sha256
    library.review("b32", name="B", reason="a note")
    after = library.verify()
    assert (after.entries, after.revisions) == (2, 1)
    assert before != after.log_sha256 == library.open().execute("SELECT hex(sha256) FROM log").fetchall()[-1][0].lower()
