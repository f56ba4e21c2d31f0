"""Copies a library while others use it: whole, checked, and in place only once it is complete."""

import os
import sqlite3
from pathlib import Path

from curvelab.errors import LibraryError
from curvelab.library.connect import named_errors

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
