"""Unites another library with this one: revisions of both are kept, what contradicts is told, no number changes."""

import json
import sqlite3
from collections.abc import Callable, Iterable
from dataclasses import asdict, dataclass
from typing import Any

from sqlite_utils import Database

from curvelab.errors import InputError
from curvelab.library.connect import transaction
from curvelab.library.current import refresh
from curvelab.library.device_rows import add_nameplate_lists, plate_values
from curvelab.library.exchange import Line
from curvelab.library.exchange_read import GivenRevision, revision_of
from curvelab.library.identity import revision_sha256
from curvelab.library.log import Chain, Entry, entries, now
from curvelab.library.rows import WaitingRows
from curvelab.library.sound import refuse_twice, refuse_unsound
from curvelab.library.stored import Signature, United
from curvelab.library.united_parts import UnitedParts
from curvelab.records.device import DeviceRecord


def unite(database: Database, lines: Iterable[Line], signature: Signature, name: str) -> United:
    """Take all of another library or nothing.

    Raises
    ------
    InputError
        A line does not say what it must, or its content is not what its hash says.
    """
    with transaction(database.conn):
        union = _Union(database.conn, signature)
        for number, line in enumerate(lines, start=2):
            try:
                union.take(line)
            except (KeyError, TypeError, ValueError, AttributeError, OverflowError, sqlite3.InterfaceError) as error:
                problem = error.problem if isinstance(error, InputError) else f"{type(error).__name__}: {error}"
                raise InputError(
                    f"Line {number} of {name} cannot be taken: {problem}", "", "Export the other library again"
                ) from error
        union.finish()
    return United(new=union.new, known=union.known, conflicts=tuple(union.conflicts))


@dataclass(kw_only=True, slots=True)
class _Place:
    """A revision of the file as it is here; ``logged`` is the state its log here says so far."""

    revision_id: int
    key: str
    number: int
    state: str
    content: bytes
    evidence: bytes | None
    is_new: bool
    logged: str | None


@dataclass(frozen=True, kw_only=True, slots=True)
class _Held:
    """What this library has of a device."""

    device_id: int
    kind: str
    places: tuple[_Place, ...]

    def same(self, given: GivenRevision) -> _Place | None:
        """The revision with the same content, of the same number where there are several."""
        alike = [place for place in self.places if place.content == given.content_sha256]
        return next((place for place in alike if place.number == given.number), alike[0] if alike else None)


