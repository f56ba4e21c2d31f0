"""The limits of the standards as the page draws them: a place on the band's own axes, and which side is permitted."""

from collections.abc import Iterable
from typing import Any

from curvelab.devices.bases import amperes
from curvelab.errors import DeviceError
from curvelab.records.device import DeviceRecord
from curvelab.records.finding import Finding
from curvelab.units import BASES, written


def drawn_limits(devices: Iterable[DeviceRecord], findings: Iterable[Finding]) -> list[dict[str, Any]]:
    """Each finding that has a place on a time-current plot; currents in the base of the device's curves."""
    by_key = {record.nameplate.key: record for record in devices}
    drawn = (_drawn(by_key[each.device], each) for each in findings if each.device in by_key)
    return [each for each in drawn if each is not None]


def _drawn(record: DeviceRecord, finding: Finding) -> dict[str, Any] | None:
    # The limit of an energy at a time is one of the current there.
    of_current = finding.unit == "A2s" or finding.unit in BASES
    current, own_base = (finding.limit, finding.unit) if finding.unit in BASES else (finding.current, finding.base)
    time_s = finding.time_s if of_current else finding.limit
    curves = [curve for curve in record.curves if curve.quantity == "time"]
    if finding.permitted is None or current is None or own_base is None or time_s is None or not curves:
        return None
    base, at = curves[0].base, curves[0].at
    try:
        scale = (
            1.0 if own_base == base else amperes(record.nameplate, at, own_base) / amperes(record.nameplate, at, base)
        )
    except DeviceError:
        return None
    return {
        "device": finding.device,
        "text": finding.requirement,
        "multiple": written(current, own_base),
        "current": current * scale,
        "base": base,
        "time": time_s,
        "of": "current" if of_current else "time",
        "side": finding.permitted,
        "outcome": finding.outcome,
        "advisory": finding.advisory,
        "rule": finding.rule,
    }
