"""What a given fault loop is judged by, and what a reader should know of the answer."""

from collections.abc import Iterator

from curvelab.calculators.cautions import Caution, least_breaking_current_a
from curvelab.calculators.circumstances import Circumstances, Fault
from curvelab.calculators.estimate import Estimate
from curvelab.calculators.facts import Origin
from curvelab.calculators.practices import Practice, RequiredTime, touch_limit
from curvelab.calculators.tripping import overcurrent_alone, residual_rating_a, sure_current
from curvelab.calculators.verdict import Requirement, verdict
from curvelab.devices.breaking import breaking_capacity_a
from curvelab.devices.device import Device
from curvelab.devices.question import Question
from curvelab.records.finding import Finding
from curvelab.units import written, written_current, written_time

_GIVEN = Origin(clause="required time, as given", source="Given with the question", confidence="published")
_BREAKING = Origin(
    clause="IEC 60364-4-43, 434.5.1", source="The nameplate, against the current of the fault", confidence="published"
)


def findings_of(
    device: Device, asked: Circumstances, required: RequiredTime, trips: Estimate, fault: Fault
) -> Iterator[Finding]:
    """Whether the fault current surely trips in time, the touch voltage, and whether the device can break it."""
    words = f"disconnects within {written_time(required.time_s)} at {fault.words}"
    yield verdict(
        Requirement(
            device=device.key,
            rule="disconnects",
            words=words,
            limit=fault.current_a,
            permitted="at_most",
            origin=required.origin or _GIVEN,
        ),
        trips,
    )
    rated_a = residual_rating_a(device)
    if rated_a is not None and asked.system == "TT" and asked.loop_ohm is not None:
        yield _touch(device, asked.loop_ohm, rated_a)
    yield from _breaks(device, fault)


def _touch(device: Device, electrode_ohm: float, residual_a: float) -> Finding:
    limit_v, origin = touch_limit()
    return verdict(
        Requirement(
            device=device.key,
            rule="touch-voltage",
            words=f"{electrode_ohm:g} ohm x {written_current(residual_a, 'A')} is at most {limit_v:g} V",
            limit=limit_v,
            permitted="at_most",
            origin=origin,
        ),
        Estimate(status="value", value=electrode_ohm * residual_a, interval=None, unit="V", basis="standard"),
    )


def _breaks(device: Device, fault: Fault) -> Iterator[Finding]:
    """Only where the fault current lies outside what the device can break."""
    flows = Estimate(status="value", value=fault.current_a, interval=None, unit="A", basis="standard")
    capacity_a = breaking_capacity_a(device.nameplate, Question(), "residual")
    if capacity_a is not None and fault.current_a > capacity_a:
        words = f"breaks {fault.words}"
        required = Requirement(
            device=device.key, rule="breaks", words=words, limit=capacity_a, permitted="at_most", origin=_BREAKING
        )
        yield verdict(required, flows)
    least_a = least_breaking_current_a(device)
    if least_a is not None and fault.current_a < least_a:
        words = f"{fault.words} is at least the minimum breaking current of {written_current(least_a, 'A')}"
        required = Requirement(
            device=device.key, rule="least-breaking", words=words, limit=least_a, permitted="at_least", origin=_BREAKING
        )
        yield verdict(required, flows)


def notes_of(
    device: Device, asked: Circumstances, practice: Practice, limit: Estimate, required: RequiredTime
) -> Iterator[str]:
    """Sentences on rounding, on what the practice counts on, and on what else the device does."""
    yield from _on_rounding(asked, practice, limit)
    if practice.current == "mean" and residual_rating_a(device) is None:
        sure = sure_current(device, required.time_s, asked.breaker_time_s)
        found = (
            f"surely trips from {sure.written()}"
            if sure.is_known
            else "does not say from which current it surely trips"
        )
        yield f"{practice.title} counts on the mean tripping current; the slow edge {found}."
    if residual_rating_a(device) is None:
        return
    if device.nameplate.kind == "rcd":
        yield "It acts on residual current only: a fault between line and neutral needs an overcurrent device."
    else:
        alone = overcurrent_alone(device, required.time_s)
        yield f"By its overcurrent elements alone it surely trips from {alone.written()}."


def _on_rounding(asked: Circumstances, practice: Practice, limit: Estimate) -> Iterator[str]:
    if asked.loop_ohm is None or limit.value is None:
        return
    printed = practice.printed(limit.value)
    if limit.value < asked.loop_ohm <= printed:
        yield (
            f"Tables print {printed:.{practice.decimals}f} ohm: the greatest loop is {written(limit.value, 'ohm', 5)}, "
            "which they round up."
        )


def cautions_on(device: Device, asked: Circumstances, practice: Practice) -> Iterator[Caution]:
    """Cautions that belong to disconnection alone."""
    if asked.measured and practice.measured_origin.confidence != "published":
        text = (
            f"Measured loops count {practice.measured_factor:.3g} of the greatest one "
            f"({practice.measured_origin.clause}; {practice.measured_origin.confidence}): correct for the temperature."
        )
        yield Caution(code="measured-loop", text=text)
    if asked.system == "TT" and residual_rating_a(device) is None:
        text = "In a TT system an overcurrent device may be relied on only where a low loop impedance is sure to last."
        yield Caution(code="tt-overcurrent", text=text)
