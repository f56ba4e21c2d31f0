"""What can be done to a draft in one step: a correction of the reading, the worksheet as text, undo and redo."""

from dataclasses import dataclass
from typing import ClassVar, TypeAlias

from curvelab.reading.corrections import Correction


@dataclass(frozen=True, kw_only=True, slots=True)
class WriteWorksheet:
    """The whole worksheet, as text."""

    kind: ClassVar[str] = "worksheet"
    text: str


@dataclass(frozen=True, kw_only=True, slots=True)
class Undo:
    """Take the last step back."""

    kind: ClassVar[str] = "undo"


@dataclass(frozen=True, kw_only=True, slots=True)
class Redo:
    """Make the step again that was taken back."""

    kind: ClassVar[str] = "redo"


Change: TypeAlias = Correction | WriteWorksheet | Undo | Redo
