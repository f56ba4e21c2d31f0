"""What ends at a curve's time, and which meaning answers which question. Pre-arcing never stands in for operating."""

from collections.abc import Collection

from curvelab.records.curve import Curve

TOTAL = ("operating", "clearing")
"""The current is off: what disconnection, withstand and the downstream side of discrimination need."""

_EARLIEST_FIRST = ("pre_arcing", "unlatching", "relay_output", "operating", "clearing")

_UNSAID = {"fuse": "pre_arcing", "relay": "relay_output"}
"""Taken where a sheet says nothing: of a fuse and a relay the weaker meaning, of breakers their total clearing time."""


def meaning_of(curve: Curve, kind: str) -> str:
    """The meaning of a curve of a device of that kind."""
    return curve.meaning or _UNSAID.get(kind, "clearing")


def answering(meanings: Collection[str], edge: str, asked: str | None) -> str | None:
    """The meaning that answers for an edge, or None where no line has the meaning asked.

    Left open, the fast edge takes what happens first (a fuse melts), the slow edge and a mean line what ends last.
    """
    if asked in TOTAL:
        wanted: tuple[str, ...] = TOTAL
    elif asked is not None:
        wanted = (asked,)
    else:
        wanted = _EARLIEST_FIRST if edge == "fast" else _EARLIEST_FIRST[::-1]
    return next((meaning for meaning in wanted if meaning in meanings), None)
