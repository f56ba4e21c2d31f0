"""Files that are no library, cannot be read or cannot be written: one line, nothing changed."""

import os
import shutil
import sqlite3
import subprocess
import sys
import tempfile
import textwrap
from pathlib import Path

import pytest

from curvelab.errors import InputError, LibraryError, NotFoundError, SchemaError, SheetError
from curvelab.library import connect
from curvelab.library.key import split_key
from curvelab.library.library import open_library
from curvelab.library.place import library_path
from tests.library.devices import breaker, curve, reading

NOBODY = 65534


@pytest.fixture
def firm(tmp_path: Path) -> Path:
    path = tmp_path / "firm.sqlite"
    with open_library(path) as library:
        library.store([breaker(f"b{number}", curve(time_s=10.0 + number)) for number in range(200)])
    return path


def one_line(error: Exception) -> bool:
    return len(str(error).splitlines()) == 1


def read_and_store(path: Path) -> list[Exception]:
    """The errors of reading and of storing."""
    errors: list[Exception] = []
    for work in (lambda library: library.record("b32"), lambda library: library.store(breaker("b32", curve("fast")))):
        with pytest.raises(LibraryError) as caught, open_library(path) as library:
            work(library)
        errors.append(caught.value)
    return errors


@pytest.mark.parametrize("content", [b"not a database, but longer than its header would be " * 4, b"short"])
def test_a_file_that_is_no_database(tmp_path: Path, content: bytes) -> None:
    path = tmp_path / "notes.txt"
    path.write_bytes(content)
    for error in read_and_store(path):
        assert "is not a library: it is no SQLite file" in str(error)
        assert one_line(error)
    assert path.read_bytes() == content


def test_the_database_of_another_program(tmp_path: Path) -> None:
    path = tmp_path / "other.sqlite"
    with sqlite3.connect(path) as database:
        database.execute("CREATE TABLE device (name TEXT)")
    database.close()
    before = path.read_bytes()
    for error in read_and_store(path):
        assert "database of another program" in str(error)
    assert path.read_bytes() == before


def test_a_newer_library_is_refused(firm: Path) -> None:
    with sqlite3.connect(firm) as database:
        database.execute(f"PRAGMA user_version = {connect.SCHEMA_VERSION + 1}")
    database.close()
    for error in read_and_store(firm):
        assert isinstance(error, SchemaError)
        assert "newer curvelab" in str(error)


@pytest.mark.parametrize("share", [0.1, 0.5, 0.95])
def test_a_file_cut_short(firm: Path, share: float) -> None:
    content = firm.read_bytes()
    firm.write_bytes(content[: int(len(content) * share)])
    for error in read_and_store(firm):
        assert "is damaged or cut short" in str(error)
        assert one_line(error)


def test_no_such_library(tmp_path: Path) -> None:
    path = tmp_path / "none.sqlite"
    with pytest.raises(NotFoundError, match=r"There is no library at .*none\.sqlite"):
        open_library(path, create=False)
    with open_library(path) as library, pytest.raises(NotFoundError, match="There is no library"):
        library.record("b32")
    assert list(tmp_path.iterdir()) == []


def test_a_refused_device_leaves_no_file(tmp_path: Path) -> None:
    with open_library(tmp_path / "none.sqlite") as library, pytest.raises(InputError, match="is no device key"):
        library.store(breaker("two words", curve()))
    assert list(tmp_path.iterdir()) == []


def test_a_missing_folder_and_a_folder_instead_of_a_file(tmp_path: Path) -> None:
    with (
        open_library(tmp_path / "none" / "firm.sqlite") as library,
        pytest.raises(LibraryError, match="does not exist"),
    ):
        library.store(breaker("b32", curve()))
    with pytest.raises(LibraryError, match="is a folder"):
        open_library(tmp_path)


def test_an_empty_file_is_no_library_until_something_is_stored(tmp_path: Path) -> None:
    path = tmp_path / "empty.sqlite"
    path.touch()
    with pytest.raises(NotFoundError, match="is empty and holds no library"):
        open_library(path, create=False)
    with open_library(path) as library:
        with pytest.raises(NotFoundError, match="is empty and holds no library"):
            library.keys()
        library.store(breaker("b32", curve()))
        assert library.keys() == ["b32"]


