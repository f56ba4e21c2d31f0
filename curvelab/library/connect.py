"""Opens the library file: the only place that connects to a database, and where its errors get their words."""

import os
import sqlite3
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from curvelab.errors import InputError, LibraryError, NotFoundError, SchemaError

APPLICATION_ID = 1129665110
"""Marks a SQLite file as a library ("CURV"); the first migration sets it."""
SCHEMA_VERSION = 3
"""The newest migration; kept in the file as ``user_version``."""
OLDEST_SQLITE = (3, 37)
"""The first with STRICT tables."""
BUSY_S = 10.0
"""How long to wait for another program that is writing."""


class OlderSchemaError(SchemaError):
    """The library has an older schema; opening it to write brings it up to date."""


def open_to_read(path: Path) -> sqlite3.Connection:
    """A connection that cannot write, to a library of this program's schema.

    Raises
    ------
    NotFoundError
        There is no such file, or it is empty.
    LibraryError, SchemaError
        It is not a library this program can read.
    """
    if not _is_there(path):
        raise NotFoundError(
            f"There is no library at {path}", "", "Store a worksheet first, or give another library file"
        )
    with named_errors(path):
        try:
            connection, version = _opened(path, "ro")
        except sqlite3.OperationalError as error:
            if not _lies_in_read_only_folder(path, error):
                raise
            connection, version = _opened(path, "ro&immutable=1")
    if version != SCHEMA_VERSION:
        connection.close()
        raise _older(path, version)
    return connection


def open_to_write(path: Path) -> sqlite3.Connection:
    """A connection that writes, to a library or a new, empty file; foreign keys are on, other writers are waited for.

    Raises
    ------
    LibraryError, SchemaError
        The file cannot be written, or is something else.
    """
    if not _is_there(path.parent):
        raise LibraryError(
            f"The folder {path.parent} of the library does not exist", "", "Create it, or give another place"
        )
    with named_errors(path):
        connection, _ = _opened(path, "rwc")
        connection.execute("PRAGMA foreign_keys = ON")
    return connection


@contextmanager
def named_errors(path: Path) -> Iterator[None]:
    """Turn every error of the database into one line about the library file."""
    try:
        yield
    except sqlite3.IntegrityError as error:
        raise InputError(
            f"What is to be stored in {path} breaks a rule of the library: {error}",
            "",
            "Correct the value; nothing was stored",
        ) from error
    except UnicodeDecodeError as error:  # text in a damaged page, met before the damage itself
        problem, fix = _WORDS[sqlite3.SQLITE_CORRUPT]
        raise LibraryError(f"The library {path} {problem}", "", fix) from error
    except sqlite3.Error as error:
        code = (getattr(error, "sqlite_errorcode", None) or sqlite3.SQLITE_ERROR) & 0xFF
        problem, fix = _WORDS.get(code, ("cannot be used: {error}", "Check the file"))
        raise LibraryError(f"The library {path} {problem.format(error=error)}", "", fix) from error


@contextmanager
def transaction(connection: sqlite3.Connection) -> Iterator[None]:
    """All or nothing, with the write lock from the start so that what was read cannot change before it is written."""
    connection.execute("BEGIN IMMEDIATE")
    try:
        yield
        connection.execute("COMMIT")
    except BaseException:
        if connection.in_transaction:
            connection.execute("ROLLBACK")
        raise


_WORDS = {
    sqlite3.SQLITE_NOTADB: ("is not a library: it is no SQLite file", "Give a library file"),
    sqlite3.SQLITE_CORRUPT: ("is damaged or cut short", "Restore it from a backup"),
    sqlite3.SQLITE_BUSY: ("is locked by another program", "Close the other program, or try again"),
    sqlite3.SQLITE_LOCKED: ("is locked by another program", "Close the other program, or try again"),
    sqlite3.SQLITE_READONLY: (
        "may not be written",
        "Allow writing to the file and its folder, or give another library",
    ),
    sqlite3.SQLITE_PERM: ("may not be opened", "Allow access to the file, or give another library"),
    sqlite3.SQLITE_CANTOPEN: ("cannot be opened", "Give a file, in a folder that may be written"),
    sqlite3.SQLITE_FULL: ("cannot grow: the disk is full", "Free some space; nothing was stored"),
    sqlite3.SQLITE_IOERR: (
        "cannot be read or written: the disk reports an error",
        "Check the disk; nothing was stored",
    ),
}


def _is_there(path: Path) -> bool:
    """Whether a file or folder exists; one that may not even be looked at is refused."""
    try:
        path.stat()
    except PermissionError as error:
        raise LibraryError(f"The place {path} may not be opened", "", "Allow access to it, or give another") from error
    except OSError:
        return False
    return True


def _opened(path: Path, mode: str) -> tuple[sqlite3.Connection, int]:
    """A connection and the schema version, 0 for an empty file."""
    connection = _connect(path, mode)
    try:
        return connection, _version(connection, path)
    except BaseException:
        connection.close()
        raise


def _connect(path: Path, mode: str) -> sqlite3.Connection:
    """Connect through an address built from the path, so that ``#`` and ``?`` in it stay part of the name."""
    if sqlite3.sqlite_version_info < OLDEST_SQLITE:
        raise LibraryError(
            f"This Python carries SQLite {sqlite3.sqlite_version}",
            "SQLite 3.37 or later is needed",
            "Use a newer Python",
        )
    if os.path.isdir(path):
        raise LibraryError(f"{path} is a folder", "A library is one file", "Give the file, such as firm.sqlite")
    # A server lends a connection to one thread after the other; that never two use it at once is the lender's care.
    return sqlite3.connect(
        f"{path.as_uri()}?mode={mode}", uri=True, timeout=BUSY_S, isolation_level=None, check_same_thread=False
    )


def _lies_in_read_only_folder(path: Path, error: sqlite3.OperationalError) -> bool:
    """Whether the only hindrance is that the index beside the log cannot be created, and no log waits to be read."""
    waiting = path.with_name(path.name + "-wal")
    unopened = error.sqlite_errorcode & 0xFF in (sqlite3.SQLITE_CANTOPEN, sqlite3.SQLITE_READONLY)
    return unopened and os.access(path, os.R_OK) and not os.access(path.parent, os.W_OK) and not waiting.exists()


def _version(connection: sqlite3.Connection, path: Path) -> int:
    """The schema version; refuses what is not ours or newer."""
    connection.execute("BEGIN")  # one view of all three: another program may be beginning this very file
    (application,) = connection.execute("PRAGMA application_id").fetchone()
    (version,) = connection.execute("PRAGMA user_version").fetchone()
    (objects,) = connection.execute("SELECT count(*) FROM sqlite_master").fetchone()
    connection.execute("COMMIT")
    if application != APPLICATION_ID and objects:
        raise LibraryError(f"{path} is not a library: it is the database of another program", "", "Give a library file")
    if version > SCHEMA_VERSION:
        raise SchemaError(
            f"The library {path} has schema {version}",
            f"This program knows schemas up to {SCHEMA_VERSION}",
            "Use a newer curvelab",
        )
    return int(version)


def _older(path: Path, version: int) -> LibraryError:
    if version == 0:
        return NotFoundError(
            f"{path} is empty and holds no library", "", "Store a worksheet first, or give a library file"
        )
    return OlderSchemaError(
        f"The library {path} has the older schema {version}",
        f"Schema {SCHEMA_VERSION} is needed",
        "Open it once with the right to write",
    )
