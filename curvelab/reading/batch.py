"""Many pages read one after the other or at once: what there is to read, and how its results travel."""

import copyreg
import hashlib
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path
from types import MappingProxyType
from typing import Any, TypeAlias

from curvelab import __version__
from curvelab.errors import CurvelabError
from curvelab.records.reading import Reading
from curvelab.records.worksheet import Worksheet
from curvelab.sheets.pages import page_count
from curvelab.worksheets.read import read_worksheet

SHEETS = frozenset({".png", ".jpg", ".jpeg", ".tif", ".tiff", ".bmp", ".webp", ".pdf", ".svg"})
WORKSHEET = ".toml"
DONE = "curvelab-done.jsonl"
"""The list of what is done; a folder that holds it is one of results."""


def _read_only(mapping: dict[Any, Any]) -> MappingProxyType[Any, Any]:
    return MappingProxyType(mapping)


# Records hold read-only mappings, which travel between processes as the dictionaries they show.
copyreg.pickle(MappingProxyType, lambda mapping: (_read_only, (dict(mapping),)))


@dataclass(frozen=True, kw_only=True, slots=True)
class Job:
    """One page of a sheet, or one worksheet.

    ``source`` is its path within the folder, ``key`` the hash of all that its result depends on: the bytes, the page
    and the version of the program. An empty key is of a file that cannot be read.
    """

    source: str
    path: Path
    page: int
    pages: int
    key: str

    @property
    def stem(self) -> str:
        """What its results are called, within the folder of results: ``pumps/breaker.pdf-page2``."""
        return self.source if self.pages == 1 else f"{self.source}-page{self.page}"


@dataclass(frozen=True, kw_only=True, slots=True)
class Entry:
    """One line of the summary: a plot of a page, or a page that could not be read."""

    source: str
    page: int
    plot: int | None
    outcome: str
    curves: int = 0
    devices: tuple[str, ...] = ()
    findings: Mapping[str, int] = field(default_factory=dict)
    warnings: tuple[str, ...] = ()
    message: str = ""
    files: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Outcome:
    """What became of a job: its entries, its files by name, and its readings where they are to be stored."""

    job: Job
    entries: tuple[Entry, ...]
    contents: Mapping[str, bytes] = field(default_factory=dict)
    readings: tuple[Reading, ...] = ()


Work: TypeAlias = Callable[[Job], Outcome]
Engine: TypeAlias = Callable[[Work, list[Job]], Iterator[tuple[Job, Outcome | None]]]
"""Does the work on every job, giving each as it is done; None where whatever did it was killed."""


def jobs_in(folder: Path, results: Path) -> list[Job]:
    """Every worksheet, and every page of every sheet that no worksheet speaks of, in the order of their names.

    Looks into the folders within; leaves out hidden ones and those of results, of this run and of others.
    """
    left_out = {results, *(path.parent for path in folder.rglob(DONE))}
    files = [path for path in sorted(folder.rglob("*")) if _is_read(path, folder, left_out)]
    worksheets = [path for path in files if path.suffix.lower() == WORKSHEET]
    spoken_of = {page for path in worksheets for page in _pages_of(path)}
    found: list[Job] = []
    for path in files:
        source = path.relative_to(folder).as_posix()
        if path in worksheets:
            found.append(Job(source=source, path=path, page=1, pages=1, key=_key(path, 1)))
            continue
        count = _count(path)
        pages = [page for page in range(1, count + 1) if (path.resolve(), page) not in spoken_of]
        found += [Job(source=source, path=path, page=page, pages=count, key=_key(path, page)) for page in pages]
    return found


def _is_read(path: Path, folder: Path, left_out: set[Path]) -> bool:
    parts = path.relative_to(folder).parts
    hidden = any(part.startswith(".") for part in parts)
    is_left_out = hidden or not left_out.isdisjoint(path.parents)
    return path.suffix.lower() in SHEETS | {WORKSHEET} and not is_left_out and path.is_file()


def _count(path: Path) -> int:
    """Pages of a file; 1 of one that cannot be opened, so that its error is told when it is read."""
    try:
        return page_count(path)
    except CurvelabError:
        return 1


def _worksheet(path: Path) -> Worksheet | None:
    try:
        return read_worksheet(path)
    except CurvelabError:
        return None


def _pages_of(path: Path) -> Iterator[tuple[Path, int]]:
    """The page a worksheet is of."""
    worksheet = _worksheet(path)
    if worksheet is not None and worksheet.sheet is not None:
        yield (path.parent / worksheet.sheet.file).resolve(), worksheet.sheet.page


def _key(path: Path, page: int) -> str:
    """Hash of the program's version, the page, the file's bytes and, of a worksheet, its sheet's."""
    told = hashlib.sha256(f"{__version__}\n{page}\n".encode())
    paths = [path, *(sheet for sheet, _ in _pages_of(path))] if path.suffix.lower() == WORKSHEET else [path]
    try:
        for each in paths:
            told.update(hashlib.sha256(each.read_bytes()).digest())
    except OSError:
        return ""
    return told.hexdigest()


def failed(job: Job, message: str) -> Outcome:
    """The outcome of a job whose page could not be read."""
    return _said(job, "failed", message)


def without_plot(job: Job) -> Outcome:
    """The outcome of a page among others that shows no plot, such as one of text."""
    return _said(job, "no plot", "")


def _said(job: Job, outcome: str, message: str) -> Outcome:
    entry = Entry(source=job.source, page=job.page, plot=None, outcome=outcome, message=message)
    return Outcome(job=job, entries=(entry,))
