"""Copies a library while others use it, puts a copy back, and gives freed space back to the disk."""

import os
import shutil
import sqlite3
from pathlib import Path

from curvelab.errors import LibraryError
from curvelab.library.connect import BUSY_S, named_errors, open_to_read

PAGES_AT_ONCE = 4096
"""Pages copied before others may write again: 16 MB."""


def copy_whole(connection: sqlite3.Connection, target: Path) -> None:
    """Copy what a connection sees to a file; a file that is there is replaced at the end, never half.

    Raises
    ------
    LibraryError
        The copy cannot be written, or is damaged.
    """
    part = target.with_name(target.name + ".part")
    try:
        part.unlink(missing_ok=True)
        with named_errors(target):
            _copy(connection, part)
        os.replace(part, target)
    except OSError as error:
        raise LibraryError(f"Cannot write {target}: {error.strerror}", "", "Choose another place") from error
    finally:
        part.unlink(missing_ok=True)


def restore(backup: Path, target: Path) -> Path | None:
    """Put a backup in the place of a library; readers go on undisturbed, what was there is kept beside it.

    Returns
    -------
    Path or None
        Where the replaced library was copied to; None where there was none.

    Raises
    ------
    LibraryError
        The backup is no sound library, or another program is writing.
    """
    source = open_to_read(backup)
    try:
        _refuse_damaged(source, backup)
        before = _kept(target)
        with named_errors(target):
            _overwrite(source, target)
    finally:
        source.close()
    return before


def compact(connection: sqlite3.Connection) -> None:
    """Write the file anew without the space that is no longer used, and empty the log beside it."""
    connection.execute("VACUUM")
    connection.execute("PRAGMA wal_checkpoint(TRUNCATE)")


def _copy(connection: sqlite3.Connection, part: Path) -> None:
    copy = sqlite3.connect(part.as_uri(), uri=True, isolation_level=None)
    try:
        connection.backup(copy, pages=PAGES_AT_ONCE)
        copy.execute("PRAGMA journal_mode = DELETE")  # one file, without a log beside it
        (verdict,) = copy.execute("PRAGMA quick_check(1)").fetchone()
        if verdict != "ok":
            raise sqlite3.DatabaseError(verdict)
    finally:
        copy.close()


def _refuse_damaged(source: sqlite3.Connection, backup: Path) -> None:
    with named_errors(backup):
        (verdict,) = source.execute("PRAGMA integrity_check(1)").fetchone()
    if verdict != "ok":
        raise LibraryError(f"The backup {backup} is damaged: {verdict}", "", "Take another backup")


def _kept(target: Path) -> Path | None:
    """Copy the library as it lies there, damaged or not, with the log beside it."""
    if not target.exists():
        return None
    before = target.with_name(f"{target.name}.before-restore")
    try:
        for ending in ("", "-wal"):
            held = target.with_name(target.name + ending)
            if held.exists():
                shutil.copy2(held, before.with_name(before.name + ending))
    except OSError as error:
        raise LibraryError(f"Cannot copy {target}: {error.strerror}", "", "Allow writing to its folder") from error
    return before


def _overwrite(source: sqlite3.Connection, target: Path) -> None:
    """Write into the file that is there, so that whoever has it open sees the change; a damaged one is replaced."""
    written = sqlite3.connect(target.as_uri(), uri=True, timeout=BUSY_S, isolation_level=None)
    try:
        written.execute("PRAGMA journal_mode = WAL")
        source.backup(written)
    except sqlite3.DatabaseError as error:
        if error.sqlite_errorcode & 0xFF not in (sqlite3.SQLITE_NOTADB, sqlite3.SQLITE_CORRUPT):
            raise
        written.close()
        for ending in ("-wal", "-shm"):
            target.with_name(target.name + ending).unlink(missing_ok=True)
        copy_whole(source, target)
    finally:
        written.close()
