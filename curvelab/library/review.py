"""Review of a revision: draft, checked, released, withdrawn; who did what and why stands in the log."""

import sqlite3
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from curvelab.errors import InputError
from curvelab.library.connect import transaction
from curvelab.library.current import refresh
from curvelab.library.load import missing_device
from curvelab.library.log import Chain, Entry, entries, now
from curvelab.library.rows import WaitingRows
from curvelab.library.stored import Reviewed, Signature

STATES = ("draft", "checked", "released", "withdrawn")

MOVES: Mapping[str, tuple[str, ...]] = MappingProxyType(
    {
        "draft": ("checked", "withdrawn"),
        "checked": ("released", "draft", "withdrawn"),
        "released": ("withdrawn",),
        "withdrawn": (),
    }
)
"""State -> the states it may change to."""

_NEED_REASON = ("draft", "withdrawn")


@dataclass(frozen=True, kw_only=True, slots=True)
class _Subject:
    device_id: int
    revision_id: int
    key: str
    number: int
    state: str
    author: str
    content: str
    evidence: str | None


def review(
    connection: sqlite3.Connection, key: str, number: int | None, state: str | None, signature: Signature
) -> Reviewed:
    """Change the state of a revision, or with ``state`` None add a note to it.

    Without a number the newest revision that is not withdrawn is meant.

    Raises
    ------
    InputError
        The state cannot follow, a name or reason is missing, or the person may not release.
    NotFoundError
        No such device or revision.
    """
    with transaction(connection):
        subject = _subject(connection, key, number)
        _refuse(subject, state, signature)
        if state == "released":
            _refuse_alone(subject, signature.author, list(entries(connection, key)))
        _enter(connection, subject, state, signature)
    return Reviewed(key=key, revision=subject.number, before=subject.state, state=state or subject.state)


def _subject(connection: sqlite3.Connection, key: str, number: int | None) -> _Subject:
    chosen = "state <> 'withdrawn'" if number is None else "number = ?"
    row = connection.execute(
        f"""
        SELECT device_id, revision_id, device_key, number, state, author, content_sha256, evidence_sha256
        FROM revision JOIN device USING (device_id) LEFT JOIN reading USING (reading_id)
        WHERE device_key = ? AND {chosen} ORDER BY number DESC LIMIT 1
        """,
        (key,) if number is None else (key, number),
    ).fetchone()
    if row is None:
        raise missing_device(connection, key, number)
    device_id, revision_id, found_key, found, state, author, content, evidence = row
    return _Subject(
        device_id=device_id,
        revision_id=revision_id,
        key=found_key,
        number=found,
        state=state,
        author=author,
        content=content.hex(),
        evidence=evidence and evidence.hex(),
    )


def _refuse(subject: _Subject, state: str | None, signature: Signature) -> None:
    name = f"{subject.key}@{subject.number}"
    if not signature.author.strip():
        raise InputError(f"A review of {name} needs a name", "", "Say who reviews it")
    if state is None and not signature.reason.strip():
        raise InputError(f"A note to {name} is empty", "", "Say what is to be noted, or give a state")
    if state is None:
        return
    if state not in MOVES[subject.state]:
        possible = " or ".join(MOVES[subject.state]) or "nothing: store a new revision"
        raise InputError(
            f"{name} is {subject.state} and cannot become {state}", f"It can become {possible}", "Give another state"
        )
    if state in _NEED_REASON and not signature.reason.strip():
        raise InputError(f"{name} cannot become {state} without a reason", "", "Say why")


def _refuse_alone(subject: _Subject, name: str, log: list[Entry]) -> None:
    """A release needs a second person: another than the author or, where that is not known, than who checked it."""
    checked_by = [entry.name for entry in log if entry.revision == subject.number and entry.state == "checked"]
    first = subject.author if subject.author.strip() else checked_by[-1]
    if _same_person(first, name):
        did = "stored" if subject.author.strip() else "checked"
        raise InputError(
            f"{name} {did} {subject.key}@{subject.number} and cannot release it too",
            "A release needs a second person",
            "Let another person release it",
        )


def _same_person(one: str, other: str) -> bool:
    return " ".join(one.split()).casefold() == " ".join(other.split()).casefold()


def _enter(connection: sqlite3.Connection, subject: _Subject, state: str | None, signature: Signature) -> None:
    rows = WaitingRows(connection)
    entry = Chain(connection).next(
        subject.revision_id,
        at=now(),
        name=signature.author,
        action="noted" if state is None else "reviewed",
        device_key=subject.key,
        revision=subject.number,
        content=subject.content,
        evidence=subject.evidence,
        state=state or subject.state,
        reason=signature.reason,
    )
    rows.add("log", [entry])
    rows.write()
    if state is not None:
        connection.execute("UPDATE revision SET state = ? WHERE revision_id = ?", (state, subject.revision_id))
        refresh(connection, [subject.device_id])
