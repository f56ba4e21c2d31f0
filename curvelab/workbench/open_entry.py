"""One entry of the list of what is open: a sentence with a place, and the answers that settle it."""

import hashlib
import json
from dataclasses import dataclass
from typing import Any, Literal

Kind = Literal["axis", "gap", "edge", "crossing", "finding", "device", "other"]
Place = tuple[float, float]

AROUND = 60.0
"""Half the box about a single place, in the sheet's unit."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Answer:
    """One way to settle an entry: a change, and what it still asks of the person."""

    text: str
    change: dict[str, Any] | None = None
    asks: Literal["value", "reason", "place"] | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class OpenEntry:
    """One entry of the list.

    Parameters
    ----------
    code : str
        What kind of doubt it is; what it is accepted by.
    text : str
        One sentence in plain words.
    kind : str
    at, box : tuple or None
        Its place and surroundings on the sheet.
    curve : int or None
        The worksheet's entry of the line it is about.
    answers : tuple of Answer
    """

    code: str
    text: str
    kind: Kind
    at: Place | None = None
    box: tuple[float, float, float, float] | None = None
    curve: int | None = None
    answers: tuple[Answer, ...] = ()

    @property
    def id(self) -> str:
        """The same for the same entry, whatever else changes."""
        told = json.dumps([self.code, self.text, self.at])
        return hashlib.sha256(told.encode()).hexdigest()[:12]


def accepting(code: str, at: Place | None = None) -> Answer:
    """The answer that accepts a doubt as it is, with a reason and a name."""
    change: dict[str, Any] = {"kind": "accept", "code": code}
    if at is not None:
        change["at"] = list(at)
    return Answer(text="Accept it, with a reason", change=change, asks="reason")


def about(at: Place | None) -> tuple[float, float, float, float] | None:
    """The surroundings of a place."""
    return None if at is None else (at[0] - AROUND, at[1] - AROUND, at[0] + AROUND, at[1] + AROUND)
