"""The breaking capacity of a device: up to which prospective current its times hold."""

from curvelab.devices.question import Path, Question
from curvelab.records.device import Breaking, Nameplate

_SHORT_CIRCUIT = ("Icn", "Icu", "AIC", "I1")
_RESIDUAL = ("IDm",)


def breaking_capacity_a(plate: Nameplate, question: Question, path: Path) -> float | None:
    """The capacity in A at the voltage and supply asked; None where the nameplate does not say.

    Asked without a voltage, the least capacity of all stated is taken. A capacity stated for a voltage holds below it.
    """
    stated = [entry for entry in plate.breaking if entry.quantity in _SHORT_CIRCUIT]
    residual = [entry for entry in plate.breaking if entry.quantity in _RESIDUAL]
    entries = residual if path == "residual" and residual else stated
    holding = [entry.value_a for entry in entries if _holds(entry, question)]
    if not holding:
        return None
    return min(holding) if question.conditions.voltage_v is None else max(holding)


def _holds(entry: Breaking, question: Question) -> bool:
    asked = question.conditions
    supply_agrees = asked.supply is None or entry.supply is None or entry.supply == asked.supply
    voltage_agrees = asked.voltage_v is None or entry.voltage_v is None or entry.voltage_v >= asked.voltage_v
    return supply_agrees and voltage_agrees
