"""The limits of the standards as the page draws them: a place on the band's own axes, and which side is permitted."""

from collections.abc import Iterable
from typing import Any

from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.records.finding import Finding
from curvelab.units import written
from curvelab.workbench.amperes import amperes_per_unit

RESIDUAL = "xIdn"


def drawn_limits(devices: Iterable[DeviceRecord], findings: Iterable[Finding]) -> list[dict[str, Any]]:
    """Each finding that has a place on a time-current plot; currents in the base of the device's curves."""
    by_key = {record.nameplate.key: record for record in devices}
    drawn = (_drawn(by_key[each.device], each) for each in findings if each.device in by_key)
    return [each for each in drawn if each is not None]


def _drawn(record: DeviceRecord, finding: Finding) -> dict[str, Any] | None:
    place = finding.on_plot
    curves = [curve for curve in record.curves if curve.quantity == "time"]
    if place is None or not curves:
        return None
    # A device may have lines in several bases: its limits go with those counted in their own.
    drawn = next((curve for curve in curves if curve.base == place.base), curves[0])
    scale = _units_per_unit(record.nameplate, drawn, place.base)
    if scale is None:
        return None
    return {
        "device": finding.device,
        "text": finding.requirement,
        "multiple": written(place.current, place.base),
        "current": place.current * scale,
        "base": drawn.base,
        "time": place.time_s,
        "of": "current" if place.of_current else "time",
        "side": finding.permitted,
        "outcome": finding.outcome,
        "advisory": finding.advisory,
        "rule": finding.rule,
    }


def _units_per_unit(plate: Nameplate, drawn: Curve, base: str) -> float | None:
    """Units of a curve's base in one unit of another; a residual current is no load current."""
    if base == drawn.base:
        return 1.0
    own, of_curve = (amperes_per_unit(plate, drawn.at, each) for each in (base, drawn.base))
    return None if RESIDUAL in (base, drawn.base) or own is None or of_curve is None else own / of_curve
