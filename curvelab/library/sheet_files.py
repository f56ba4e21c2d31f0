"""Keeps the bytes of the sheets' files, each once, known by their SHA-256."""

import hashlib
import sqlite3
from dataclasses import dataclass
from pathlib import Path
from typing import Self

from curvelab.errors import SheetError


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetFile:
    """A sheet's file as it is now."""

    file: Path
    sha256: str
    content: bytes

    @classmethod
    def read(cls, file: Path) -> Self:
        """Read the file.

        Raises
        ------
        SheetError
            It cannot be read.
        """
        try:
            content = file.read_bytes()
        except OSError as error:
            raise SheetError(f"The sheet's file {file} cannot be read: {error.strerror}") from error
        return cls(file=file, sha256=hashlib.sha256(content).hexdigest(), content=content)

    def keep(self, connection: sqlite3.Connection) -> None:
        """Store the bytes unless they are there.

        Raises
        ------
        SheetError
            The library holds no sheet of these bytes: the file has changed since it was read.
        """
        if connection.execute("SELECT 1 FROM sheet WHERE sha256 = ?", (self.sha256,)).fetchone() is None:
            raise SheetError(
                f"The file {self.file} is not the one that was read: its bytes differ",
                "",
                "Read it again, then store; nothing was stored",
            )
        connection.execute("INSERT OR IGNORE INTO source (sha256, bytes) VALUES (?, ?)", (self.sha256, self.content))
