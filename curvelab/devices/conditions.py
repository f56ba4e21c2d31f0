"""Whether a curve drawn for some conditions answers for others: as it is, as a bound, or not."""

from typing import Literal

from curvelab.records.curve import Conditions, Curve
from curvelab.records.device import Nameplate

Fit = Literal["holds", "bounds", "no"]


def fit_of(curve: Curve, asked: Conditions, plate: Nameplate) -> Fit:
    """How a curve answers at the conditions asked.

    A device trips sooner hot than cold, so a cold curve bounds a hot device on the slow side and a hot curve a cold
    device on the fast side. Where a sheet does not say, it is taken as cold and for alternating current at the device's
    own frequency. What another ambient temperature does is told by `curvelab.devices.ambient`.
    """
    drawn = curve.conditions
    if drawn.time_kind == "virtual" and asked.time_kind != "virtual":
        return "no"
    frequency = drawn.frequency_hz or plate.frequency_hz
    same = (
        (asked.supply, drawn.supply or "ac"),
        (asked.voltage_v, drawn.voltage_v or asked.voltage_v),
        (asked.frequency_hz, frequency),
        (asked.poles_loaded, drawn.poles_loaded or asked.poles_loaded),
        (asked.time_kind, drawn.time_kind or "real"),
    )
    if any(wanted is not None and wanted != given for wanted, given in same):
        return "no"
    start = drawn.start or "cold"
    if asked.start is None or asked.start == start:
        return "holds"
    return "bounds" if curve.edge == ("slow" if start == "cold" else "fast") else "no"
