"""Whether a nameplate can be: kinds, keys, ratings and settings, and words the program does not know."""

import math
import re
from collections.abc import Iterator

from curvelab.errors import DeviceError
from curvelab.records.device import KINDS, Nameplate, Setting
from curvelab.records.warning import ReadingWarning
from curvelab.units import BASES

_KEY = re.compile(r"[A-Za-z0-9_-]{1,64}")

_POSITIVE = ("rated_current_a", "rated_residual_current_a", "rated_voltage_v", "poles", "frequency_hz")

_CHARACTERISTICS = {
    "mcb": ("B", "C", "D", "K", "Z"),
    "rcbo": ("B", "C", "D", "K", "Z"),
    "fuse": ("gG", "gM", "gR", "gS", "gU", "gL", "aM", "aR", "gD", "gN"),
    "relay": (
        *(
            "IEC inverse",
            "IEC very inverse",
            "IEC extremely inverse",
            "IEC long-time inverse",
            "IEC short-time inverse",
        ),
        *("IEEE moderately inverse", "IEEE very inverse", "IEEE extremely inverse", "definite time"),
        *("class 5", "class 10A", "class 10", "class 20", "class 30"),
    ),
}
"""Kind -> the characteristics the program knows; other kinds carry none that a check depends on."""

_STANDARDS = (
    *("60898", "61009", "61008", "60947-2", "60947-3", "60947-4-1", "60269", "60282", "60255", "62423", "62606"),
    *("C37.112", "C37.41", "UL 489", "UL 248", "BS 88", "BS 1361", "BS 1362", "BS 3036"),
)


def checked_nameplate(plate: Nameplate) -> Nameplate:
    """The nameplate, when everything on it can be.

    Raises
    ------
    DeviceError
        Naming the device, the field and the value.
    """
    if not _KEY.fullmatch(plate.key):
        raise DeviceError(f"'{plate.key}' is not a device key", "1 to 64 of letters, digits, '-' and '_'")
    if plate.kind not in KINDS:
        raise DeviceError(f"'{plate.key}' is of kind '{plate.kind}'", f"Known kinds: {', '.join(KINDS)}")
    for field in _POSITIVE:
        value = getattr(plate, field)
        if value is not None and not (math.isfinite(value) and value > 0):
            raise DeviceError(f"'{plate.key}' has {field} = {value:g}", "A positive number")
    for entry in plate.breaking:
        if not (math.isfinite(entry.value_a) and entry.value_a > 0):
            raise DeviceError(f"'{plate.key}' has {entry.quantity} = {entry.value_a:g} A", "A positive number")
    for step in plate.derating:
        if not (math.isfinite(step.factor) and step.factor > 0):
            raise DeviceError(f"'{plate.key}' has a derating factor of {step.factor:g}", "A positive number")
    for setting in plate.settings:
        _check_setting(plate, setting)
    return plate


def _check_setting(plate: Nameplate, setting: Setting) -> None:
    place = f"Setting '{setting.name}' of '{plate.key}'"
    numbers = [number for number in (setting.from_value, setting.to_value, *setting.steps) if number is not None]
    if not numbers:
        raise DeviceError(f"{place} has no range", "from and to, or steps", "Write { from = 0.4, to = 1.0 }")
    if any(not math.isfinite(number) or number <= 0 for number in numbers):
        raise DeviceError(f"{place} reaches {min(numbers):g}", "Positive numbers")
    if setting.from_value is not None and setting.to_value is not None and setting.from_value > setting.to_value:
        raise DeviceError(f"{place} goes from {setting.from_value:g} down to {setting.to_value:g}", "from at most to")
    if setting.base is not None and setting.base not in BASES:
        raise DeviceError(f"{place} is counted in '{setting.base}'", f"Expected one of: {', '.join(BASES)}")


def doubts_about(plate: Nameplate) -> tuple[ReadingWarning, ...]:
    """Warnings of words that are kept as written, though no check knows them."""
    return tuple(_doubts(plate))


def _doubts(plate: Nameplate) -> Iterator[ReadingWarning]:
    known = _CHARACTERISTICS.get(plate.kind)
    if plate.characteristic is not None and known is not None and plate.characteristic not in known:
        yield ReadingWarning(
            code="unknown-characteristic",
            text=f"'{plate.key}': the characteristic '{plate.characteristic}' is kept as written, no check knows it;"
            f" known for kind {plate.kind}: {', '.join(known)}.",
        )
    if plate.standard is not None and not any(name in plate.standard for name in _STANDARDS):
        yield ReadingWarning(
            code="unknown-standard",
            text=f"'{plate.key}': the standard '{plate.standard}' is kept as written, no check knows it.",
        )
