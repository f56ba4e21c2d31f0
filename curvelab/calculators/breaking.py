"""Breaking capacity at a voltage against the prospective current, alone or with a device that backs it up."""

from collections.abc import Iterator
from dataclasses import dataclass
from math import isfinite
from typing import Literal

from curvelab.calculators.cautions import Caution, cautions_of
from curvelab.calculators.estimate import Estimate, estimate
from curvelab.calculators.facts import Origin
from curvelab.calculators.refusals import no_total_time, reason
from curvelab.calculators.verdict import Requirement, verdict
from curvelab.devices.breaking import breaking_capacity_a
from curvelab.devices.device import Device, Limiting
from curvelab.devices.question import Question
from curvelab.errors import InputError
from curvelab.records.curve import Conditions
from curvelab.records.finding import Finding
from curvelab.units import written_current

_CONDITIONAL = ("Inc", "IDc", "Iq")
"""Rated conditional short-circuit currents: they hold with the back-up device the maker names."""

_CAPACITY = Origin(
    clause="IEC 60364-4-43, 434.5.1", source="The nameplate, against the prospective current", confidence="published"
)
_ENERGY = Origin(
    clause="IEC 60364-4-43, 434.5.1",
    source="Common practice: what a device lets through at its own capacity it withstands",
    confidence="practice",
)
_TABLE_ALONE = "only the maker's coordination table tells"
_TABLE = "The maker's coordination table decides."


@dataclass(frozen=True, kw_only=True, slots=True)
class ShortCircuit:
    """The prospective current in A at the device, and the voltage in V it has to be broken at.

    Raises
    ------
    InputError
        A number is not positive.
    """

    prospective_a: float
    voltage_v: float
    supply: Literal["ac", "dc"] | None = None

    def __post_init__(self) -> None:
        for name in ("prospective_a", "voltage_v"):
            value = getattr(self, name)
            if not (isfinite(value) and value > 0):
                raise InputError(f"{name} = {value:g} cannot be", "A positive number")


@dataclass(frozen=True, kw_only=True, slots=True)
class BreakingAnswer:
    """Whether a device breaks a short circuit; ``capacity`` is its own in A at the voltage."""

    device: str
    revision: int | None
    state: str | None
    back_up: str | None
    asked: ShortCircuit
    capacity: Estimate
    back_up_capacity: Estimate | None
    findings: tuple[Finding, ...]
    cautions: tuple[Caution, ...]


def breaking(device: Device, asked: ShortCircuit, back_up: Device | None = None) -> BreakingAnswer:
    """Whether a device breaks a short circuit, alone or with the device upstream of it that backs it up.

    Raises
    ------
    DeviceError
        An adjustable device without its settings.
    """
    capacity = capacity_at(device, asked)
    return BreakingAnswer(
        device=device.key,
        revision=device.revision,
        state=device.state,
        back_up=back_up.key if back_up else None,
        asked=asked,
        capacity=capacity,
        back_up_capacity=capacity_at(back_up, asked) if back_up else None,
        findings=tuple(_findings(device, asked, back_up, capacity)),
        cautions=cautions_of(device, *([back_up] if back_up else [])),
    )


def capacity_at(device: Device, asked: ShortCircuit) -> Estimate:
    """The breaking capacity in A at the voltage, from the nameplate."""
    conditions = Conditions(voltage_v=asked.voltage_v, supply=asked.supply)
    capacity_a = breaking_capacity_a(device.nameplate, Question(conditions=conditions), "line_to_neutral")
    if device.nameplate.kind == "switch":
        words, capacity_a = f"'{device.key}' is a switch, not a protective device: it breaks no short circuit", None
    else:
        words = f"the nameplate of '{device.key}' states no breaking capacity at {asked.voltage_v:g} V"
    return Estimate(
        status="not_covered" if capacity_a is None else "value",
        value=capacity_a,
        interval=None,
        unit="A",
        basis="declared",
        reason=words if capacity_a is None else "",
    )


def _findings(device: Device, asked: ShortCircuit, back_up: Device | None, capacity: Estimate) -> Iterator[Finding]:
    prospective = f"{written_current(asked.prospective_a, 'A', 4)} at {asked.voltage_v:g} V"
    alone = _enough(device, f"breaks {prospective} alone", asked, advisory=back_up is not None)
    yield verdict(alone, capacity)
    if back_up is None or (capacity.value is not None and capacity.value >= asked.prospective_a):
        return
    yield verdict(_enough(back_up, f"backs up: breaks {prospective}", asked), capacity_at(back_up, asked))
    conditional = _conditional(device, asked)
    if conditional is not None:
        words = f"conditional short-circuit current with its back-up is at least {prospective}"
        yield verdict(_enough(device, words, asked), conditional, "It holds with the back-up device the maker names.")
        return
    yield _coordinated(device, back_up, asked, capacity, "let_through")
    if device.limiting("peak") and back_up.limiting("peak"):
        yield _coordinated(device, back_up, asked, capacity, "peak")


def _enough(device: Device, words: str, asked: ShortCircuit, *, advisory: bool = False) -> Requirement:
    return Requirement(
        device=device.key,
        rule="breaking-capacity",
        words=words,
        limit=asked.prospective_a,
        permitted="at_least",
        origin=_CAPACITY,
        advisory=advisory,
    )


def _conditional(device: Device, asked: ShortCircuit) -> Estimate | None:
    holding = [
        entry.value_a
        for entry in device.nameplate.breaking
        if entry.quantity in _CONDITIONAL and (entry.voltage_v is None or entry.voltage_v >= asked.voltage_v)
    ]
    if not holding:
        return None
    return Estimate(status="value", value=max(holding), interval=None, unit="A", basis="declared")


def _coordinated(
    device: Device, back_up: Device, asked: ShortCircuit, capacity: Estimate, quantity: Limiting
) -> Finding:
    """What the back-up lets through at the prospective current against what the device does at its own capacity."""
    unit, what = ("A2s", "energy") if quantity == "let_through" else ("A", "peak current")
    passes = _passing(back_up, asked.prospective_a, quantity, unit)
    own = None if capacity.value is None else _passing(device, capacity.value, quantity, unit)
    if own is None or own.value is None:
        silent = own.reason if own else capacity.reason
        together = Estimate(
            status="not_covered", value=None, interval=None, unit="A", reason=f"{silent}; {_TABLE_ALONE}"
        )
        words = f"breaks {written_current(asked.prospective_a, 'A', 4)} together with '{back_up.key}'"
        return verdict(_enough(device, words, asked), together)
    required = Requirement(
        device=device.key,
        rule=quantity,
        words=f"{what} '{back_up.key}' lets through is at most what '{device.key}' lets through at its own capacity",
        limit=own.value,
        permitted="at_most",
        origin=_ENERGY,
    )
    return verdict(required, passes, _TABLE)


def _passing(device: Device, current_a: float, quantity: Limiting, unit: str) -> Estimate:
    slow = device.let_through(current_a, quantity=quantity, meaning="clearing").slow
    return estimate(slow, unit, no_total_time(device, quantity) or reason(device, "slow", slow, quantity))
