"""Which elements a rule is for, and which it needs curves of: one that is not drawn may trip at any time, or never."""

from collections.abc import Mapping
from dataclasses import replace
from types import MappingProxyType

from curvelab.devices.device import Device
from curvelab.standards.rule import Rule

ELEMENT_OF_BASE: Mapping[str, str] = MappingProxyType(
    {"xIr": "overload", "xIsd": "delayed", "xIi": "instantaneous", "xIg": "earth"}
)
"""Base -> the element whose release a rule in multiples of its setting is for."""

_DRAWN_WHOLE = ("fuse", "relay")
"""Kinds whose curves show all there is, whatever their element is called."""


def of_element(rule: Rule, device: Device) -> Device:
    """The device with the curves of the release the rule is for; others may rightly trip before it."""
    element = ELEMENT_OF_BASE.get(rule.base)
    if element is None or device.nameplate.kind in _DRAWN_WHOLE:
        return device
    curves = tuple(curve for curve in device.record.curves if curve.element in (element, "whole"))
    return Device(replace(device.record, curves=curves), device.settings)


def undrawn_element(rule: Rule, device: Device) -> str | None:
    """The first element that the rule needs and no curve is given of; None where all are there.

    A curve of the whole device stands for all of its elements, but not for the residual one of an RCBO: its overcurrent
    curve is commonly drawn as a whole.
    """
    drawn = {curve.element for curve in device.record.curves if curve.quantity == "time"}
    kind = device.nameplate.kind
    if rule.asked.path == "residual" and kind != "rcd":
        return None if "residual" in drawn else "residual"
    if "whole" in drawn or kind in _DRAWN_WHOLE:
        return None
    if kind == "rcd":
        needed: tuple[str, ...] = ("residual",)
    elif kind in ("mcb", "rcbo") and rule.base == "xIn":
        needed = ("overload", "instantaneous")
    else:
        needed = (ELEMENT_OF_BASE.get(rule.base, "overload"),)
    return next((element for element in needed if element not in drawn), None)
