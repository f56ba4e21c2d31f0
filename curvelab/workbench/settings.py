"""Settings in an address, each as in ``ir=0.8`` or ``ii=off``; of several devices as in ``KEY.ir=0.8``."""

from collections.abc import Iterable

from curvelab.errors import InputError

Settings = dict[str, float | str]


def settings_of(texts: Iterable[str]) -> Settings:
    """Settings as in ``ir=0.8`` or ``ii=off``.

    Raises
    ------
    InputError
        One is not of that form.
    """
    settings: Settings = {}
    for text in texts:
        name, _, value = text.partition("=")
        try:
            settings[name] = value if value == "off" else float(value)
        except ValueError:
            raise InputError(f"'{text}' is no setting", "NAME=VALUE, such as ir=0.8 or ii=off") from None
    return settings


def settings_by_key(keys: Iterable[str], texts: Iterable[str]) -> dict[str, Settings]:
    """The settings of each device of a question about several.

    Raises
    ------
    InputError
        One names none of them, or is not of the form.
    """
    given: dict[str, Settings] = {key: {} for key in keys}
    for text in texts:
        name, _, value = text.partition("=")
        key, dot, setting = name.rpartition(".")
        if not dot or key not in given:
            raise InputError(f"'{text}' names no device of this comparison", "KEY.NAME=VALUE")
        given[key] |= settings_of([f"{setting}={value}"])
    return given
