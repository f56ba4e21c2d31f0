"""The library's face: open it, store readings and devices, ask for devices."""

import os
from collections.abc import Iterable, Iterator, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

from curvelab.devices.device import Device
from curvelab.errors import NotFoundError
from curvelab.library.connect import named_errors
from curvelab.library.load import read_device
from curvelab.library.opened import OpenedLibrary
from curvelab.library.place import library_path
from curvelab.library.search import EVERY, FIRST_PAGE, Found, Page, Wanted, find
from curvelab.library.stored import Reviewed, Signature, Stored, United
from curvelab.library.watch import Watch, unwatched
from curvelab.records.device import DeviceRecord

if TYPE_CHECKING:
    # Asking a device starts without what only storing, reviewing and searching need.
    from curvelab.library.bands import BandQuery, BandsFound
    from curvelab.library.log import Entry
    from curvelab.library.verify import Verdict
    from curvelab.records.evidence import Evidence
    from curvelab.records.reading import Reading


def open_library(path: str | os.PathLike[str] | None = None, *, create: bool = True) -> "Library":
    """Open a library: the path given, else CURVELAB_LIBRARY, else the user's data folder.

    Parameters
    ----------
    path : path, optional
        The library file. A file that does not exist is made by the first ``store``, not before.
    create : bool
        False refuses a file that does not exist.

    Raises
    ------
    LibraryError
        The file is not a library this program can use.
    """
    library = Library(library_path(path))
    try:
        library.open()
    except NotFoundError:
        if not create:
            raise
    return library


