"""A rule at one device's settings: the current and the time it is tested at."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace

from curvelab.devices.bases import PICK_UP_SETTING
from curvelab.devices.device import Device
from curvelab.devices.settings import OFF, is_possible
from curvelab.records.curve import Curve
from curvelab.records.device import Nameplate, Setting
from curvelab.standards.rule import Rule

_BREAKERS = ("mcb", "mccb", "acb", "rcbo")


@dataclass(frozen=True, kw_only=True, slots=True)
class Point:
    """Where a device is tested for a rule: ``current`` in ``base``, and the limit of its time there."""

    rule: Rule
    current: float
    base: str
    limit_s: float

    @property
    def is_hold(self) -> bool:
        """Whether the device has to hold, not to trip."""
        return self.rule.requirement == "hold"


def point_of(rule: Rule, device: Device) -> Point | None:
    """The rule's point for a device; None where the device has no such setting, or it is off."""
    base = _base(rule.base, device)
    factor = _time_factor(rule, device)
    if base is None or factor is None:
        return None
    return Point(rule=rule, current=rule.current, base=base, limit_s=rule.limit_s * factor)


def at_other_end(point: Point) -> Point:
    """The point at the least current the standard may mean."""
    return replace(point, current=point.rule.current_from)


def _base(base: str, device: Device) -> str | None:
    """The base to ask in. A breaker whose overload release cannot be set is set to its rated current."""
    name = PICK_UP_SETTING.get(base)
    if name is None:
        return base
    if device.settings.get(name) == OFF:
        return None
    drawn = any(curve.base == base for curve in device.record.curves)
    if drawn or any(setting.name == name for setting in device.nameplate.settings):
        return base
    return "xIn" if name == "ir" and device.nameplate.kind in _BREAKERS else None


def _time_factor(rule: Rule, device: Device) -> float | None:
    if not rule.times_settings:
        return 1.0
    values = (device.settings.get(name) for name in rule.times_settings)
    return next((float(value) for value in values if value is not None and value != OFF), None)


def at_drawn_settings(device: Device) -> tuple[Device, ...]:
    """The device as it can be checked: at its settings, else at each combination its curves are drawn for.

    A setting no curve is drawn for stands at the upper end of its range.
    """
    if device.is_set:
        return (device,)
    declared = {setting.name: setting for setting in device.nameplate.settings}
    drawn = [_possible_settings(curve, declared) for curve in device.record.curves if curve.quantity == "time"]
    usual = {name: value for name, setting in declared.items() if (value := _widest(setting)) is not None}
    for settings in reversed(drawn):
        usual |= settings
    combinations = dict.fromkeys(tuple(sorted({**usual, **settings}.items())) for settings in drawn)
    return tuple(device.at(**dict(settings)) for settings in combinations)


def _possible_settings(curve: Curve, declared: Mapping[str, Setting]) -> dict[str, float]:
    """What a curve is drawn for, of the settings the device has and can take."""
    at = curve.at.items()
    return {name: value for name, value in at if name in declared and is_possible(declared[name], value)}


def _widest(setting: Setting) -> float | None:
    return max(setting.steps, default=None) if setting.steps else setting.to_value


def written_settings(device: Device) -> str:
    """``ir = 0.8, tr = 8``; empty where nothing is set."""
    return ", ".join(_written(device.nameplate, dict(device.settings)))


def _written(plate: Nameplate, settings: dict[str, float | str]) -> Iterator[str]:
    for setting in plate.settings:
        value = settings.get(setting.name)
        if value is not None:
            yield f"{setting.name} = {value if isinstance(value, str) else f'{value:g}'}"
