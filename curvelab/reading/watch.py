"""How long work tells how far it is: a face turns it into a progress bar, and may raise ``Cancelled`` from it."""

from collections.abc import Callable
from typing import TypeAlias

Watch: TypeAlias = Callable[[str, float], None]
"""Called with the stage's name and the fraction done, 0 to 1."""


def unwatched(stage: str, fraction: float) -> None:
    """Nobody looks."""