def test_a_locked_library(firm: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(connect, "BUSY_S", 0.05)
    other = sqlite3.connect(firm, isolation_level=None)
    other.execute("BEGIN IMMEDIATE")
    with open_library(firm) as library:
        with pytest.raises(LibraryError, match="is locked by another program") as caught:
            library.store(breaker("b1", curve("fast")))
        assert one_line(caught.value)
        assert library.record("b1").revision == 1
        other.execute("ROLLBACK")
        assert library.store(breaker("b1", curve("fast")))[0].changed
    other.close()


@pytest.mark.parametrize("name", ["firm #1.sqlite", "what?.sqlite", "50 % & more.sqlite", "größe.sqlite"])
def test_any_file_name(tmp_path: Path, name: str) -> None:
    if os.name == "nt" and "?" in name:
        pytest.skip("not a file name on this system")
    with open_library(tmp_path / name) as library:
        library.store(breaker("b32", curve()))
        assert library.record("b32").revision == 1
    assert {path.name.removesuffix("-shm").removesuffix("-wal") for path in tmp_path.iterdir()} == {name}


def test_the_reading_side_cannot_write(firm: Path) -> None:
    with open_library(firm) as library, pytest.raises(sqlite3.OperationalError, match="readonly"):
        library.open().execute("INSERT INTO device VALUES (1000, 'x', 'mcb')")


def as_nobody(path: Path) -> list[str]:
    """What a user without any right to write is told when reading and when storing."""
    script = textwrap.dedent(
        f"""
        import os
        from pathlib import Path
        from curvelab.errors import LibraryError
        from curvelab.library import migrate, save
        from curvelab.library.library import Library
        from tests.library.devices import breaker, curve
        os.setuid({NOBODY})
        with Library(Path({str(path)!r})) as library:
            for work in (lambda: library.record("b32").revision, lambda: library.store(breaker("b32", curve("fast")))):
                try:
                    print(work())
                except LibraryError as error:
                    print(error)
        """
    )
    done = subprocess.run(
        [sys.executable, "-c", script], capture_output=True, text=True, check=False, cwd=Path(__file__).parents[2]
    )
    assert done.stderr == ""
    return done.stdout.splitlines()


@pytest.fixture
def guarded(firm: Path) -> Path:
    """A library that others may read but not write, outside the private folders of the test runner."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(shutil.copy(firm, folder))
        path.chmod(0o444)
        yield path


becomes_nobody = pytest.mark.skipif(
    not hasattr(os, "setuid") or os.getuid() != 0, reason="needs to become another user"
)


@becomes_nobody
@pytest.mark.parametrize("folder_mode", [0o555, 0o777])
def test_a_read_only_library_can_be_asked_and_not_changed(guarded: Path, folder_mode: int) -> None:
    guarded.parent.chmod(folder_mode)
    before = guarded.read_bytes()
    revision, refusal = as_nobody(guarded)
    assert revision == "1"
    assert "may not be written" in refusal
    assert guarded.read_bytes() == before


@becomes_nobody
def test_a_library_in_a_closed_folder(guarded: Path) -> None:
    guarded.parent.chmod(0o700)
    reading_refused, storing_refused = as_nobody(guarded)
    assert "may not be opened" in reading_refused
    assert "cannot be opened" in storing_refused


def test_a_sheet_file_that_changed_or_vanished(tmp_path: Path) -> None:
    file = tmp_path / "sheet.png"
    given = reading(breaker("b32", curve()))
    with open_library(tmp_path / "firm.sqlite") as library:
        with pytest.raises(SheetError, match="cannot be read: No such file"):
            library.store(given, sheet_files=[file])
        file.write_bytes(b"another")
        with pytest.raises(SheetError, match="its bytes differ"):
            library.store(given, sheet_files=[file])
    assert list(tmp_path.iterdir()) == [file]


def test_a_key_or_revision_that_is_not_there(firm: Path) -> None:
    with open_library(firm) as library:
        with pytest.raises(NotFoundError, match=r"no device 'bb32'\. Did you mean 'b32'\?"):
            library.record("bb32")
        with pytest.raises(NotFoundError, match=r"'b32' has no revision 7\. It has 1\."):
            library.record("b32", 7)
        with pytest.raises(NotFoundError, match="no device"):
            library.history("other")


@pytest.mark.parametrize(("text", "key"), [("b32", ("b32", None)), ("b32@3", ("b32", 3))])
def test_a_revision_is_named_behind_the_key(text: str, key: tuple[str, int | None]) -> None:
    assert split_key(text) == key


@pytest.mark.parametrize("text", ["b32@", "b32@0", "b32@-1", "b32@x", "b32@1@2", "b32@²"])
def test_what_is_no_revision(text: str) -> None:
    with pytest.raises(InputError, match="names no revision"):
        split_key(text)


def test_where_the_library_lies(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("CURVELAB_LIBRARY", str(tmp_path / "variable.sqlite"))
    assert library_path("given.sqlite") == Path.cwd() / "given.sqlite"
    assert library_path() == tmp_path / "variable.sqlite"
    monkeypatch.delenv("CURVELAB_LIBRARY")
    monkeypatch.setenv("XDG_DATA_HOME", str(tmp_path))
    monkeypatch.setattr(sys, "platform", "linux")
    assert library_path() == tmp_path / "curvelab" / "library.sqlite"
    with open_library() as library:
        library.store(breaker("b32", curve()))
    assert library_path().is_file()
