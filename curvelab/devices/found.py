"""Answers of one edge under way: arrays with a status code each, before they are shown as words."""

from dataclasses import dataclass, replace
from typing import Any, get_args

import numpy as np
from numpy.typing import NDArray

from curvelab.records.answer import EdgeAnswer, Status
from curvelab.records.arrays import Floats

STATUSES: tuple[Status, ...] = get_args(Status)
VALUE, AT_LEAST, AT_MOST, NEVER, NOT_COVERED, NOT_SEEN, ABOVE_BREAKING = range(len(STATUSES))
_WORDS = np.array(STATUSES)

Codes = NDArray[np.int8]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Found:
    """Values with their 95 % interval and a status code each, arrays of shape (n,); NaN where there is no number."""

    code: Codes
    value: Floats
    lower: Floats
    upper: Floats

    @property
    def all_values(self) -> bool:
        """Whether every answer is a plain value."""
        return not self.code.any()

    def scaled(self, factor: float) -> "Found":
        """Numbers multiplied: a time multiplier, or a current turned to another base."""
        if factor == 1.0:
            return self
        return replace(self, value=self.value * factor, lower=self.lower * factor, upper=self.upper * factor)

    def where(self, chosen: NDArray[np.bool_], other: "Found") -> "Found":
        """The other's answers where chosen, these elsewhere."""
        return Found(
            code=np.where(chosen, other.code, self.code).astype(np.int8),
            value=np.where(chosen, other.value, self.value),
            lower=np.where(chosen, other.lower, self.lower),
            upper=np.where(chosen, other.upper, self.upper),
        )


def without_number(code: int, size: int) -> Found:
    """The same status without a number for everything asked."""
    nothing = np.full(size, np.nan)
    return Found(code=np.full(size, code, dtype=np.int8), value=nothing, lower=nothing, upper=nothing)


def plain(value: Floats, lower: Floats, upper: Floats) -> Found:
    """Values where there is a number, ``not_covered`` elsewhere."""
    missing = np.isnan(value)
    code = np.where(missing, np.int8(NOT_COVERED), np.int8(VALUE)) if missing.any() else np.zeros(value.size, np.int8)
    return Found(code=code, value=value, lower=lower, upper=upper)


def shown(found: Found, basis: str, meaning: str | None, *, shape: tuple[int, ...]) -> EdgeAnswer:
    """The answers as they are given out: numbers for a number asked (shape ``()``), arrays for an array."""
    if shape == ():
        return EdgeAnswer(
            status=STATUSES[int(found.code[0])],
            value=float(found.value[0]),
            lower=float(found.lower[0]),
            upper=float(found.upper[0]),
            basis=basis,
            meaning=meaning,
        )
    words: NDArray[Any] = np.broadcast_to(_WORDS[VALUE], shape) if found.all_values else _WORDS[found.code]
    return EdgeAnswer(
        status=words.reshape(shape),
        value=found.value.reshape(shape),
        lower=found.lower.reshape(shape),
        upper=found.upper.reshape(shape),
        basis=basis,
        meaning=meaning,
    )
