"""The reading of one draft in the background: one at a time, of the newest worksheet, told about and stopped."""

import logging
import threading
from collections.abc import Callable
from concurrent.futures import Executor
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Literal

from curvelab.axes.boxes import plot_boxes
from curvelab.errors import Cancelled, CurvelabError
from curvelab.reading.digitise import read_curves, with_findings
from curvelab.reading.remember import Remember
from curvelab.records.reading import Reading
from curvelab.records.worksheet import Box, Worksheet

log = logging.getLogger(__name__)

WorkState = Literal["reading", "ready", "failed", "cancelled"]


@dataclass(frozen=True, kw_only=True, slots=True)
class Work:
    """How far the reading of the newest worksheet is, and the last reading that was completed."""

    state: WorkState
    stage: str = ""
    fraction: float = 0.0
    error: CurvelabError | None = None
    reading: Reading | None = None
    of: Worksheet | None = None
    """The worksheet that ``reading`` was made from."""
    number: int = 0
    """Counts readings; their findings may come later."""
    plots: tuple[Box, ...] = ()
    """Of the page, in the order of their numbers."""


class Worker:
    """Reads worksheets of one draft.

    Parameters
    ----------
    threads : Executor
        Where the work is done.
    folder : Path
        The draft's.
    memory : callable
        Gives what is remembered of the draft's page.
    tell : callable
        Called after each change of `work`.
    """

    def __init__(
        self, threads: Executor, folder: Path, memory: Callable[[], Remember], tell: Callable[[], None]
    ) -> None:
        self._threads = threads
        self._folder = folder
        self._memory = memory
        self._tell = tell
        self._lock = threading.Lock()
        self._wanted: Worksheet | None = None
        self._is_running = False
        self.work = Work(state="cancelled")

    def want(self, worksheet: Worksheet) -> None:
        """Read this; what is being read of an older worksheet stops."""
        with self._lock:
            self._wanted = worksheet
            self.work = replace(self.work, state="reading", stage="Waiting", fraction=0.0, error=None)
            start = not self._is_running
            self._is_running = True
        self._tell()
        if start:
            self._threads.submit(self._run)

    def cancel(self) -> None:
        """Stop; the last completed reading stays."""
        with self._lock:
            self._wanted = None
            if self.work.state == "reading":
                self.work = replace(self.work, state="cancelled", stage="", fraction=0.0)
        self._tell()

    def _run(self) -> None:
        """Read until nothing newer is wanted."""
        while True:
            with self._lock:
                worksheet = self._wanted
                if worksheet is None:
                    self._is_running = False
                    return
            done = self._outcome(worksheet)
            with self._lock:
                if self._wanted is worksheet:
                    self._wanted = None
                    self.work = done
            self._tell()

    def _show(self, worksheet: Worksheet, reading: Reading) -> None:
        """Let curves be seen before they are checked; what was found before stands until then."""
        with self._lock:
            if self._wanted is worksheet:
                before = self.work.reading.findings if self.work.reading else ()
                number, shown = self.work.number + 1, replace(reading, findings=before)
                self.work = replace(self.work, reading=shown, of=worksheet, number=number)
        self._tell()

    def _outcome(self, worksheet: Worksheet) -> Work:
        def watch(stage: str, fraction: float) -> None:
            with self._lock:
                if self._wanted is not worksheet:
                    raise Cancelled
                self.work = replace(self.work, stage=stage, fraction=fraction)
            self._tell()

        try:
            memory = self._memory()
            reading = read_curves(worksheet, self._folder, watch, memory)
            self._show(worksheet, reading)
            watch("Checking", 0.0)
            reading = with_findings(reading, memory)
            plots = _plots(reading, memory)
        except Cancelled:
            return replace(self.work, state="cancelled")
        except CurvelabError as error:
            return replace(self.work, state="failed", stage="", error=error)
        except Exception as error:
            log.exception("A reading failed")
            problem = CurvelabError(f"The program made a mistake in reading: {error}", "", "Undo the last change")
            return replace(self.work, state="failed", stage="", error=problem)
        number = self.work.number
        return Work(state="ready", fraction=1.0, reading=reading, of=worksheet, number=number, plots=plots)


def _plots(reading: Reading, remember: Remember) -> tuple[Box, ...]:
    """Where the page's plots lie; where it has one, that is what the axes cover."""
    sheet, axes = reading.sheet, reading.axes
    if sheet is None or axes is None:
        return ()
    if axes.plot > 1 or any(warning.code == "several-plots" for warning in reading.warnings):
        return remember("plots", (sheet,), lambda: plot_boxes(sheet))
    return (axes.frame,)
