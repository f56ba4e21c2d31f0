"""One case: the command run as typed, and what it must not do."""

import contextlib
import io
import shutil
import signal
import sqlite3
import tempfile
import time
import traceback
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from curvelab.cli.main import run
from tests.fuzz.intakes import CORPUS, Case, Intake, Place

LONGEST_S = 30


@dataclass(frozen=True, kw_only=True, slots=True)
class Outcome:
    """``fault`` says what the case did that no input may do; None is as it should be."""

    status: int
    seconds: float
    fault: str | None


class _TooLongError(BaseException):
    pass


def pristine_library(folder: Path) -> Path:
    """A library of the corpus's worksheets, that each case gets a copy of."""
    library = folder / "library.sqlite"
    worksheets = [str(CORPUS / "worksheet" / name) for name in ("valid-typed.toml", "valid-adjustable.toml")]
    with contextlib.redirect_stdout(io.StringIO()):
        assert run(["store", *worksheets, "--library", str(library)]) == 0
    return library


def attempt(intake: Intake, case: Case, pristine: Path) -> Outcome:
    """Run a case against a copy of the library."""
    with tempfile.TemporaryDirectory() as name:
        place = Place(folder=Path(name) / "case", library=Path(name) / pristine.name)
        place.folder.mkdir()
        shutil.copy(pristine, place.library)
        words = intake.command(*case, place)
        out, err = io.StringIO(), io.StringIO()
        started = time.perf_counter()
        status, fault = -1, None
        try:
            with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err), _limit():
                status = run(list(words))
        except _TooLongError:
            fault = f"ran longer than {LONGEST_S} s"
        except BaseException:  # whatever leaves the command is a finding
            fault = traceback.format_exc()
        seconds = time.perf_counter() - started
        return Outcome(status=status, seconds=seconds, fault=fault or _fault(status, err.getvalue(), place, pristine))


def _fault(status: int, told: str, place: Place, pristine: Path) -> str | None:
    if status not in {0, 1, 2}:
        return f"exit status {status}"
    if "Traceback" in told:
        return told
    if status == 2 and len(told.rstrip("\n").split("\n")) != 1:
        return f"exit status 2 with {told!r}"
    if status == 2 and _content(place.library) != _content(pristine):
        return f"refused, yet the library changed: {told!r}"
    return None


def _content(library: Path) -> list[str]:
    with contextlib.closing(sqlite3.connect(library)) as connection:
        return list(connection.iterdump())


@contextlib.contextmanager
def _limit() -> Iterator[None]:
    def stop(*_: object) -> None:
        raise _TooLongError

    before = signal.signal(signal.SIGALRM, stop)
    signal.alarm(LONGEST_S)
    try:
        yield
    finally:
        signal.alarm(0)
        signal.signal(signal.SIGALRM, before)