class Library(OpenedLibrary):
    """One library file. Use it as a context manager, or close it."""

    def record(self, key: str, revision: int | None = None) -> DeviceRecord:
        """A stored device as a record: the current revision, or the one of that number.

        Raises
        ------
        NotFoundError
            No such key or revision.
        """
        with named_errors(self.path):
            return read_device(self.open(), key, revision)

    def device(self, key: str, revision: int | None = None) -> Device:
        """A stored device that can be asked; arguments and errors as for `record`."""
        return Device(self.record(key, revision))

    def keys(self) -> list[str]:
        """The keys of all devices, sorted."""
        with named_errors(self.path):
            return [key for (key,) in self.open().execute("SELECT device_key FROM device ORDER BY device_key")]

    def index(self) -> list[dict[str, Any]]:
        """The current revision of every device: rows of the view ``device_index``, sorted by key."""
        return self._index("is_current = 1 ORDER BY device_key")

    def history(self, key: str) -> list[dict[str, Any]]:
        """Every revision of a device, oldest first: rows of the view ``device_index``.

        Raises
        ------
        NotFoundError
            No such key.
        """
        rows = self.revisions([key])
        if not rows:
            raise NotFoundError(f"The library has no device '{key}'", "", "List what it has")
        return rows

    def revisions(self, keys: Sequence[str]) -> list[dict[str, Any]]:
        """Every revision of devices, by key and number: rows of the view ``device_index``."""
        asked = ", ".join("?" * len(keys))
        return self._index(f"device_key IN ({asked}) ORDER BY device_key, revision", *keys)

    def find(self, wanted: Wanted = EVERY, page: Page = FIRST_PAGE) -> Found:
        """Devices by words and nameplate, their current revisions, one page of them."""
        with named_errors(self.path):
            return find(self.open(), wanted, page)

    def find_bands(self, query: "BandQuery", wanted: Wanted = EVERY, page: Page = FIRST_PAGE) -> "BandsFound":
        """Devices that surely hold at a current for a time, trip within a time at another, or both."""
        from curvelab.library.bands import find_bands  # noqa: PLC0415

        with named_errors(self.path):
            return find_bands(self.open(), query, wanted, page)

    def evidence(self, key: str, revision: int | None = None) -> "Evidence":
        """What led to a revision: who, when, why, every reading, and the sheets' bytes; arguments as for `record`.

        `curvelab.reading.rerun` draws from it and reads it again.
        """
        from curvelab.library.evidence_load import read_evidence  # noqa: PLC0415

        with named_errors(self.path):
            return read_evidence(self.open(), key, revision)

    def log(self, key: str | None = None) -> "list[Entry]":
        """What happened to a device's revisions, or to all: oldest first."""
        from curvelab.library.log import entries  # noqa: PLC0415

        with named_errors(self.path):
            return list(entries(self.open(), key))

    def review(
        self, key: str, revision: int | None = None, *, state: str | None = None, name: str, reason: str = ""
    ) -> Reviewed:
        """Change the state of a revision (draft, checked, released, withdrawn), or note something about it.

        Parameters
        ----------
        key : str
        revision : int, optional
            The newest that is not withdrawn where left out.
        state : str, optional
            The new state; left out, ``reason`` is a note.
        name, reason : str
            Who reviews, and why; kept in the log.

        Raises
        ------
        InputError
            The state cannot follow, a reason is missing, or the person may not release what is theirs.
        NotFoundError
            No such device or revision.
        """
        from curvelab.library import review  # noqa: PLC0415 - only writing needs it

        self.open()
        with named_errors(self.path):
            writer = self.open_writer()
            return review.review(writer.conn, key, revision, state, Signature(author=name, reason=reason))

    def exported(self, keys: Iterable[str] | None = None) -> Iterator[str]:
        """The lines of the library's open form, see `curvelab.library.exchange`: of some devices, or of all.

        Raises
        ------
        NotFoundError
            No device has one of the keys.
        """
        from curvelab.library import exchange  # noqa: PLC0415 - asking a device starts without it

        with named_errors(self.path):
            for line in exchange.exported(self.open(), keys):
                yield exchange.text_of(line)

    def unite(self, lines: Iterable[str], *, file: str, name: str = "", reason: str = "") -> United:
        """Take what another library exported: revisions of both are kept, what contradicts is told.

        Parameters
        ----------
        lines : iterable of str
            As `exported` gives them.
        file : str
            What messages call them.
        name, reason : str
            Who imports, and why.

        Raises
        ------
        InputError
            A line is not what it must be, or its content not what its hash says. Nothing is taken.
        """
        from curvelab.library import exchange_read, united  # noqa: PLC0415 - only writing needs them

        signature = Signature(author=name, reason=reason)
        with named_errors(self.path):
            return united.unite(self.open_writer(), exchange_read.parsed(lines, file), signature, file)

    def backup(self, target: Path) -> None:
        """Copy the library to a file while others use it: whole, checked, one file.

        Raises
        ------
        LibraryError
            The copy cannot be written, or the library is damaged.
        """
        from curvelab.library import backup  # noqa: PLC0415 - asking a device starts without it

        backup.copy_whole(self.open(), target.absolute())

    def compact(self) -> None:
        """Give space that is no longer used back to the disk; others must not be writing."""
        from curvelab.library import backup  # noqa: PLC0415

        self.open()
        with named_errors(self.path):
            backup.compact(self.open_writer().conn)

    def verify(self, watch: Watch = unwatched) -> "Verdict":
        """Check that nothing in the library has changed since it was stored: file, references, hashes and log."""
        from curvelab.library.verify import verify  # noqa: PLC0415

        with named_errors(self.path):
            return verify(self.open(), watch)

    def store(
        self,
        what: "Reading | DeviceRecord | Iterable[Reading | DeviceRecord]",
        *,
        author: str = "",
        reason: str = "",
        sheet_files: Iterable[Path] = (),
    ) -> list[Stored]:
        """Store readings and devices, all or none; what the library already holds makes no revision.

        Curves of the same element, edge, quantity, conditions and settings are replaced, the device's others carry
        forward, and so do nameplate fields that are not given.

        Parameters
        ----------
        what : Reading, DeviceRecord or several
        author, reason : str
            Who stores, and why; kept with each new revision.
        sheet_files : iterable of Path
            Files of the sheets that were read; their bytes are kept as evidence.

        Returns
        -------
        list of Stored
            One a device, in the order given: key, revision, and whether it is new.

        Raises
        ------
        InputError
            A device is unsound, its key is used by another kind of device, or a sheet's file has changed since it
            was read. Nothing is stored.
        LibraryError
            The file cannot be written.
        """
        from curvelab.library import save  # noqa: PLC0415
        from curvelab.library import sheet_files as files  # noqa: PLC0415
        from curvelab.library.sound import refuse_unsound  # noqa: PLC0415
        from curvelab.records.reading import Reading  # noqa: PLC0415

        items = [what] if isinstance(what, Reading | DeviceRecord) else [*what]
        for item in items:
            for record in item.devices if isinstance(item, Reading) else (item,):
                refuse_unsound(record)
        sheets = {item.sheet.sha256 for item in items if isinstance(item, Reading) and item.sheet}
        contents = files.read_sheet_files(sheet_files, sheets)

        with named_errors(self.path):
            return save.store(self.open_writer(), items, Signature(author=author, reason=reason), contents)

    def _index(self, condition: str, *values: str) -> list[dict[str, Any]]:
        with named_errors(self.path):
            cursor = self.open().execute(f"SELECT * FROM device_index WHERE {condition}", values)
            names = [column[0] for column in cursor.description]
            return [dict(zip(names, row, strict=True)) for row in cursor]
