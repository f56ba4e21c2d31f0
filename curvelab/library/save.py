"""Stores devices as new revisions, all of one call or none; what is already there makes no revision."""

import sqlite3
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace

from sqlite_utils import Database

import curvelab
from curvelab.library.connect import transaction
from curvelab.library.current import refresh
from curvelab.library.device_rows import add_curve, add_nameplate_lists, plate_values
from curvelab.library.evidence import add_reading
from curvelab.library.held import HeldDevice, HeldRevision, read_held_device
from curvelab.library.identity import NO_STATEMENT, curve_sha256, revision_sha256, statement_sha256
from curvelab.library.load import HeldCurve
from curvelab.library.log import Chain, now
from curvelab.library.merge import carried_curves, merged_nameplate, refuse_other_kind
from curvelab.library.rows import Row, WaitingRows
from curvelab.library.sheet_files import keep_sheet_files
from curvelab.library.stored import Signature, Stored
from curvelab.records.curve import Curve, SheetKey
from curvelab.records.device import DeviceRecord
from curvelab.records.reading import Reading

Storable = Reading | DeviceRecord


def store(
    database: Database, items: Sequence[Storable], signature: Signature, sheet_files: Mapping[str, bytes]
) -> list[Stored]:
    """Store readings, devices and the bytes of sheets (SHA-256 -> bytes) in one transaction.

    Raises
    ------
    InputError
        A key is already used by another kind of device.
    """
    with transaction(database.conn):
        batch = _Batch(database.conn, signature)
        stored = [one for item in items for one in batch.take(item)]
        batch.write()
        keep_sheet_files(database.conn, sheet_files)
    return stored


