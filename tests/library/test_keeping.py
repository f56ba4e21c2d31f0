"""Backup, restore and compaction; what damage does: one line, and the last good state intact."""

import os
import random
import resource
import signal
import sqlite3
import subprocess
import sys
import time
from pathlib import Path

import pytest

from curvelab.errors import CurvelabError, LibraryError, SchemaError
from curvelab.library.backup import restore
from curvelab.library.library import Library, open_library
from tests.library.devices import breaker, curve, said

CHECKOUT = Path(__file__).parents[2]
KILLS = int(os.environ.get("CURVELAB_KILLS", "5"))
"""How many random moments; the full number is run by the benchmark."""


@pytest.fixture
def firm(tmp_path: Path) -> Library:
    with open_library(tmp_path / "firm.sqlite") as library:
        library.store([breaker(f"b{number}", curve(time_s=10.0 + number)) for number in range(12)])
        yield library


def test_a_backup_is_one_whole_file_taken_while_others_write(firm: Library, tmp_path: Path) -> None:
    copy = tmp_path / "copy #1.sqlite"
    writer = sqlite3.connect(firm.path, isolation_level=None)
    writer.execute("BEGIN IMMEDIATE")
    firm.backup(copy)
    writer.execute("ROLLBACK")
    writer.close()
    assert not copy.with_name(copy.name + "-wal").exists()
    with open_library(copy) as library:
        assert library.keys() == firm.keys()
        assert library.verify().problems == ()


def test_a_backup_that_cannot_be_written_leaves_the_old_one(firm: Library, tmp_path: Path) -> None:
    copy = tmp_path / "copy.sqlite"
    firm.backup(copy)
    before = copy.read_bytes()
    with pytest.raises(LibraryError, match="none"):
        firm.backup(tmp_path / "none" / "copy.sqlite")
    assert copy.read_bytes() == before
    assert not list(tmp_path.glob("*.part"))


def test_restore_puts_the_backup_back_and_keeps_what_was_there(firm: Library, tmp_path: Path) -> None:
    copy = tmp_path / "copy.sqlite"
    firm.backup(copy)
    firm.store(breaker("later", curve()))
    firm.close()
    before = restore(copy, firm.path)
    assert "later" not in firm.keys()  # noqa: SIM118
    assert firm.verify().problems == ()
    with open_library(before) as kept:
        assert kept.record("later").revision == 1


def test_a_damaged_library_is_restored(firm: Library, tmp_path: Path) -> None:
    copy = tmp_path / "copy.sqlite"
    firm.backup(copy)
    firm.close()
    firm.path.write_bytes(b"rubbish" * 1000)
    restore(copy, firm.path)
    assert firm.verify().is_sound
    restore(copy, tmp_path / "new.sqlite")
    with open_library(tmp_path / "new.sqlite") as library:
        assert library.keys() == firm.keys()


def test_what_is_no_backup_is_not_restored(firm: Library, tmp_path: Path) -> None:
    firm.close()
    before = firm.path.read_bytes()
    wrong = tmp_path / "wrong.sqlite"
    wrong.write_bytes(b"rubbish" * 1000)
    with pytest.raises(LibraryError, match="is not a library"):
        restore(wrong, firm.path)
    assert firm.path.read_bytes() == before


def test_compaction_changes_no_content(firm: Library) -> None:
    before = list(firm.exported())
    firm.compact()
    assert list(firm.exported()) == before
    assert firm.verify().problems == ()


def test_a_flipped_bit_never_gives_another_number(firm: Library) -> None:
    """One bit anywhere: each device reads as it was stored, or the damage is said."""
    expected = {row["device_key"]: said(firm.record(row["device_key"])) for row in firm.index()}
    firm.compact()
    firm.close()
    good = firm.path.read_bytes()
    rng = random.Random(7)
    for _ in range(40):
        content = bytearray(good)
        content[rng.randrange(100, len(content))] ^= 1 << rng.randrange(8)
        firm.path.write_bytes(content)
        for key, record in expected.items():
            try:
                with open_library(firm.path) as library:
                    assert said(library.record(key)) == record
            except CurvelabError as error:
                assert len(str(error).splitlines()) == 1  # noqa: PT017 - either of both is right


def limited(size: int) -> None:
    """No file of this process may grow beyond a size, as on a full disk."""
    signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
    resource.setrlimit(resource.RLIMIT_FSIZE, (size, size))


def run(code: str, *arguments: str, **more: object) -> "subprocess.Popen[str]":
    return subprocess.Popen(
        [sys.executable, "-c", code, *arguments],
        cwd=CHECKOUT,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
        **more,
    )


FILL = """
import sys
from curvelab.errors import CurvelabError
from curvelab.library.library import open_library
from tests.library.devices import breaker, curve
try:
    with open_library(sys.argv[1]) as library:
        library.store([breaker(f"new-{number}", curve(time_s=5.0 + number / 100)) for number in range(2000)])
except CurvelabError as error:
    print(error)
"""


@pytest.mark.skipif(sys.platform == "win32", reason="file size limits are of POSIX")
def test_a_full_disk(firm: Library) -> None:
    firm.close()
    writer = run(FILL, str(firm.path), preexec_fn=lambda: limited(300_000))
    printed, problems = writer.communicate(timeout=120)
    assert problems == ""
    assert len(printed.splitlines()) == 1
    assert "nothing was stored" in printed
    assert len(firm.keys()) == 12
    assert firm.verify().problems == ()


WRITE = """
import sys
from curvelab.library.library import open_library
from tests.library.devices import breaker, curve
with open_library(sys.argv[1]) as library:
    for number in range(100_000):
        library.store([breaker("shared", curve(time_s=20.0 + number)), breaker(f"k{sys.argv[2]}-{number}", curve())])
        print(number, flush=True)
"""


@pytest.mark.skipif(sys.platform == "win32", reason="no SIGKILL")
def test_killed_at_random_moments_no_committed_revision_is_lost(tmp_path: Path) -> None:
    rng = random.Random(3)
    for kill in range(KILLS):
        if kill % 20 == 0:  # a new library now and then, so that verifying stays short
            path, committed = tmp_path / f"firm-{kill}.sqlite", set[str]()
        writer = run(WRITE, str(path), str(kill))
        assert writer.stdout is not None
        first = writer.stdout.readline()
        time.sleep(rng.uniform(0.0, 0.15))
        writer.send_signal(signal.SIGKILL)
        rest, _ = writer.communicate()
        committed |= {f"k{kill}-{number}" for number in (first + rest).split()}
        with open_library(path) as library:
            assert committed <= set(library.keys())
            assert library.verify().problems == ()


def test_eight_processes_write_together_and_nothing_is_lost(tmp_path: Path) -> None:
    path = tmp_path / "firm.sqlite"
    code = WRITE.replace("100_000", "4")
    writers = [run(code, str(path), str(number)) for number in range(8)]
    for writer in writers:
        printed, problems = writer.communicate(timeout=240)
        assert (printed.split(), problems) == (["0", "1", "2", "3"], "")
    with open_library(path) as library:
        assert len(library.keys()) == 8 * 4 + 1
        assert library.verify().problems == ()


def test_a_newer_library_is_refused_politely(firm: Library) -> None:
    firm.close()
    database = sqlite3.connect(firm.path)
    database.execute("PRAGMA user_version = 999")
    database.close()
    with pytest.raises(SchemaError, match="Use a newer curvelab"):
        firm.verify()