class _Union:
    """One import under way: which ids of the file are which here."""

    def __init__(self, connection: sqlite3.Connection, signature: Signature) -> None:
        self.new = self.known = 0
        self.conflicts: list[str] = []
        self._connection = connection
        self._signature = signature
        self._at = now()
        self._rows = WaitingRows(connection)
        self._parts = UnitedParts(connection, self._rows)
        self._chain = Chain(connection)
        self._places: dict[tuple[str, int], _Place] = {}
        self._refused: set[str] = set()
        self._told: dict[str, set[Any]] = {}
        self._changed: dict[int, None] = {}

    def take(self, line: Line) -> None:
        """Take one line; what it refers to was on an earlier one."""
        ((what, said),) = line.items()
        takers: dict[str, Callable[[Any], None]] = {
            "source": self._parts.take_source,
            "curve": self._parts.take_curve,
            "reading": self._parts.take_reading,
            "device": self._take_device,
            "log": self._take_entry,
        }
        takers[what](said)
        if self._rows.are_many:
            self._write()

    def finish(self) -> None:
        """Write what waits; a revision whose state here is not the one it came with says so in the log."""
        for place in self._places.values():
            if place.is_new and place.logged != place.state:
                self._enter(place, place.state, f"imported as {place.state}", None)
        self._write()
        self._parts.keep_sources()

    def _write(self) -> None:
        self._rows.write()
        refresh(self._connection, self._changed)
        self._changed.clear()

    def _take_device(self, said: Line) -> None:
        key, kind = said["key"], said["kind"]
        given = [revision_of(one, key, kind) for one in said["revisions"]]
        for one in given:
            self._check(one, f"{key}@{one.number}")
        held = self._held(key)
        if held and held.kind != kind:
            self.conflicts.append(f"{key} is a {held.kind} here and a {kind} there: nothing of it was taken")
            self._refused.add(key)
            return
        if held is None:
            held = _Held(device_id=self._rows.new_id("device"), kind=kind, places=())
            self._rows.add("device", [(held.device_id, key, kind)])
        self._take_revisions(held, given)

    def _check(self, given: GivenRevision, name: str) -> None:
        """Refuse a revision whose content is not what its hash says."""
        refuse_unsound(DeviceRecord(nameplate=given.nameplate))
        refuse_twice(name, [self._parts.curve(curve_id) for curve_id, _ in given.curves])
        said = [(self._parts.sha256(curve), self._parts.statement(reading)) for curve, reading in given.curves]
        if (
            revision_sha256(given.nameplate, said or [(b"", self._parts.statement(given.reading))])
            != given.content_sha256
        ):
            raise ValueError(f"the content of {name} is not what its hash says")

    def _held(self, key: str) -> _Held | None:
        rows = self._connection.execute(
            """
            SELECT device_id, kind, revision_id, number, state, content_sha256, evidence_sha256
            FROM device JOIN revision USING (device_id) LEFT JOIN reading USING (reading_id)
            WHERE device_key = ? ORDER BY number
            """,
            (key,),
        ).fetchall()
        if not rows:
            return None
        places = tuple(
            _Place(
                revision_id=revision_id,
                key=key,
                number=number,
                state=state,
                content=content,
                evidence=evidence,
                is_new=False,
                logged=state,
            )
            for _, _, revision_id, number, state, content, evidence in rows
        )
        return _Held(device_id=rows[0][0], kind=rows[0][1], places=places)

    def _take_revisions(self, held: _Held, given: list[GivenRevision]) -> None:
        there = {one.content_sha256 for one in given}
        differ = any(place.content not in there for place in held.places)
        taken = {place.number for place in held.places}
        for one in given:
            key = one.nameplate.key
            place = held.same(one)
            if place is not None:
                self.known += 1
                if place.state != one.state:
                    self.conflicts.append(
                        f"{key}@{place.number} is {place.state} here and {one.state} there: it stays {place.state}"
                    )
            else:
                place = self._add_revision(held.device_id, one, taken, differ)
            self._places[(key, one.number)] = place

    def _add_revision(self, device_id: int, given: GivenRevision, taken: set[int], differ: bool) -> _Place:
        """Where both libraries have gone on from a device by themselves, nobody here has reviewed what comes."""
        key = given.nameplate.key
        number = max(taken) + 1 if given.number in taken else given.number
        state = "draft" if differ and given.state in ("checked", "released") else given.state
        if number != given.number or state != given.state:
            self.conflicts.append(
                f"{key}@{given.number}, {given.state} there, is {key}@{number}, {state} here:"
                " both libraries have revisions the other has not"
            )
        taken.add(number)
        self.new += 1
        revision_id = self._rows.new_id("revision")
        reading_id, evidence = self._parts.reading(given.reading)
        signed = (given.created_at, given.author, given.reason, given.program_version)
        known_by = (revision_id, device_id, number, given.content_sha256, *signed, reading_id)
        self._rows.add("revision", [(*known_by, *plate_values(given.nameplate), state)])
        add_nameplate_lists(self._rows, revision_id, given.nameplate)
        for seq, (curve, reading) in enumerate(given.curves, start=1):
            row = (revision_id, seq, self._parts.curve_id(curve), self._parts.reading(reading)[0])
            self._rows.add("revision_curve", [row])
        self._changed[device_id] = None
        return _Place(
            revision_id=revision_id,
            key=key,
            number=number,
            state=state,
            content=given.content_sha256,
            evidence=evidence,
            is_new=True,
            logged=None,
        )

    def _take_entry(self, said: Line) -> None:
        entry = Entry(**said)
        if entry.device_key in self._refused:
            return
        place = self._places[(entry.device_key, entry.revision)]
        if not place.is_new and _identity(said) in self._told_here(entry.device_key):
            return
        self._enter(place, entry.state if place.is_new else place.state, self._signature.reason, json.dumps(said))

    def _told_here(self, key: str) -> set[Any]:
        if key not in self._told:
            self._told[key] = {_identity(asdict(entry)) for entry in entries(self._connection, key)}
        return self._told[key]

    def _enter(self, place: _Place, state: str, reason: str, origin: str | None) -> None:
        place.logged = state
        entry = self._chain.next(
            place.revision_id,
            at=self._at,
            name=self._signature.author,
            action="imported",
            device_key=place.key,
            revision=place.number,
            content=place.content.hex(),
            evidence=place.evidence and place.evidence.hex(),
            state=state,
            reason=reason,
            origin=origin,
        )
        self._rows.add("log", [entry])


def _identity(entry: Line) -> tuple[Any, ...]:
    """What an entry says, wherever it was imported from."""
    while entry["origin"]:
        entry = json.loads(entry["origin"])
    return tuple(entry[name] for name in ("at", "name", "action", "content", "state", "reason"))
