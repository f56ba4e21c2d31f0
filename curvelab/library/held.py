"""What the library holds of a device before something new is stored of it."""

import sqlite3
from dataclasses import dataclass

from curvelab.library.load import HeldCurve, read_held_curves, read_nameplate
from curvelab.records.device import Nameplate


@dataclass(frozen=True, kw_only=True, slots=True)
class HeldRevision:
    """What a new revision builds on."""

    number: int
    sha256: bytes
    nameplate: Nameplate
    curves: tuple[HeldCurve, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class HeldDevice:
    """A device in the library; ``newest`` is its newest revision that is not withdrawn, None where all are."""

    device_id: int
    kind: str
    last_number: int
    newest: HeldRevision | None


def read_held_device(connection: sqlite3.Connection, key: str) -> HeldDevice | None:
    """The device with this key, None where there is none."""
    device = connection.execute("SELECT device_id, kind FROM device WHERE device_key = ?", (key,)).fetchone()
    if device is None:
        return None
    device_id, kind = device
    (last_number,) = connection.execute("SELECT max(number) FROM revision WHERE device_id = ?", (device_id,)).fetchone()
    return HeldDevice(device_id=device_id, kind=kind, last_number=last_number, newest=_newest(connection, device_id))


def _newest(connection: sqlite3.Connection, device_id: int) -> HeldRevision | None:
    row = connection.execute(
        """
        SELECT revision_id, number, content_sha256 FROM revision
        WHERE device_id = ? AND state <> 'withdrawn' ORDER BY number DESC LIMIT 1
        """,
        (device_id,),
    ).fetchone()
    if row is None:
        return None
    revision_id, number, sha256 = row
    return HeldRevision(
        number=number,
        sha256=sha256,
        nameplate=read_nameplate(connection, revision_id),
        curves=read_held_curves(connection, revision_id),
    )
