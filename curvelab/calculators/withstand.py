"""Whether a conductor withstands what a device lets through, over a whole span of fault currents."""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from math import isfinite, isnan

import numpy as np

from curvelab.calculators.cautions import Caution, cautions_of
from curvelab.calculators.conductors import Conductor, checked_area, next_size_mm2
from curvelab.calculators.energy import Way, adiabatic_span, cleared_energies
from curvelab.calculators.estimate import Estimate
from curvelab.calculators.refusals import no_total_time, not_protective, reason, residual_only
from curvelab.calculators.spans import Codes, Span, places_of, spans_of
from curvelab.calculators.verdict import Requirement, verdict
from curvelab.devices.device import Device
from curvelab.errors import InputError
from curvelab.records.answer import Status
from curvelab.records.arrays import Floats, distinct
from curvelab.records.finding import Finding
from curvelab.units import written_current, written_let_through


@dataclass(frozen=True, kw_only=True, slots=True)
class Stress:
    """A span of fault currents and the largest energy let through in it.

    ``way`` says how it is known; the energy is None with a reason where it is not. ``worst_a`` is the current of the
    largest energy.
    """

    from_a: float
    to_a: float
    way: Way
    energy: Estimate
    worst_a: float | None


@dataclass(frozen=True, kw_only=True, slots=True)
class Withstand:
    """Whether a conductor withstands a device's let-through energy between two fault currents.

    ``energy`` is the largest of all spans, ``at_least`` where it is not known everywhere; so is ``least_area`` in mm2,
    and then there is no ``next_size_mm2``, the next standard size. ``withstands_a2s`` is k2S2 of the area given.
    """

    device: str
    revision: int | None
    state: str | None
    conductor: Conductor
    area_mm2: float | None
    withstands_a2s: float | None
    from_a: float
    to_a: float
    stresses: tuple[Stress, ...]
    energy: Estimate
    least_area: Estimate
    next_size_mm2: float | None
    findings: tuple[Finding, ...]
    cautions: tuple[Caution, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class Faults:
    """The fault currents in A a conductor has to withstand, least and greatest; and a breaker's time for a relay.

    Raises
    ------
    InputError
        They are not positive, or not in order.
    """

    least_a: float
    greatest_a: float
    breaker_time_s: float | None = None

    def __post_init__(self) -> None:
        numbers = (self.least_a, self.greatest_a)
        if not (all(isfinite(number) and number > 0 for number in numbers) and self.least_a <= self.greatest_a):
            raise InputError(
                f"Fault currents from {self.least_a:g} to {self.greatest_a:g} A cannot be",
                "The least and the greatest prospective current, both positive",
                "Give MIN and MAX in this order",
            )


def withstand(device: Device, conductor: Conductor, faults: Faults, area_mm2: float | None = None) -> Withstand:
    """Whether a conductor withstands what a device lets through between two fault currents.

    Energies follow from operating or clearing times between 0.1 s and 5 s, below that from the let-through sheet (or
    virtual times) alone; never from a pre-arcing line, and never beyond what is drawn.

    Raises
    ------
    InputError
        The cross-section is not positive.
    DeviceError
        An adjustable device without its settings.
    """
    area_mm2 = checked_area(area_mm2)
    stresses = tuple(_stresses(device, faults))
    energy = _largest(stresses)
    least_area = energy.mapped(conductor.least_mm2, "mm2")
    enough_mm2 = least_area.interval[1] if least_area.interval else least_area.value
    size_mm2 = None if enough_mm2 is None or least_area.status != "value" else next_size_mm2(enough_mm2)
    return Withstand(
        device=device.key,
        revision=device.revision,
        state=device.state,
        conductor=conductor,
        area_mm2=area_mm2,
        withstands_a2s=None if area_mm2 is None else conductor.withstands_a2s(area_mm2),
        from_a=faults.least_a,
        to_a=faults.greatest_a,
        stresses=stresses,
        energy=energy,
        least_area=least_area,
        next_size_mm2=size_mm2,
        findings=() if area_mm2 is None else tuple(_finding(device, conductor, area_mm2, each) for each in stresses),
        cautions=cautions_of(device),
    )


def _stresses(device: Device, faults: Faults) -> Iterator[Stress]:
    def way_at(current_a: Floats) -> Codes:
        return cleared_energies(device, current_a, faults.breaker_time_s)[1]

    if faults.least_a == faults.greatest_a:
        only = np.array([faults.least_a])
        spans: tuple[Span, ...] = (Span(from_a=only[0], to_a=only[0], code=int(way_at(only)[0])),)
        places = only
    else:
        bends = np.concatenate([device.bends_a("line_to_neutral"), device.bends_a("line_to_neutral", "let_through")])
        places = places_of(bends, faults.least_a, faults.greatest_a)
        spans = spans_of(way_at, places)
    for span in spans:
        yield _stress(device, faults, span, places)


def _stress(device: Device, faults: Faults, span: Span, places: Floats) -> Stress:
    """The largest energy of a span: between two bends it rises or falls throughout, so that the bends tell."""
    way = Way(span.code)
    inside = places[(places > span.from_a) & (places < span.to_a)]
    ends = np.array([span.from_a, span.to_a])
    asked = distinct(np.concatenate((ends, ends * [1 + 2e-8, 1 - 2e-8], inside)))
    energies, ways = cleared_energies(device, asked, faults.breaker_time_s)
    value = np.where(ways == way, energies.value, np.nan)
    if np.isnan(value).all():
        unknown = Estimate(status="not_covered", value=None, interval=None, unit="A2s", reason=_reason(device, way))
        return Stress(from_a=span.from_a, to_a=span.to_a, way=way, energy=unknown, worst_a=None)
    worst = int(np.nanargmax(value))
    lower, uppers = float(energies.lower[worst]), energies.upper[(ways == way) & ~np.isnan(energies.upper)]
    interval = None if isnan(lower) else (lower, float(uppers.max()))
    status: Status = "at_most" if way == Way.GAP else "value"
    energy = Estimate(status=status, value=float(value[worst]), interval=interval, unit="A2s")
    return Stress(from_a=span.from_a, to_a=span.to_a, way=way, energy=energy, worst_a=float(asked[worst]))


def _reason(device: Device, way: Way) -> str:
    shortest, longest = adiabatic_span()
    refusal = not_protective(device) or residual_only(device) or no_total_time(device)
    if refusal and no_total_time(device, "let_through"):
        return refusal
    return {
        Way.TOO_LONG: f"it takes longer than {longest:g} s: heat escapes, overload protection has to cover it",
        Way.TOO_SHORT: f"it is off in less than {shortest:g} s: only a let-through sheet tells the energy",
        Way.ABOVE_BREAKING: f"above the breaking capacity of '{device.key}'",
    }.get(way, reason(device, "slow", None, "time" if device.bends_a("line_to_neutral").size else "let_through"))


def _largest(stresses: tuple[Stress, ...]) -> Estimate:
    """The largest energy of all spans; ``at_least`` where one is not known."""
    known = [each.energy for each in stresses if each.energy.value is not None]
    if not known:
        return stresses[0].energy
    largest = max(known, key=lambda each: each.value or 0.0)
    uppers = [each.interval[1] for each in known if each.interval]
    if largest.interval:
        largest = replace(largest, interval=(largest.interval[0], max(uppers)))
    if len(known) == len(stresses):
        return largest
    missing = next(each.energy.reason for each in stresses if each.energy.value is None)
    return Estimate(
        status="at_least",
        value=largest.value,
        interval=largest.interval,
        unit="A2s",
        reason=f"not everywhere: {missing}",
    )


def _finding(device: Device, conductor: Conductor, area_mm2: float, stress: Stress) -> Finding:
    limit = conductor.withstands_a2s(area_mm2)
    span = f"{written_current(stress.from_a, 'A')} to {written_current(stress.to_a, 'A')}"
    words = f"{span}: lets through at most k2S2 = {written_let_through(limit, 4)}"
    return verdict(
        Requirement(
            device=device.key,
            rule="withstand",
            words=words,
            limit=limit,
            permitted="at_most",
            origin=conductor.factor(area_mm2).origin,
        ),
        stress.energy,
        f"Largest at {written_current(stress.worst_a, 'A')}." if stress.worst_a is not None else "",
    )
