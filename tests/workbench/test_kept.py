"""Drafts on disk: whatever moment a write ends at, what is read is the last state or the one before, whole."""

import os
from pathlib import Path

import pytest

from curvelab.errors import InputError, LibraryError
from curvelab.workbench import kept as disk
from curvelab.workbench.history import History
from curvelab.workbench.kept import Kept
from curvelab.workbench.names import file_name, shown_name
from curvelab.worksheets.read import parse_worksheet


def state(history: History) -> Kept:
    return Kept(name="sheet", changed="2026-12-01T12:00:00+00:00", sheet=None, history=history)


def titled(title: str) -> str:
    return f'format = 1\n\n[document]\ntitle = "{title}"\n'


def begun(folder: Path) -> Kept:
    kept = state(History.begun(parse_worksheet(titled("first")), "opened"))
    disk.write(folder, kept)
    return kept


class CrashError(Exception):
    """The process ends here."""


@pytest.mark.parametrize("moment", range(7))
def test_a_crash_at_any_moment_leaves_a_whole_state(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, moment: int
) -> None:
    """Then going on from what is read, the step left over by the crash is not taken for the new one."""
    before = begun(tmp_path)
    after = state(before.history.with_step(parse_worksheet(titled("second")), "changed"))
    calls = 0

    def crashing(call: str) -> object:
        original = getattr(os, call)

        def replaced(*given: object) -> object:
            nonlocal calls
            calls += 1
            if calls > moment:
                raise CrashError
            return original(*given)

        return replaced

    with monkeypatch.context() as patched:
        for call in ("replace", "fsync"):
            patched.setattr(os, call, crashing(call))
        try:
            disk.write(tmp_path, after, before)
        except CrashError:
            assert moment < 6
        else:
            assert moment == 6, "three files, each written and put in place"
    found = disk.read(tmp_path)
    assert found in (before, after)
    third = state(found.history.with_step(parse_worksheet(titled("third")), "changed again"))
    disk.write(tmp_path, third, found)
    assert disk.read(tmp_path).history.worksheet.document.title == "third"
    assert (tmp_path / disk.WORKSHEET).read_text() == titled("third")


def test_a_full_disk_is_said_in_one_line(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    before = begun(tmp_path)

    def full(_: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    after = state(before.history.with_step(parse_worksheet(titled("second")), "changed"))
    with pytest.raises(LibraryError, match="No space left"):
        disk.write(tmp_path, after, before)
    assert disk.read(tmp_path) == before


@pytest.mark.parametrize("content", ["", "{", "[]", "null", '{"steps": []}', '{"steps": [{"version": "../x"}]}'])
def test_a_damaged_record_is_refused(tmp_path: Path, content: str) -> None:
    begun(tmp_path)
    (tmp_path / disk.RECORD).write_text(content)
    with pytest.raises(LibraryError):
        disk.read(tmp_path)


def test_steps_that_were_undone_and_left_are_cleaned_away(tmp_path: Path) -> None:
    first = begun(tmp_path)
    second = state(first.history.with_step(parse_worksheet(titled("second")), "changed"))
    disk.write(tmp_path, second, first)
    undone = state(second.history.undone())
    disk.write(tmp_path, undone, second)
    other = state(undone.history.with_step(parse_worksheet(titled("other")), "changed otherwise"))
    disk.write(tmp_path, other, undone)
    assert sorted(path.name for path in (tmp_path / disk.STEPS).iterdir()) == ["1.toml", "4.toml"]


def test_there_is_an_end_to_undo_and_redo() -> None:
    history = History.begun(parse_worksheet(titled("first")), "opened")
    with pytest.raises(InputError):
        history.undone()
    with pytest.raises(InputError):
        history.redone()


@pytest.mark.parametrize(
    ("given", "kind", "name"),
    [
        ("breaker.png", "raster", "breaker.png"),
        ("C:\\sheets\\Breaker 1.PNG", "raster", "Breaker 1.PNG"),
        ("../../etc/passwd", "raster", "passwd.png"),
        ("a/b/..", "pdf", "sheet.pdf"),
        ("con.png", "raster", "_con.png"),
        ("draft.json", "raster", "draft.json.png"),
        ("worksheet.toml", "svg", "worksheet.toml.svg"),
        ("x" * 500 + ".png", "raster", "x" * 80 + ".png"),
        ("Überstrom ½.pdf", "pdf", "Überstrom 1_2.pdf"),
        ("a\u202egnp.exe\x00", "raster", "agnp.exe.png"),
        (".png", "raster", "png.png"),
        ("", "raster", "sheet.png"),
    ],
)
def test_a_name_from_the_browser_names_a_new_file_and_nothing_else(given: str, kind: str, name: str) -> None:
    assert file_name(given, kind) == name


def test_what_is_shown_of_a_name_is_one_line() -> None:
    assert shown_name("a\r\nb\tc\u2028d.png") == "abc d.png"
