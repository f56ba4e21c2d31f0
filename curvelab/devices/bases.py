"""Currents turned between bases: amperes, and multiples of rated and set currents."""

from collections.abc import Mapping
from types import MappingProxyType

from curvelab.devices.settings import OFF, Given, missing_settings
from curvelab.errors import DeviceError
from curvelab.records.device import Nameplate
from curvelab.units import BASES

PICK_UP_SETTING: Mapping[str, str] = MappingProxyType({"xIr": "ir", "xIsd": "isd", "xIi": "ii", "xIg": "ig"})
"""Base -> the setting it counts multiples of."""

SETTING_OF_ELEMENT: Mapping[str, str] = MappingProxyType(
    {"overload": "ir", "delayed": "isd", "instantaneous": "ii", "earth": "ig"}
)
"""Element -> the setting of its pick-up; set to ``off`` the element does not act."""


def checked_base(base: str) -> str:
    """The base, when currents can be counted in it.

    Raises
    ------
    DeviceError
        It is not known.
    """
    if base not in BASES:
        raise DeviceError(f"'{base}' is not a base of currents", f"Expected one of: {', '.join(BASES)}")
    return base


def amperes(plate: Nameplate, settings: Given, base: str) -> float:
    """Amperes of one unit of a base, for a device at its settings.

    Raises
    ------
    DeviceError
        The base is not known, or the rating or setting it needs is not.
    """
    return _amperes(plate, settings, base, ())


def _amperes(plate: Nameplate, settings: Given, base: str, above: tuple[str, ...]) -> float:
    if checked_base(base) == "A":
        return 1.0
    if base == "xIn":
        return _rating(plate, base, "rated_current_a", plate.rated_current_a)
    if base == "xIdn":
        return _rating(plate, base, "rated_residual_current_a", plate.rated_residual_current_a)
    name = PICK_UP_SETTING[base]
    setting = next((each for each in plate.settings if each.name == name), None)
    if setting is None:
        raise DeviceError(
            f"'{plate.key}' has no setting '{name}', which {base} needs",
            "",
            f"Describe it under settings: {name} = {{...}}",
        )
    if setting.base is None or setting.base in (base, *above):
        raise DeviceError(
            f"The setting '{name}' of '{plate.key}' does not say what it is counted in",
            "A base such as A, xIn or xIr",
            f"Give settings {name} a base",
        )
    value = settings.get(name)
    if value is None or isinstance(value, str):
        if value == OFF:
            raise DeviceError(f"'{plate.key}' has {name} off, {base} means nothing", "", "Ask in A")
        raise missing_settings(plate)
    return value * _amperes(plate, settings, setting.base, (base, *above))


def _rating(plate: Nameplate, base: str, field: str, value: float | None) -> float:
    if value is None:
        raise DeviceError(f"'{plate.key}' has no {field}, which {base} needs", "", f"Give {field}")
    return value
