"""Automatic disconnection in case of a fault: the current that surely trips in time, and the loop that lets it flow."""

from dataclasses import dataclass

from curvelab.calculators.cautions import Caution, cautions_of
from curvelab.calculators.circumstances import Circumstances, Fault, Reckoning, fault_of
from curvelab.calculators.disconnection_findings import cautions_on, findings_of, notes_of
from curvelab.calculators.estimate import Estimate
from curvelab.calculators.practices import Practice, RequiredTime, practice_named, required_time, touch_limit
from curvelab.calculators.tripping import residual_rating_a, time_at, tripping_current
from curvelab.devices.device import Device
from curvelab.records.finding import Finding


@dataclass(frozen=True, kw_only=True, slots=True)
class Disconnection:
    """Whether a device disconnects in time.

    ``trips`` is the current in A the practice reckons with, ``greatest_loop`` the greatest impedance in ohm as
    designed, ``greatest_measured_loop`` the greatest one to be measured cold; of a residual current device in a TT
    system both are that of the earth electrode. With a loop given, ``fault`` is the current that flows in it, ``time``
    what the slow edge says there, and the findings say whether that is enough.
    """

    device: str
    revision: int | None
    state: str | None
    asked: Circumstances
    required: RequiredTime
    practice: Practice
    reckoning: Reckoning
    trips: Estimate
    greatest_loop: Estimate
    greatest_measured_loop: Estimate
    fault: Fault | None
    time: Estimate | None
    findings: tuple[Finding, ...]
    notes: tuple[str, ...]
    cautions: tuple[Caution, ...]


def disconnection(device: Device, asked: Circumstances) -> Disconnection:
    """Whether a device disconnects in time, and the greatest loop impedance with which it does.

    Raises
    ------
    InputError
        No time is tabulated for the voltage, or the practice is not known.
    DeviceError
        An adjustable device without its settings.
    """
    practice, required = practice_named(asked.practice), _required(asked)
    by = reckoning(device, asked, practice)
    trips = tripping_current(device, required.time_s, practice, asked.breaker_time_s)
    greatest = trips.mapped(lambda current_a: by.voltage_factor * asked.voltage_v / current_a, "ohm")
    if is_by_touch(device, asked) and by.residual_a is not None:
        greatest = _smaller(greatest, touch_limit()[0] / by.residual_a)
    measured = greatest.mapped(lambda ohm: ohm * by.measured_factor, "ohm")
    fault = fault_of(asked, by)
    return Disconnection(
        device=device.key,
        revision=device.revision,
        state=device.state,
        asked=asked,
        required=required,
        practice=practice,
        reckoning=by,
        trips=trips,
        greatest_loop=greatest,
        greatest_measured_loop=measured,
        fault=fault,
        time=time_at(device, fault.current_a, asked.breaker_time_s) if fault else None,
        findings=tuple(findings_of(device, asked, required, trips, fault)) if fault else (),
        notes=tuple(notes_of(device, asked, practice, measured if asked.measured else greatest, required)),
        cautions=(*cautions_on(device, asked, practice), *cautions_of(device)),
    )


def is_by_touch(device: Device, asked: Circumstances) -> bool:
    """Whether the electrode's touch voltage is what counts: a device for residual current in a TT system."""
    return residual_rating_a(device) is not None and asked.system == "TT"


def reckoning(device: Device, asked: Circumstances, practice: Practice) -> Reckoning:
    """By the practice; an electrode in a TT system is no warm conductor, and the whole voltage lies on it."""
    residual_a = residual_rating_a(device)
    if is_by_touch(device, asked):
        return Reckoning(voltage_factor=1.0, measured_factor=1.0, residual_a=residual_a)
    return Reckoning(
        voltage_factor=practice.voltage_factor, measured_factor=practice.measured_factor, residual_a=residual_a
    )


def _required(asked: Circumstances) -> RequiredTime:
    if asked.required_s is not None:
        return RequiredTime(time_s=asked.required_s, origin=None)
    return required_time(asked.voltage_v, asked.system, asked.circuit)


def _smaller(found: Estimate, limit: float) -> Estimate:
    """The smaller of what the time and what the touch voltage allow."""
    if found.value is not None and found.value < limit:
        return found
    return Estimate(status="value", value=limit, interval=None, unit="ohm", basis="standard")
