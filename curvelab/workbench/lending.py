"""Lends open libraries to requests: opening one and preparing its questions anew costs more than most answers."""

import os
import threading
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from curvelab.errors import NotFoundError
from curvelab.library.library import Library, open_library
from curvelab.workbench.failures import Busy

WAIT_S = 20.0
"""How long a request waits for its turn."""

Identity = tuple[int, int]


class Lending:
    """Open libraries of one file, each lent to one request at a time.

    A file that was put in the place of another, as by a restore, is another library: those open before are closed.

    Parameters
    ----------
    path : Path
    most : int
        How many are lent at once; further requests wait.
    create : bool
        Whether a file that is not there may be begun.
    """

    def __init__(self, path: Path, most: int, *, create: bool) -> None:
        self._path = path
        self._create = create
        self._turns = threading.Semaphore(most)
        self._lock = threading.Lock()
        self._idle: list[tuple[Identity, Library]] = []

    @contextmanager
    def lent(self) -> Iterator[Library]:
        """A library.

        Raises
        ------
        NotFoundError
            There is no library yet.
        Busy
            Others take too long.
        """
        if not self._turns.acquire(timeout=WAIT_S):
            raise Busy("Too many requests at once", "", "Try again")
        try:
            identity = self._identity()
            library = self._taken(identity) or open_library(self._path, create=self._create)
            try:
                yield library
            except BaseException:
                library.close()
                raise
            with self._lock:
                self._idle.append((self._identity(), library))
        finally:
            self._turns.release()

    def close(self) -> None:
        """Close those that are not lent."""
        with self._lock:
            idle, self._idle = self._idle, []
        for _, library in idle:
            library.close()

    def _taken(self, identity: Identity) -> Library | None:
        while True:
            with self._lock:
                if not self._idle:
                    return None
                known, library = self._idle.pop()
            if known == identity:
                return library
            library.close()

    def _identity(self) -> Identity:
        try:
            found = os.stat(self._path)
        except OSError:
            if self._create:
                return (0, 0)
            raise NotFoundError("There is no library yet", "", "Store a reading first") from None
        return found.st_dev, found.st_ino
