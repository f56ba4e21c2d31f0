"""Which elements of a device a rule needs curves of: one that is not drawn may trip at any time, or never."""

from collections.abc import Mapping
from types import MappingProxyType

from curvelab.devices.device import Device
from curvelab.standards.rule import Rule

ELEMENT_OF_BASE: Mapping[str, str] = MappingProxyType(
    {"xIr": "overload", "xIsd": "delayed", "xIi": "instantaneous", "xIg": "earth", "xIdn": "residual"}
)
"""Base -> the element whose multiples it counts."""


def undrawn_element(rule: Rule, device: Device) -> str | None:
    """The first element that the rule needs and no curve is given of; None where all are there.

    A curve of the whole device stands for all of them; fuses and relays are taken as drawn whole.
    """
    drawn = {curve.element for curve in device.record.curves if curve.quantity == "time"}
    kind = device.nameplate.kind
    if "whole" in drawn or kind in ("fuse", "relay"):
        return None
    if rule.asked.path == "residual":
        needed: tuple[str, ...] = ("residual",)
    elif kind in ("mcb", "rcbo") and rule.base == "xIn":
        needed = ("overload", "instantaneous")
    else:
        needed = (ELEMENT_OF_BASE.get(rule.base, "overload"),)
    return next((element for element in needed if element not in drawn), None)
