"""What the handlers work with: the drafts, the library, and the rooms in which both may be busy."""

import threading
from contextlib import AbstractContextManager
from pathlib import Path
from typing import TYPE_CHECKING

from curvelab.library.library import Library
from curvelab.workbench.lending import Lending

if TYPE_CHECKING:
    # Reading sheets needs image libraries; the library alone is served without them.
    from curvelab.workbench.drafts import Drafts

READERS = 16
"""Libraries read at once; more would only wait for the processor."""


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
        self._reading = Lending(library, READERS, create=False)
        self._writing = Lending(library, 1, create=True)

    @property
    def drafts(self) -> "Drafts":
        """The drafts; what reads sheets is loaded with them, not before."""
        from curvelab.workbench.drafts import Drafts  # noqa: PLC0415

        with self._beginning:
            if self._drafts is None:
                self._drafts = Drafts(self.library_path)
            return self._drafts

    def reading(self) -> AbstractContextManager[Library]:
        """A library lent to this request, to read from; errors as for `Lending.lent`."""
        return self._reading.lent()

    def writing(self) -> AbstractContextManager[Library]:
        """The library lent to this request alone, to write to; it is begun where there is none."""
        return self._writing.lent()

    def stop_waiting(self) -> None:
        """Answer at once all requests that wait for something to happen."""
        if self._drafts is not None:
            self._drafts.stop_waiting()

    def close(self) -> None:
        """Stop what runs in the background."""
        self._reading.close()
        self._writing.close()
        if self._drafts is not None:
            self._drafts.close()
