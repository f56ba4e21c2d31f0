"""Devices made by hand for the tests: a breaker, a residual-current device and an adjustable breaker."""

import numpy as np

from curvelab.devices.device import Device
from curvelab.records.curve import Conditions, Curve, Part, typed_part
from curvelab.records.device import Breaking, DeviceRecord, Nameplate, Setting

B_SLOW = [(1.45, 3000), (2.55, 50), (5, 8), (5, 0.06), (50, 0.02)]
B_FAST = [(1.13, 7000), (2.55, 6), (3, 3), (3, 0.012), (50, 0.005)]


def line(edge, points, *, base="xIn", element="whole", meaning="clearing", sd=None, **fields):
    current, value = (np.array(column, dtype=float) for column in zip(*points, strict=True))
    part = typed_part(current, value)
    if sd is not None:
        spread = np.full(current.size, sd)
        part = Part(current=current, value=value, sd_current=spread, sd_value=spread, sd_common=np.zeros(current.size))
    return Curve(element=element, edge=edge, meaning=meaning, base=base, parts=(part,), **fields)


def device(*curves, key="made", kind="mcb", **plate):
    return Device(DeviceRecord(nameplate=Nameplate(key=key, kind=kind, **plate), curves=curves))


def b32(sd=None, **fields):
    breaking = fields.pop("breaking", (Breaking(quantity="Icn", value_a=6000.0, voltage_v=230.0),))
    curves = line("fast", B_FAST, sd=sd, **fields), line("slow", B_SLOW, sd=sd, **fields)
    return device(
        *curves,
        key="riverside-b32",
        characteristic="B",
        standard="IEC 60898-1",
        rated_current_a=32.0,
        breaking=breaking,
    )


SETTINGS = (
    Setting(name="ir", from_value=0.4, to_value=1.0, base="xIn"),
    Setting(name="tr", steps=(2.0, 4.0, 8.0), at="6 Ir"),
    Setting(name="ii", from_value=2.0, to_value=10.0, base="xIn", can_be_off=True),
)


def moulded_case(**fields):
    """Long-time element in multiples of Ir with its delay as multiplier, and an instantaneous one at Ii."""
    long_time = {"base": "xIr", "element": "overload", "leaves_top": True}
    long_time |= {"time_setting": "tr", "time_setting_at": 8.0, "at": {"tr": 8.0}}
    at_once = {"base": "xIi", "element": "instantaneous"}
    return device(
        line("fast", [(1.05, 3000), (6, 6.4), (12, 1.6)], **long_time),
        line("slow", [(1.2, 3000), (6, 8.0), (12, 2.0)], **long_time),
        line("fast", [(0.8, 5), (0.8, 0.01), (40, 0.01)], **at_once),
        line("slow", [(1.2, 5), (1.2, 0.04), (40, 0.04)], **at_once),
        key="quay-250",
        kind="mccb",
        rated_current_a=250.0,
        settings=SETTINGS,
        breaking=(Breaking(quantity="Icu", value_a=36_000.0),),
        **fields,
    )


def rcd(**fields):
    return device(
        line("fast", [(0.5, 0.3), (0.5, 0.02), (50, 0.01)], base="xIdn", element="residual"),
        line("slow", [(1, 0.3), (2, 0.15), (5, 0.04), (50, 0.04)], base="xIdn", element="residual"),
        key="harbour-rcd30",
        kind="rcd",
        rated_current_a=40.0,
        rated_residual_current_a=0.03,
        **fields,
    )


HOT, COLD = Conditions(start="hot"), Conditions(start="cold")
