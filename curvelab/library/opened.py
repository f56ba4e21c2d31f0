"""A library file that is open: one connection that reads, and one that writes once something is to be written."""

import sqlite3
from pathlib import Path
from types import TracebackType
from typing import Any, Self

from curvelab.library.connect import OlderSchemaError, named_errors, open_to_read
from curvelab.library.place import data_folder


class OpenedLibrary:
    """The connections of one library file; each is opened when first needed."""

    def __init__(self, path: Path) -> None:
        self.path = path
        self._reader: sqlite3.Connection | None = None
        self._writer: Any = None

    def open(self) -> sqlite3.Connection:
        """The connection that reads; opened once. A library of an older schema is brought up to date, after a backup.

        Raises
        ------
        LibraryError
            There is no such file, or it is not a library.
        """
        if self._reader is None:
            try:
                self._reader = open_to_read(self.path)
            except OlderSchemaError:
                self.open_writer()
                self._reader = open_to_read(self.path)
        return self._reader

    def close(self) -> None:
        """Close the file; it opens again when next used."""
        for connection in (self._reader, self._writer and self._writer.conn):
            if connection is not None:
                connection.close()
        self._reader = self._writer = None

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.close()

    def open_writer(self) -> Any:
        """The connection that writes, of sqlite-utils; opened once. The file is begun or brought up to date.

        Raises
        ------
        LibraryError
            The file cannot be written, or is something else.
        """
        # Only writing needs the library with its slower import; asking a device starts without it.
        from curvelab.library import migrate  # noqa: PLC0415

        if self._writer is None:
            if self.path.parent == data_folder():
                self.path.parent.mkdir(parents=True, exist_ok=True)
            with named_errors(self.path):
                self._writer = migrate.open_migrated(self.path)
        return self._writer
