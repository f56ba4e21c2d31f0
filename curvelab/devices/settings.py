"""The settings of an adjustable device: which it has, and whether those given are possible."""

import math
from collections.abc import Mapping
from types import MappingProxyType

from curvelab.errors import DeviceError
from curvelab.records.device import Nameplate, Setting

OFF = "off"

Given = Mapping[str, float | str]
"""Settings by name: a number, or ``off``."""

_SAME = 1e-9


def written_range(setting: Setting) -> str:
    """A setting with its range as one reads it: ``ir 0.4 to 1 xIn``, ``tr 2, 4, 8 (at 6 Ir)``, ``ii 2 or off``."""
    if setting.steps:
        numbers = ", ".join(f"{step:g}" for step in setting.steps)
    elif setting.from_value is not None and setting.to_value is not None:
        numbers = f"{setting.from_value:g} to {setting.to_value:g}"
    else:
        numbers = "any value"
    unit = f" {setting.base}" if setting.base else ""
    where = f" (at {setting.at})" if setting.at else ""
    return f"{setting.name} {numbers}{unit}{where}" + (" or off" if setting.can_be_off else "")


def written_ranges(plate: Nameplate) -> str:
    """All settings of a device with their ranges."""
    return "; ".join(written_range(setting) for setting in plate.settings)


def checked_settings(plate: Nameplate, given: Given) -> Given:
    """The settings given, when the device has each of them and it lies in its range.

    Raises
    ------
    DeviceError
        Naming the setting, the value, and what is possible.
    """
    if given and not plate.settings:
        raise DeviceError(
            f"'{plate.key}' has no settings, '{next(iter(given))}' was given", "", "Ask it without settings"
        )
    known = {setting.name: setting for setting in plate.settings}
    for name, value in given.items():
        if name not in known:
            raise DeviceError(f"'{plate.key}' has no setting '{name}'", f"Its settings: {written_ranges(plate)}")
        if not is_possible(known[name], value):
            raise DeviceError(
                f"'{plate.key}' cannot be set to {name} = {value}", f"Expected {written_range(known[name])}"
            )
    return MappingProxyType({name: value if value == OFF else float(value) for name, value in given.items()})


def is_possible(setting: Setting, value: float | str) -> bool:
    """Whether a setting can take a value."""
    if isinstance(value, str):
        return value == OFF and setting.can_be_off
    if isinstance(value, bool) or not math.isfinite(value) or value <= 0:
        return False
    if setting.steps:
        return any(math.isclose(value, step, rel_tol=_SAME) for step in setting.steps)
    low = -math.inf if setting.from_value is None else setting.from_value
    high = math.inf if setting.to_value is None else setting.to_value
    return low * (1 - _SAME) <= value <= high * (1 + _SAME)


def missing_settings(plate: Nameplate) -> DeviceError:
    """The error of asking an adjustable device without the settings the answer depends on."""
    example = plate.settings[0].name if plate.settings else "ir"
    return DeviceError(
        f"'{plate.key}' is adjustable and was asked without its settings",
        f"Its settings: {written_ranges(plate)}",
        f"Give them, such as {example}=...",
    )
