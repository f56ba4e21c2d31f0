"""The energy a device lets through until the current is off, at currents: from its times, or its let-through sheet."""

from dataclasses import dataclass
from enum import IntEnum
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from curvelab.calculators.facts import rows_of
from curvelab.calculators.spans import Codes
from curvelab.devices.device import Device
from curvelab.records.answer import EdgeAnswer
from curvelab.records.arrays import Floats
from curvelab.records.curve import Conditions, Edge

Bools = NDArray[np.bool_]

VIRTUAL = Conditions(time_kind="virtual")


class Way(IntEnum):
    """How an energy is known, or why it is not; in a gap of a let-through line, by what bounds it."""

    TIMES = 0
    LET_THROUGH = 1
    GAP = 2
    TOO_LONG = 3
    TOO_SHORT = 4
    NOT_COVERED = 5
    ABOVE_BREAKING = 6


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Amounts:
    """Energies in A2s, or times in s, with their 95 % interval, arrays of shape (n,); NaN where not known."""

    value: Floats
    lower: Floats
    upper: Floats

    def where(self, chosen: Bools, other: "Amounts") -> "Amounts":
        """The other's where chosen, these elsewhere."""
        return Amounts(
            value=np.where(chosen, other.value, self.value),
            lower=np.where(chosen, other.lower, self.lower),
            upper=np.where(chosen, other.upper, self.upper),
        )


def adiabatic_span() -> tuple[float, float]:
    """Between which times in s energies follow from times: shorter ones from let-through sheets, longer ones not."""
    row = rows_of("selectivity", "adiabatic")[0]
    return row["from_s"], row["up_to_s"]


def cleared_energies(device: Device, current_a: Floats, breaker_time_s: float | None = None) -> tuple[Amounts, Codes]:
    """The largest energies until the current is off, and the `Way` each is known by.

    Parameters
    ----------
    current_a : array, shape (n,)
        Prospective currents in A.
    breaker_time_s : float, optional
        What a breaker adds to the output of a relay.
    """
    shortest, longest = adiabatic_span()
    meaning = "relay_output" if breaker_time_s else "clearing"
    slow = device.trip_time(current_a, path="line_to_neutral", meaning=meaning).slow
    times = _numbers(slow, ("value", "at_most"), current_a, shift=breaker_time_s or 0.0)
    drawn, bounded = drawn_energies(device, current_a, "slow", "clearing")
    way = np.full(current_a.shape, Way.NOT_COVERED, dtype=np.int8)
    way[times.value > longest] = Way.TOO_LONG
    way[times.value < shortest] = Way.TOO_SHORT
    told = ~np.isnan(drawn.value) & ~(times.value >= shortest)
    way[told] = np.where(bounded, Way.GAP, Way.LET_THROUGH)[told]
    way[(times.value >= shortest) & (times.value <= longest)] = Way.TIMES
    if slow is not None:
        way[np.asarray(slow.status) == "above_breaking"] = Way.ABOVE_BREAKING
    squared = current_a**2
    by_time = Amounts(value=times.value * squared, lower=times.lower * squared, upper=times.upper * squared)
    known = by_time.where((way == Way.LET_THROUGH) | (way == Way.GAP), drawn)
    unknown = way > Way.GAP
    nothing = np.full(current_a.shape, np.nan)
    return known.where(unknown, Amounts(value=nothing, lower=nothing, upper=nothing)), way


def drawn_energies(
    device: Device, current_a: Floats, edge: Literal["fast", "slow"], meaning: str
) -> tuple[Amounts, Bools]:
    """Energies of one edge that are drawn as such, on a let-through sheet or as virtual times; and which are bounds.

    Energies never fall with current: in a gap of a let-through line the slow edge lies below its next value, the fast
    edge above its last one.
    """
    sheet = _on_sheet(device, current_a, edge, meaning)
    if any(curve.conditions.time_kind == "virtual" for curve in device.record.curves):
        times = device.trip_time(current_a, path="line_to_neutral", meaning=meaning, conditions=VIRTUAL)
        virtual = _numbers(_edge(times, edge), ("value",), current_a)
        squared = current_a**2
        energies = Amounts(value=virtual.value * squared, lower=virtual.lower * squared, upper=virtual.upper * squared)
        sheet = sheet.where(np.isnan(sheet.value), energies)
    gap = _gap_bounds(device, current_a, edge, meaning)
    bounded = np.isnan(sheet.value) & ~np.isnan(gap.value)
    return sheet.where(bounded, gap), bounded


def _on_sheet(device: Device, current_a: Floats, edge: Edge, meaning: str) -> Amounts:
    return _numbers(_edge(device.let_through(current_a, meaning=meaning), edge), ("value",), current_a)


def _gap_bounds(device: Device, current_a: Floats, edge: Literal["fast", "slow"], meaning: str) -> Amounts:
    """The energy at the end of a gap on the side that bounds it; NaN outside gaps."""
    bends_a = device.bends_a("line_to_neutral", "let_through")
    if bends_a.size == 0:
        nothing = np.full(current_a.shape, np.nan)
        return Amounts(value=nothing, lower=nothing, upper=nothing)
    right = bends_a.searchsorted(current_a)
    inside = (right > 0) & (right < bends_a.size)
    before, after = bends_a[np.maximum(right - 1, 0)], bends_a[np.minimum(right, bends_a.size - 1)]
    ends = [_on_sheet(device, end, edge, meaning) for end in (before, after)]
    between = inside & ~np.isnan(ends[0].value) & ~np.isnan(ends[1].value)
    nothing = np.where(between, 0.0, np.nan)
    bound = ends[1] if edge == "slow" else ends[0]
    return Amounts(value=bound.value + nothing, lower=bound.lower + nothing, upper=bound.upper + nothing)


def _edge(answer: object, edge: Edge) -> EdgeAnswer | None:
    found: EdgeAnswer | None = getattr(answer, edge)
    return found


def _numbers(answer: EdgeAnswer | None, known: tuple[str, ...], asked: Floats, shift: float = 0.0) -> Amounts:
    """The numbers of an edge where its status is one of those known, NaN elsewhere."""
    if answer is None:
        nothing = np.full(asked.shape, np.nan)
        return Amounts(value=nothing, lower=nothing, upper=nothing)
    hidden = np.where(np.isin(np.asarray(answer.status), known), 0.0, np.nan)
    return Amounts(
        value=answer.value + hidden + shift, lower=answer.lower + hidden + shift, upper=answer.upper + hidden + shift
    )
