"""All drafts of a library: in the folder ``<library>.drafts`` beside it, each in a folder of its own."""

import json
import os
import re
import secrets
import threading
import time
from concurrent.futures import ThreadPoolExecutor
from contextlib import suppress
from dataclasses import dataclass, replace
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

from curvelab.errors import LibraryError, SheetError
from curvelab.records.worksheet import SheetEntry, Worksheet
from curvelab.sheets.kind import SUPPORTED, kind_of
from curvelab.sheets.open import sheet_from_bytes
from curvelab.workbench import kept as disk
from curvelab.workbench.draft import Draft
from curvelab.workbench.failures import Unknown
from curvelab.workbench.history import History
from curvelab.workbench.kept import Kept, SheetFile
from curvelab.workbench.memory import Pages
from curvelab.workbench.names import file_name, shown_name
from curvelab.worksheets.read import parse_worksheet
from curvelab.worksheets.write import worksheet_text

READERS = 2
"""Readings made at once."""
ID = re.compile(r"[0-9a-f]{16}")
BIN = "bin"
KEPT_DAYS = 30
DAY_S = 86_400.0


@dataclass(frozen=True, kw_only=True, slots=True)
class NewSheet:
    """A sheet to begin a draft with: its name as it was given, its bytes, and which page and plot."""

    name: str
    data: bytes
    page: int = 1
    plot: int | None = None


class Drafts:
    """Opens, begins and puts away drafts.

    Parameters
    ----------
    library : Path
        The library file; it need not exist yet.
    """

    def __init__(self, library: Path) -> None:
        self.folder = library.with_name(library.name + ".drafts")
        self.is_stopping = False
        self._open: dict[str, Draft] = {}
        self._lock = threading.RLock()
        self._pages = Pages()
        self._threads = ThreadPoolExecutor(READERS, "reading")
        self._empty_bin()

    def stop_waiting(self) -> None:
        """Answer at once all requests that wait for a draft to change."""
        self.is_stopping = True
        for draft in [*self._open.values()]:
            draft.bell.ring()

    def close(self) -> None:
        """Stop all readings."""
        for draft in [*self._open.values()]:
            draft.cancel()
        self._threads.shutdown(cancel_futures=True)

    def begin(self, new: NewSheet, worksheet: Worksheet | None = None) -> Draft:
        """A draft of a sheet, to be read by itself or as a worksheet says.

        Raises
        ------
        SheetError
            The sheet cannot be opened.
        """
        kind = kind_of(new.data)
        if kind is None:
            raise SheetError(f"'{shown_name(new.name)}' is not a sheet that can be read", SUPPORTED)
        file = file_name(new.name, kind)
        sheet = sheet_from_bytes(file, new.data, new.page)
        entry = SheetEntry(file=file, page=new.page, plot=new.plot, sha256=sheet.sha256)
        said = _with_sheet(worksheet or Worksheet(), entry)
        draft = self._begun(new, SheetFile(file=file, sha256=sheet.sha256, pages=sheet.pages), said)
        kept = replace(sheet, file=str(draft.folder / file))
        draft.memory()("sheet", (file, new.page, sheet.sha256), lambda: kept)
        draft.read()
        return draft

    def begin_typed(self, name: str, worksheet: Worksheet) -> Draft:
        """A draft of a worksheet without a sheet."""
        draft = self._begun(NewSheet(name=name, data=b""), None, worksheet)
        draft.read()
        return draft

    def _begun(self, new: NewSheet, own: SheetFile | None, worksheet: Worksheet) -> Draft:
        folder = self.folder / secrets.token_hex(8)
        kept = Kept(
            name=shown_name(new.name), changed=_now(), sheet=own, history=History.begun(worksheet, "As it was opened")
        )
        try:
            folder.mkdir(parents=True)
            if own is not None:
                disk.write_whole(folder / own.file, new.data)
        except OSError as error:
            raise LibraryError(
                f"The draft in {folder} cannot be written: {error.strerror}", "", "Free some space, or allow writing"
            ) from error
        disk.write(folder, kept)
        return self._opened(Draft(folder, kept, self._pages, self._threads))

    def _opened(self, draft: Draft) -> Draft:
        with self._lock:
            return self._open.setdefault(draft.id, draft)

    def draft(self, draft_id: str) -> Draft:
        """The draft, with its reading under way.

        Raises
        ------
        Unknown
            There is none of that name.
        """
        with self._lock:
            draft = self._open.get(draft_id)
        if draft is None:
            folder = self._folder_of(draft_id, self.folder)
            draft = self._opened(Draft(folder, disk.read(folder), self._pages, self._threads))
        if draft.work.reading is None and draft.work.state == "cancelled" and draft.tick == 0:
            draft.read()
        return draft

    def listed(self) -> list[dict[str, Any]]:
        """Drafts as they are listed, those changed last first."""
        rows = []
        for place in self.folder.glob(f"*/{disk.RECORD}"):
            with suppress(OSError, ValueError, KeyError):
                told = json.loads(place.read_bytes())
                rows.append({"id": place.parent.name, "name": told["name"], "changed": told["changed"]})
        for row in rows:
            draft = self._open.get(row["id"])
            row["state"] = draft.work.state if draft else "closed"
        return sorted(rows, key=lambda row: (row["changed"], row["id"]), reverse=True)

    def put_away(self, draft_id: str) -> None:
        """Move a draft to the bin.

        Raises
        ------
        Unknown
            There is none of that name.
        """
        folder = self._folder_of(draft_id, self.folder)
        with self._lock:
            draft = self._open.pop(draft_id, None)
            if draft is not None:
                draft.cancel()
            (self.folder / BIN).mkdir(exist_ok=True)
            os.replace(folder, self.folder / BIN / draft_id)
            os.utime(self.folder / BIN / draft_id)

    def restore(self, draft_id: str) -> Draft:
        """Bring a draft back from the bin; errors as for `put_away`."""
        folder = self._folder_of(draft_id, self.folder / BIN)
        os.replace(folder, self.folder / draft_id)
        return self.draft(draft_id)

    def _folder_of(self, draft_id: str, parent: Path) -> Path:
        """The folder of a draft; only names that we gave ourselves are looked for."""
        if not ID.fullmatch(draft_id) or not (parent / draft_id / disk.RECORD).is_file():
            raise Unknown("There is no such draft", "", "List the drafts")
        return parent / draft_id

    def _empty_bin(self) -> None:
        """Take away what has lain there long enough."""
        for folder in (self.folder / BIN).glob("*"):
            with suppress(OSError):
                if ID.fullmatch(folder.name) and time.time() - folder.stat().st_mtime > KEPT_DAYS * DAY_S:
                    disk.remove(folder)


def _with_sheet(worksheet: Worksheet, entry: SheetEntry) -> Worksheet:
    """The worksheet of this sheet, with its text."""
    plot = entry.plot if worksheet.sheet is None else worksheet.sheet.plot
    said = replace(worksheet, sheet=replace(entry, plot=plot))
    return parse_worksheet(worksheet_text(said))


def _now() -> str:
    return datetime.now(UTC).isoformat(timespec="seconds")
