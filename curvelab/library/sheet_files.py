"""Keeps the bytes of the sheets' files, each once, known by their SHA-256."""

import hashlib
import sqlite3
from collections.abc import Collection, Iterable, Mapping
from pathlib import Path

from curvelab.errors import SheetError


def read_sheet_files(files: Iterable[Path], sheets: Collection[str]) -> dict[str, bytes]:
    """SHA-256 -> bytes of each file.

    Parameters
    ----------
    files : iterable of Path
    sheets : collection of str
        SHA-256 of the sheets that were read.

    Raises
    ------
    SheetError
        A file cannot be read, or has changed since it was read as a sheet.
    """
    contents = {}
    for file in files:
        try:
            content = file.read_bytes()
        except OSError as error:
            raise SheetError(f"The sheet's file {file} cannot be read: {error.strerror}") from error
        sha256 = hashlib.sha256(content).hexdigest()
        if sha256 not in sheets:
            raise SheetError(
                f"The file {file} is not the one that was read: its bytes differ", "", "Read it again, then store"
            )
        contents[sha256] = content
    return contents


def keep_sheet_files(connection: sqlite3.Connection, contents: Mapping[str, bytes]) -> None:
    """Store the bytes of files that the library has a sheet of, unless they are there."""
    connection.executemany(
        """
        INSERT INTO source (sha256, bytes) SELECT :sha256, :content
        WHERE EXISTS (SELECT 1 FROM sheet WHERE sha256 = :sha256)
          AND NOT EXISTS (SELECT 1 FROM source WHERE sha256 = :sha256)
        """,
        [{"sha256": sha256, "content": content} for sha256, content in contents.items()],
    )
