"""Enters revisions into the log that were stored before there was one."""

import sqlite3

from curvelab.library.log import Chain
from curvelab.library.rows import WaitingRows


def enter_unlogged(connection: sqlite3.Connection) -> None:
    """One entry for each revision without any, in the order they were stored, with the state they have."""
    rows = connection.execute(
        """
        SELECT revision_id, created_at, author, device_key, number, content_sha256, state, reason
        FROM revision JOIN device USING (device_id)
        WHERE revision_id NOT IN (SELECT revision_id FROM log) ORDER BY revision_id
        """
    ).fetchall()
    chain = Chain(connection)
    entries = [
        chain.next(
            revision_id,
            at=at,
            name=name,
            action="stored",
            device_key=key,
            revision=number,
            content=content.hex(),
            evidence=None,
            state=state,
            reason=reason,
        )
        for revision_id, at, name, key, number, content, state, reason in rows
    ]
    waiting = WaitingRows(connection)
    waiting.add("log", entries)
    waiting.write()
