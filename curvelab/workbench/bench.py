"""What the handlers work with: the drafts, the library, and the rooms in which both may be busy."""

import threading
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING

from curvelab.library.library import Library, open_library
from curvelab.workbench.failures import Busy

if TYPE_CHECKING:
    # Reading sheets needs image libraries; the library alone is served without them.
    from curvelab.workbench.drafts import Drafts

READERS = 24
"""Connections that read at once; further requests wait."""
WAIT_S = 20.0
"""How long a request waits for its turn."""


class Bench:
    """One library and its drafts, for as long as the server runs.

    Parameters
    ----------
    library : Path
        The library file; it need not exist yet.
    """

    def __init__(self, library: Path) -> None:
        self.library_path = library
        self.uploads = 0
        self._drafts: Drafts | None = None
        self._beginning = threading.Lock()
        self._turns = threading.Semaphore(READERS)
        self._writing = threading.Lock()

    @property
    def drafts(self) -> "Drafts":
        """The drafts; what reads sheets is loaded with them, not before."""
        from curvelab.workbench.drafts import Drafts  # noqa: PLC0415

        with self._beginning:
            if self._drafts is None:
                self._drafts = Drafts(self.library_path)
            return self._drafts

    @contextmanager
    def reading(self) -> Iterator[Library]:
        """A library of this request's own, to read from.

        Raises
        ------
        Busy
            Too many read at once.
        """
        if not self._turns.acquire(timeout=WAIT_S):
            raise Busy("Too many requests at once", "", "Try again")
        try:
            with open_library(self.library_path, create=False) as library:
                yield library
        finally:
            self._turns.release()

    @contextmanager
    def writing(self) -> Iterator[Library]:
        """The library to write to, one request after the other.

        Raises
        ------
        Busy
            Others take too long.
        """
        if not self._writing.acquire(timeout=WAIT_S):
            raise Busy("Too many changes at once", "", "Try again")
        try:
            with open_library(self.library_path) as library:
                yield library
        finally:
            self._writing.release()

    def stop_waiting(self) -> None:
        """Answer at once all requests that wait for something to happen."""
        if self._drafts is not None:
            self._drafts.stop_waiting()

    def close(self) -> None:
        """Stop what runs in the background."""
        if self._drafts is not None:
            self._drafts.close()
