"""Brings a library to the schema of this program: numbered steps, all in one transaction or none, after a backup."""

from pathlib import Path

from sqlite_utils import Database

from curvelab.library.backup import copy_whole
from curvelab.library.begin_log import enter_unlogged
from curvelab.library.connect import SCHEMA_VERSION, open_to_write, transaction
from curvelab.library.current import refresh_missing
from curvelab.paths import shipped


def open_migrated(path: Path) -> Database:
    """Open a library to write, or begin one; an older one is kept beside it and brought to this program's schema."""
    database = Database(open_to_write(path), strict=True)
    try:
        migrate(database, path)
    except BaseException:
        database.conn.close()
        raise
    return database


def migrations() -> dict[int, Path]:
    """Number of each step -> its file in ``database/migrations``, in order."""
    files = sorted((shipped("database") / "migrations").glob("[0-9][0-9][0-9][0-9]_*.sql"))
    return {int(file.name[:4]): file for file in files}


def migrate(database: Database, path: Path) -> None:
    """Apply the steps that the library lacks; a failing step leaves nothing of any."""
    version = _version(database)
    if version == SCHEMA_VERSION:
        return
    if version:
        copy_whole(database.conn, path.with_name(f"{path.name}.schema-{version}.backup"))
    database.enable_wal()
    with transaction(database.conn):
        version = _version(database)  # again: another program may have migrated meanwhile
        for number, file in migrations().items():
            if number > version:
                database.executescript(file.read_text(encoding="utf-8"))
                database.conn.execute(f"PRAGMA user_version = {number}")
        enter_unlogged(database.conn)
        refresh_missing(database.conn)


def _version(database: Database) -> int:
    return int(database.conn.execute("PRAGMA user_version").fetchone()[0])
