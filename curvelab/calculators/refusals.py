"""Why a device cannot answer, in words: outside its sheet, above its capacity, or not a device for the question."""

from collections.abc import Sequence

from curvelab.devices.bases import amperes
from curvelab.devices.device import Device
from curvelab.devices.meaning import TOTAL, meaning_of
from curvelab.records.answer import EdgeAnswer
from curvelab.records.curve import Curve, Edge
from curvelab.records.evaluation import left_end, right_end
from curvelab.units import written, written_current

NAMES = {"fast": "fast edge", "slow": "slow edge", "mean": "mean line"}
_UNITS = {"time": "s", "let_through": "A2s", "peak": "A"}


def not_protective(device: Device) -> str:
    """Why a device protects against nothing; empty where it does."""
    plate = device.nameplate
    if plate.kind == "switch":
        return f"'{device.key}' is a switch, not a protective device: it never trips"
    if not device.record.curves:
        return f"'{device.key}' has no curve in this revision"
    return ""


def residual_only(device: Device) -> str:
    """Why a device does not act on overcurrent; empty where it does."""
    if device.nameplate.kind != "rcd":
        return ""
    return f"'{device.key}' acts on residual current only: it does not see an overload or a line-to-neutral fault"


def no_total_time(device: Device, quantity: str = "time") -> str:
    """Why no line says when the current is off, or how much passes until then; empty where one does."""
    curves = [curve for curve in device.record.curves if curve.quantity == quantity]
    said = {meaning_of(curve, device.nameplate.kind) for curve in curves if curve.edge == "slow"}
    if said & set(TOTAL):
        return ""
    if not curves:
        return f"'{device.key}' has no {'time-current' if quantity == 'time' else 'let-through'} curve"
    if not said:
        return f"'{device.key}' has a mean line without tolerance: its slow edge is not known"
    if "relay_output" in said:
        return f"'{device.key}' is a relay: its output needs a breaker, whose time was not given"
    words = ", ".join(sorted(said)).replace("_", "-")
    return f"'{device.key}' has {words} lines only: they never stand for the time until the current is off"


def reason(device: Device, edge: Edge, answer: EdgeAnswer | None, quantity: str = "time") -> str:
    """Why an edge gives no number where it was asked; empty where it gives one."""
    status = None if answer is None else str(answer.status)
    if status in ("value", "at_least", "at_most", "never"):
        return ""
    if status == "not_seen":
        return residual_only(device) or f"'{device.key}' does not see this kind of current"
    if status == "above_breaking":
        return f"above the breaking capacity of '{device.key}' ({_capacities(device)})"
    lines = [curve for curve in device.record.curves if curve.quantity == quantity]
    drawn = [curve for curve in lines if curve.edge == edge]
    if not drawn:
        return not_protective(device) or f"'{device.key}' has no {NAMES[edge]}"
    return f"outside the sheet: the {NAMES[edge]} of '{device.key}' is drawn {_extent(device, drawn, quantity)}"


def _capacities(device: Device) -> str:
    return ", ".join(
        f"{entry.quantity} {written_current(entry.value_a, 'A')}"
        + (f" at {entry.voltage_v:g} V" if entry.voltage_v is not None else "")
        for entry in device.nameplate.breaking
    )


def _extent(device: Device, curves: Sequence[Curve], quantity: str) -> str:
    """From where to where in A lines are drawn; of several bases, those of the first."""
    base, unit = curves[0].base, _UNITS[quantity]
    alike = [curve for curve in curves if curve.base == base]
    one = amperes(device.nameplate, device.settings, base)
    first = min((left_end(curve) for curve in alike), key=lambda end: end.current)
    last = max((right_end(curve) for curve in alike), key=lambda end: end.current)
    start = f"{written_current(first.current * one, 'A')} ({written(first.value, unit)})"
    return f"from {start} to {written_current(last.current * one, 'A')} ({written(last.value, unit)})"
