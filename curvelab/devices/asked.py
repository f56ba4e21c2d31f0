"""What is asked of a device checked, and its answers in the shape of what was asked."""

import numpy as np
from numpy.typing import ArrayLike

from curvelab.devices.found import Found, shown
from curvelab.devices.lines import Lines
from curvelab.errors import DeviceError
from curvelab.records.answer import EdgeAnswer
from curvelab.records.arrays import Floats
from curvelab.records.curve import MEANINGS


def shown_edge(found: Found, elements: tuple[Lines, ...], shape: tuple[int, ...]) -> EdgeAnswer:
    """An edge's answer in the shape of what was asked, with the weakest basis and meaning of its lines."""
    bases = {line.curve.basis for each in elements for line in each.lines}
    basis = next((name for name in ("declared", "sheet", "standard") if name in bases), "sheet")
    said = {each.meaning for each in elements}
    meaning = next((name for name in MEANINGS if name in said), None)
    return shown(found, basis, meaning, shape=shape)


def positive(numbers: ArrayLike, what: str) -> Floats:
    """Numbers asked as an array of their own shape.

    Raises
    ------
    DeviceError
        One is not a positive finite number.
    """
    try:
        asked = np.asarray(numbers, dtype=np.float64)
    except (TypeError, ValueError):
        raise DeviceError(
            f"A {what} of {numbers!r} is not a number", "A positive number, or an array of them"
        ) from None
    wrong = ~(np.isfinite(asked) & (asked > 0))
    if wrong.any():
        raise DeviceError(
            f"A {what} of {asked[wrong].flat[0]:g} cannot be asked", f"Each {what} must be positive and finite"
        )
    return asked


def as_given(asked: Floats) -> float | Floats:
    """A number where one was asked, else the array."""
    return float(asked) if asked.ndim == 0 else asked
