"""A page that may cost too much is read in a process of its own, which may grow and last only so long.

PDFium takes no limits: a page of a few hundred bytes can ask it for terabytes, or for years.
"""

import os
import pickle
import subprocess
import sys
from dataclasses import replace

from curvelab.errors import SheetError
from curvelab.records.sheet import Sheet
from curvelab.sheets import limits
from curvelab.sheets.source import Source

COMMAND = "from curvelab.sheets.apart import answer; answer()"


def read_apart(source: Source) -> Sheet:
    """One page of a PDF, read by ``curvelab.sheets.pdf`` in another process.

    Raises
    ------
    SheetError
        As the page's reader tells, or the page takes more memory or time than `limits` allow.
    """
    try:
        done = subprocess.run(
            [sys.executable, "-c", COMMAND],
            input=pickle.dumps(source),
            stdout=subprocess.PIPE,
            stderr=subprocess.DEVNULL,
            timeout=limits.PAGE_SECONDS,
            env={**os.environ, "PYTHONPATH": os.pathsep.join(sys.path), "OPENBLAS_NUM_THREADS": "1"},
            check=False,
        )
    except subprocess.TimeoutExpired as error:
        raise _too_costly(source) from error
    if done.returncode != 0:
        raise _too_costly(source)
    told: Sheet | SheetError = pickle.loads(done.stdout)
    if isinstance(told, SheetError):
        raise told
    return _frozen(told)


def answer() -> None:
    """Read the source on standard input and write the sheet, or the error, to standard output."""
    from curvelab.sheets.pdf import pdf_here  # noqa: PLC0415 - the reader is loaded before memory is limited

    source: Source = pickle.load(sys.stdin.buffer)
    _limit_memory()
    try:
        told: Sheet | SheetError = pdf_here(source)
    except SheetError as error:
        told = SheetError(error.problem, error.expected, error.fix)
    sys.stdout.buffer.write(pickle.dumps(told))
    sys.stdout.buffer.flush()


def _limit_memory() -> None:
    """Allow so much more than is in use now; where the system knows no such limit the time alone is bounded."""
    try:
        import resource  # noqa: PLC0415 - not on every system
    except ImportError:
        return
    with open("/proc/self/statm", encoding="ascii") as told:
        used = int(told.read().split()[0]) * resource.getpagesize()
    resource.setrlimit(resource.RLIMIT_AS, (used + limits.PAGE_BYTES, used + limits.PAGE_BYTES))


def _too_costly(source: Source) -> SheetError:
    return SheetError(
        f"Page {source.page} of '{source.name}' asks for too much to be opened",
        f"At most {limits.PAGE_BYTES / 1e6:.0f} MB and {limits.PAGE_SECONDS} s",
        "Save the plot alone, or scan the page",
    )


def _frozen(sheet: Sheet) -> Sheet:
    """The sheet with read-only arrays, which writing it down does not keep."""
    return replace(
        sheet,
        pixels=replace(sheet.pixels) if sheet.pixels else None,
        strokes=tuple(replace(stroke) for stroke in sheet.strokes),
    )
