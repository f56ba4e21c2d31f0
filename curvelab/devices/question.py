"""What a device can be asked beside the current: the path of the current, the meaning wanted, the conditions."""

from dataclasses import dataclass
from typing import Literal

from curvelab.errors import DeviceError
from curvelab.records.curve import MEANINGS, Conditions
from curvelab.records.device import Nameplate

Path = Literal["line_to_neutral", "residual"]
PATHS: tuple[Path, ...] = ("line_to_neutral", "residual")

RESIDUAL_ONLY = ("residual", "earth")
"""Elements that see a current only where it does not come back through the device."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Question:
    """How an answer is wanted.

    Parameters
    ----------
    path : str, optional
        ``line_to_neutral``: the current comes back through the device (overload, short circuit); ``residual``: it comes
        back through earth. Left open, an RCD and a current in multiples of the residual current are asked ``residual``.
    meaning : str, optional
        What is to end: with ``operating`` or ``clearing`` no pre-arcing or unlatching line answers.
    conditions : Conditions
        What the device is used at; None where the answer shall hold for all that its sheets say.
    """

    path: Path | None = None
    meaning: str | None = None
    conditions: Conditions = Conditions()

    def __post_init__(self) -> None:
        if self.path is not None and self.path not in PATHS:
            raise DeviceError(f"'{self.path}' is not a path of a current", f"Expected one of: {', '.join(PATHS)}")
        if self.meaning is not None and self.meaning not in MEANINGS:
            raise DeviceError(f"'{self.meaning}' is not a meaning", f"Expected one of: {', '.join(MEANINGS)}")


def path_of(question: Question, plate: Nameplate, base: str) -> Path:
    """The path of the current asked."""
    if question.path is not None:
        return question.path
    return "residual" if plate.kind == "rcd" or base == "xIdn" else "line_to_neutral"


def sees(element: str, path: Path) -> bool:
    """Whether an element sees a current on that path."""
    return path == "residual" or element not in RESIDUAL_ONLY
