"""A curve: one edge of one element of a device, as parts of points that are joined by straight lines in log-log."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from types import MappingProxyType
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from curvelab.records.arrays import Floats, freeze

EDGES = ("fast", "slow", "mean")
MEANINGS = ("pre_arcing", "operating", "unlatching", "relay_output", "clearing")
ELEMENTS = ("overload", "delayed", "instantaneous", "earth", "neutral", "override", "residual", "whole")

Edge = Literal["fast", "slow", "mean"]
Basis = Literal["sheet", "standard", "declared"]
NO_SETTINGS: Mapping[str, float] = MappingProxyType({})

COVERAGE_FACTOR = 1.959963984540054
"""Of a 95 % interval of a normal distribution (JCGM 100:2008, table G.1)."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Conditions:
    """What a curve is drawn for, where the sheet states it; None where it does not."""

    start: Literal["cold", "hot"] | None = None
    time_kind: Literal["real", "virtual"] | None = None
    supply: Literal["ac", "dc"] | None = None
    voltage_v: float | None = None
    frequency_hz: float | None = None
    ambient_c: float | None = None
    poles_loaded: int | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetKey:
    """Which plot of which page of which file."""

    sha256: str
    page: int = 1
    plot: int = 1
    file: str = ""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Part:
    """A stretch of a curve without a gap.

    Parameters
    ----------
    current : array, shape (n,)
        In the curve's base, never falling along the part; a repeated current is a vertical stretch.
    value : array, shape (n,)
        Time in s, let-through in A2s or peak in A; times never rise along the part.
    sd_current, sd_value : array, shape (n,)
        Relative standard uncertainties that state everything: of the current at that value and of the value at that
        current. NaN where the curve is horizontal (sd_current) or vertical (sd_value), or where nothing is known.
    sd_common : array, shape (n,)
        The part of the uncertainty along the curve's normal in log-log that all curves of the sheet share; NaN where
        nothing is known. The whole of it along the normal is 1 / sqrt(1 / sd_current^2 + 1 / sd_value^2).
    """

    current: Floats
    value: Floats
    sd_current: Floats
    sd_value: Floats
    sd_common: Floats

    def __post_init__(self) -> None:
        freeze(
            self,
            current=self.current,
            value=self.value,
            sd_current=self.sd_current,
            sd_value=self.sd_value,
            sd_common=self.sd_common,
        )


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Curve:
    """One edge of one element: what is stored and asked.

    ``at`` holds the settings the curve is drawn for. ``leaves_top`` says that the line leaves the plot through its top,
    so that to its left the time is at least the top time. Times scale as setting / ``time_setting_at`` where
    ``time_setting`` names one. ``source`` is where typed points come from; ``sheet`` the sheet of a traced curve.
    """

    element: str
    edge: Edge
    meaning: str | None
    quantity: Literal["time", "let_through", "peak"] = "time"
    base: str
    parts: tuple[Part, ...]
    conditions: Conditions = Conditions()
    at: Mapping[str, float] = field(default_factory=lambda: NO_SETTINGS)
    leaves_top: bool = False
    basis: Basis = "sheet"
    source: str = ""
    sheet: SheetKey | None = None
    time_setting: str | None = None
    time_setting_at: float | None = None

    @property
    def identity(self) -> tuple[object, ...]:
        """What a newer curve must share to take this one's place: element, edge, quantity, conditions, settings."""
        return (self.element, self.edge, self.quantity, self.conditions, tuple(sorted(self.at.items())))


def typed_part(current: ArrayLike, value: ArrayLike) -> Part:
    """A part of points typed from a table: no uncertainty is known of them."""
    unknown = np.full(np.shape(current), np.nan)
    return Part(
        current=np.asarray(current, dtype=np.float64),
        value=np.asarray(value, dtype=np.float64),
        sd_current=unknown,
        sd_value=unknown,
        sd_common=unknown,
    )