class _Batch:
    """One call's work: remembers what it has looked up and added, so that nothing is asked or stored twice."""

    def __init__(self, connection: sqlite3.Connection, signature: Signature) -> None:
        self.rows = WaitingRows(connection)
        self._connection = connection
        self._log = Chain(connection)
        self._signature = signature
        self._at = now()
        self._devices: dict[str, HeldDevice] = {}
        self._curves: dict[bytes, int] = {}
        self._sheets: dict[tuple[str, int, int], int] = {}
        self._new: dict[int, int] = {}
        self._whole: dict[int, DeviceRecord] = {}

    def take(self, item: Storable) -> Iterator[Stored]:
        """Store each device of a reading, or a device that no reading gave."""
        evidence = _Evidence(self, item if isinstance(item, Reading) else None)
        for record in item.devices if isinstance(item, Reading) else (item,):
            yield self._take_device(record, evidence)

    def write(self) -> None:
        """Write all that waits, and what searching asks of it."""
        self.rows.write()
        refresh(self._connection, self._new, self._whole)
        self._new.clear()
        self._whole.clear()

    def sheet_id(self, sheet: SheetKey | None) -> int | None:
        """The id of the sheet with these bytes, page and plot; its file's name is the one it was first stored by."""
        if sheet is None:
            return None
        known = (sheet.sha256, sheet.page, sheet.plot)
        if known not in self._sheets:
            found = self._connection.execute(
                "SELECT sheet_id FROM sheet WHERE sha256 = ? AND page = ? AND plot = ?", known
            ).fetchone()
            self._sheets[known] = found[0] if found else self.rows.new_id("sheet")
            if not found:
                self.rows.add("sheet", [(self._sheets[known], *known, sheet.file)])
        return self._sheets[known]

    def _take_device(self, given: DeviceRecord, evidence: "_Evidence") -> Stored:
        key = given.nameplate.key
        held = self._devices.get(key) or read_held_device(self._connection, key)
        if held:
            refuse_other_kind(given.nameplate, held.kind)
        newest = held.newest if held else None
        nameplate = merged_nameplate(newest.nameplate, given.nameplate) if newest else given.nameplate
        carried = carried_curves(newest.curves, given.curves) if newest else ()
        hashes = [curve_sha256(curve) for curve in given.curves]
        said = [(item.sha256, item.statement) for item in carried] + [(sha256, evidence.statement) for sha256 in hashes]
        content = revision_sha256(nameplate, said or [(b"", evidence.statement)])
        if newest and newest.sha256 == content:
            return Stored(key=key, revision=newest.number, changed=False)
        reading_id, evidence_sha256 = evidence.reading()
        new = tuple(
            HeldCurve(
                curve_id=self.curve_id(curve, sha256),
                sha256=sha256,
                reading_id=reading_id,
                statement=evidence.statement,
                curve=curve,
            )
            for sha256, curve in zip(hashes, given.curves, strict=True)
        )
        number = held.last_number + 1 if held else 1
        revision = HeldRevision(number=number, sha256=content, nameplate=nameplate, curves=(*carried, *new))
        self._devices[key] = self._add_revision(held, revision, reading_id, evidence_sha256)
        if not carried:
            self._whole[self._new[self._devices[key].device_id]] = replace(
                given, nameplate=nameplate, revision=number, state="draft"
            )
        if self.rows.are_many:
            self.write()
        return Stored(key=key, revision=number, changed=True)

    def _add_revision(
        self, held: HeldDevice | None, revision: HeldRevision, reading_id: int | None, evidence_sha256: bytes | None
    ) -> HeldDevice:
        plate = revision.nameplate
        device_id = held.device_id if held else self.rows.new_id("device")
        if not held:
            self.rows.add("device", [(device_id, plate.key, plate.kind)])
        revision_id = self.rows.new_id("revision")
        known_by = (revision_id, device_id, revision.number, revision.sha256)
        author, reason = self._signature.author, self._signature.reason
        signed = (self._at, author, reason, curvelab.__version__)
        self.rows.add("revision", [(*known_by, *signed, reading_id, *plate_values(plate), "draft")])
        self._new[device_id] = revision_id
        self.rows.add("log", [self._log_row(revision_id, revision, evidence_sha256)])
        add_nameplate_lists(self.rows, revision_id, plate)
        curves = enumerate(revision.curves, start=1)
        self.rows.add("revision_curve", ((revision_id, seq, item.curve_id, item.reading_id) for seq, item in curves))
        return HeldDevice(device_id=device_id, kind=plate.kind, last_number=revision.number, newest=revision)

    def _log_row(self, revision_id: int, revision: HeldRevision, evidence_sha256: bytes | None) -> Row:
        return self._log.next(
            revision_id,
            at=self._at,
            name=self._signature.author,
            action="stored",
            device_key=revision.nameplate.key,
            revision=revision.number,
            content=revision.sha256.hex(),
            evidence=evidence_sha256 and evidence_sha256.hex(),
            state="draft",
            reason=self._signature.reason,
        )

    def curve_id(self, curve: Curve, sha256: bytes) -> int:
        """The id of the curve with this content; stored now if it is new."""
        if sha256 not in self._curves:
            found = self._connection.execute(
                "SELECT curve_id FROM curve WHERE content_sha256 = ?", (sha256,)
            ).fetchone()
            self._curves[sha256] = found[0] if found else self.rows.new_id("curve")
            if not found:
                add_curve(self.rows, self._curves[sha256], curve, sha256, self.sheet_id(curve.sheet))
        return self._curves[sha256]


class _Evidence:
    """What led to devices: a reading, stored when the first of its devices turns out to be new; or nothing."""

    def __init__(self, batch: _Batch, reading: Reading | None) -> None:
        self.statement = statement_sha256(reading) if reading else NO_STATEMENT
        self._batch = batch
        self._reading = reading
        self._stored: tuple[int | None, bytes | None] = (None, None)

    def reading(self) -> tuple[int | None, bytes | None]:
        """The id of the stored reading and its hash, None where there is none."""
        if self._stored[0] is None and self._reading is not None:
            key = _sheet_key(self._reading)
            sheet = self._batch.sheet_id(key), (key.sha256, key.page, key.plot) if key else None
            self._stored = add_reading(self._batch.rows, self._reading, self.statement, sheet, self._batch.curve_id)
        return self._stored


def _sheet_key(reading: Reading) -> SheetKey | None:
    sheet, entry = reading.sheet, reading.worksheet.sheet
    if sheet is None:
        return None
    return SheetKey(sha256=sheet.sha256, page=sheet.page, plot=(entry.plot if entry else None) or 1, file=sheet.file)
