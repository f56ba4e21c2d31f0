"""The marks a page is made of, in page points from the top left corner, y down: what every renderer draws alike."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Stroke:
    """A polyline (n, 2) with round joins and butt ends."""

    points: NDArray[np.float64]
    width_pt: float
    colour: str
    dash_pt: tuple[float, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Fill:
    """A filled polygon (n, 2)."""

    points: NDArray[np.float64]
    colour: str


@dataclass(frozen=True, kw_only=True, slots=True)
class Words:
    """One line of text from its baseline start, middle or end; `rotation` in degrees, anticlockwise."""

    text: str
    at_pt: tuple[float, float]
    size_pt: float
    font: str
    bold: bool = False
    anchor: str = "start"
    rotation: float = 0.0
    colour: str = "#000000"


Ink = Stroke | Fill | Words


def rectangle(left: float, top: float, right: float, bottom: float) -> NDArray[np.float64]:
    """The closed outline of a box, (5, 2)."""
    return np.array([[left, top], [right, top], [right, bottom], [left, bottom], [left, top]], dtype=float)
