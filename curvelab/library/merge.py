"""Joins what a worksheet says of a device with what the library holds of it."""

from dataclasses import fields, replace

from curvelab.errors import DeviceError
from curvelab.library.load import HeldCurve
from curvelab.records.curve import Curve
from curvelab.records.device import Nameplate


def merged_nameplate(held: Nameplate, given: Nameplate) -> Nameplate:
    """What is given takes the place of what is held; what is not given carries forward.

    Raises
    ------
    DeviceError
        The key belongs to another kind of device.
    """
    refuse_other_kind(given, held.kind)
    said = {field.name: getattr(given, field.name) for field in fields(given)}
    return replace(held, **{name: value for name, value in said.items() if value not in (None, ())})


def carried_curves(held: tuple[HeldCurve, ...], given: tuple[Curve, ...]) -> tuple[HeldCurve, ...]:
    """The held curves that no given one replaces: another element, edge, quantity, conditions or settings."""
    replaced = {curve.identity for curve in given}
    return tuple(item for item in held if item.curve.identity not in replaced)


def refuse_other_kind(given: Nameplate, held_kind: str) -> None:
    """Refuse a nameplate of another kind than the key has in the library."""
    if given.kind != held_kind:
        raise DeviceError(
            f"The key '{given.key}' is already used by a device of kind {held_kind}, this one is of kind {given.kind}",
            "One key is one device",
            "Give this device another key",
        )
