"""Answers of a device: per edge a status, a value and its 95 % interval."""

from dataclasses import dataclass
from typing import Any, Literal

from numpy.typing import NDArray

from curvelab.records.arrays import Floats

Status = Literal["value", "at_least", "at_most", "never", "not_covered", "not_seen", "above_breaking"]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class EdgeAnswer:
    """One edge's answer to each thing asked; numbers in, numbers out; arrays in, arrays out.

    Parameters
    ----------
    status : str, or array of str
    value : float or array
        NaN where the status gives no number.
    lower, upper : float or array
        The 95 % interval; NaN where the uncertainty is not known.
    basis : str
        ``sheet``, ``standard`` or ``declared``.
    meaning : str, or None
        What ends at that time, such as ``pre_arcing`` or ``clearing``.
    """

    status: str | NDArray[Any]
    value: float | Floats
    lower: float | Floats
    upper: float | Floats
    basis: str
    meaning: str | None = None


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class TripTimes:
    """Times in s at currents: an edge is None where the device has no such line."""

    current: float | Floats
    base: str
    fast: EdgeAnswer | None
    slow: EdgeAnswer | None
    mean: EdgeAnswer | None


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class TripCurrents:
    """Currents for times in s.

    ``trips`` is the least current that surely trips by the time, ``holds`` the greatest that surely does not trip
    before it; None where the device has no such edge.
    """

    time_s: float | Floats
    base: str
    trips: EdgeAnswer | None
    holds: EdgeAnswer | None
    mean: EdgeAnswer | None


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class LetThrough:
    """Let-through energies in A2s, or peak currents in A, at currents: an edge is None where there is no such line."""

    quantity: Literal["let_through", "peak"]
    current: float | Floats
    base: str
    fast: EdgeAnswer | None
    slow: EdgeAnswer | None
    mean: EdgeAnswer | None


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class LetThroughCurrents:
    """The greatest current up to which each line stays at or below a let-through energy in A2s, or a peak in A."""

    quantity: Literal["let_through", "peak"]
    value: float | Floats
    base: str
    fast: EdgeAnswer | None
    slow: EdgeAnswer | None
    mean: EdgeAnswer | None
