"""One worksheet being worked on: its history on disk, its reading in the background, its sheet to look at."""

import threading
from concurrent.futures import Executor
from dataclasses import replace
from datetime import UTC, datetime
from pathlib import Path

from curvelab.errors import InputError
from curvelab.records.sheet import Sheet
from curvelab.records.worksheet import Worksheet
from curvelab.sheets.open import open_sheet, read_file
from curvelab.sheets.picture import picture_of
from curvelab.sheets.tiles import Pyramid, pyramid_of
from curvelab.workbench import kept as disk
from curvelab.workbench.bell import Bell
from curvelab.workbench.changes import Change, Redo, Undo, WriteWorksheet
from curvelab.workbench.failures import Conflict, Unknown
from curvelab.workbench.grounded import grounded
from curvelab.workbench.history import History
from curvelab.workbench.kept import Kept
from curvelab.workbench.memory import PageMemory, Pages
from curvelab.workbench.work import Work, Worker
from curvelab.worksheets.paths import sheet_path
from curvelab.worksheets.read import parse_worksheet


class Draft:
    """A draft that is open.

    Parameters
    ----------
    folder : Path
        Its own.
    kept : Kept
        What the folder holds.
    pages : Pages
        What is remembered of pages.
    threads : Executor
        Where readings are made.
    """

    def __init__(self, folder: Path, kept: Kept, pages: Pages, threads: Executor) -> None:
        self.id = folder.name
        self.folder = folder
        self.bell = Bell()
        self._kept = kept
        self._pages = pages
        self._changing = threading.RLock()
        self._tick = 0
        self._worker = Worker(threads, folder, self.memory, self._changed)

    @property
    def kept(self) -> Kept:
        """Its name, sheet and history."""
        return self._kept

    @property
    def history(self) -> History:
        """Its steps."""
        return self._kept.history

    @property
    def work(self) -> Work:
        """How far its reading is."""
        return self._worker.work

    @property
    def is_shown(self) -> bool:
        """Whether the newest worksheet's curves can be seen, or will not be."""
        return self.work.state != "reading" or self.work.of is self.history.worksheet

    @property
    def tick(self) -> int:
        """Counts every change that can be seen."""
        return self._tick

    def read(self) -> None:
        """Read the worksheet, unless that is done or being done."""
        with self._changing:
            if self.work.state != "reading" and self.work.of is not self.history.worksheet:
                self._worker.want(self.history.worksheet)

    def cancel(self) -> None:
        """Stop reading."""
        self._worker.cancel()

    def change(self, base_version: int, change: Change) -> None:
        """Make one step, write it to disk, and read anew.

        Raises
        ------
        Conflict
            Somebody has changed the draft since ``base_version``.
        InputError
            The change cannot be made.
        LibraryError
            It cannot be written.
        """
        with self._changing:
            self._take_from_others()
            if base_version != self.history.version:
                raise Conflict("The worksheet was changed elsewhere", self.history.version)
            self._keep(replace(self._kept, history=self._changed_history(change), changed=_now()))
            self._worker.want(self.history.worksheet)

    def _take_from_others(self) -> None:
        """Another process that serves the same library may have changed the draft."""
        if disk.version_of(self.folder) != self.history.version:
            self._kept = disk.read(self.folder)
            self._worker.want(self.history.worksheet)

    def _changed_history(self, change: Change) -> History:
        if isinstance(change, Undo):
            return self.history.undone()
        if isinstance(change, Redo):
            return self.history.redone()
        if isinstance(change, WriteWorksheet):
            worksheet = parse_worksheet(change.text)
            self._refuse_other_sheet(worksheet)
            return self.history.with_step(worksheet, "Worksheet edited")
        worksheet = grounded(self.history.worksheet, self.work.reading, change)
        return self.history.with_step(change.made(worksheet), change.words)

    def _refuse_other_sheet(self, worksheet: Worksheet) -> None:
        """A worksheet names only the sheet that lies beside it."""
        sheet, own = worksheet.sheet, self._kept.sheet
        if sheet is not None and (own is None or sheet.file != own.file):
            named = f"the sheet '{own.file}'" if own else "no sheet"
            raise InputError(f"This draft has {named}, not '{sheet.file}'", "", "Open that sheet")

    def _keep(self, kept: Kept) -> None:
        disk.write(self.folder, kept, self._kept)
        self._kept = kept
        self._changed()

    def _changed(self) -> None:
        self._tick += 1
        self.bell.ring()

    def memory(self, page: int | None = None) -> PageMemory:
        """What is remembered of a page of its sheet, the one that is read where none is named."""
        sheet = self._kept.sheet
        return self._pages.memory((sheet.sha256, sheet.file, page or self.page) if sheet else self.id)

    @property
    def page(self) -> int:
        """The page that is read."""
        entry = self.history.worksheet.sheet
        return entry.page if entry else 1

    def sheet(self, page: int | None = None) -> Sheet:
        """A page of its sheet, from memory or opened; the one that is read where none is named.

        Raises
        ------
        Unknown
            It has none.
        SheetError
            There is no such page.
        """
        own, path = self._sheet_file()
        number = page or self.page
        given = (own.file, number, own.sha256)
        return self.memory(number)("sheet", given, lambda: open_sheet(path, number))

    def pyramid(self, page: int | None = None) -> Pyramid:
        """What is shown of a page; arguments and errors as for `sheet`."""
        _, path = self._sheet_file()
        sheet = self.sheet(page)

        def make() -> Pyramid:
            return pyramid_of(picture_of(sheet, read_file(str(path))))

        return self.memory(page)("picture", (sheet,), make)

    def _sheet_file(self) -> tuple[disk.SheetFile, Path]:
        own = self._kept.sheet
        if own is None:
            raise Unknown("This draft has no sheet: its points are typed")
        return own, sheet_path(self.folder / disk.WORKSHEET, own.file)


def _now() -> str:
    return datetime.now(UTC).isoformat(timespec="seconds")
