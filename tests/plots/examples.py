"""Devices drawn from formulas, invented."""

import numpy as np

from curvelab.records.curve import Conditions, Curve, Part, typed_part
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.records.finding import Finding
from curvelab.records.normal import along_axes


def part(current, value, sd):
    current, value = np.asarray(current, float), np.asarray(value, float)
    along = np.gradient(np.log(current)), np.gradient(np.log(value))
    normal = np.full(current.shape, sd)
    sd_current, sd_value = along_axes(normal, np.column_stack(along))
    return Part(current=current, value=value, sd_current=sd_current, sd_value=sd_value, sd_common=normal / 2)


def thermal(pick_up, seconds, magnetic, floor, end=100.0):
    """A thermal bend, a magnetic step and a floor, in multiples of rated current."""
    multiple = np.geomspace(pick_up * 1.001, magnetic, 80)
    time = seconds * np.log(multiple**2 / (multiple**2 - pick_up**2)) + 0.02
    keep = time <= 7200
    multiple, time = multiple[keep], time[keep]
    return np.r_[multiple, magnetic, end], np.r_[time, floor, floor * 0.8]


def mcb(key="riverside-b16", rating=16.0, band=(3.4, 4.6), sd=0.02):
    fast = part(*thermal(1.16, 28.0, band[0], 0.006), sd)
    slow = part(*thermal(1.40, 60.0, band[1], 0.012), sd)
    cold = Conditions(start="cold")
    edges = [("fast", fast), ("slow", slow)]
    curves = [
        Curve(element="whole", edge=e, meaning="clearing", base="xIn", parts=(p,), conditions=cold) for e, p in edges
    ]
    plate = Nameplate(key=key, kind="mcb", characteristic="B", rated_current_a=rating, standard="IEC 60898-1")
    return DeviceRecord(nameplate=plate, curves=tuple(curves))


def fuse(rating, gap=False):
    """A mean line, as a fuse family prints them."""
    current = np.geomspace(1.7 * rating, 60 * rating, 60)
    time = 400.0 / (current / rating - 1.5) ** 3.2 + 0.002 * (60 * rating / current) ** 2
    time = np.minimum.accumulate(time)
    parts = (typed_part(current, time),)
    if gap:
        parts = (typed_part(current[:20], time[:20]), typed_part(current[30:], time[30:]))
    curve = Curve(element="whole", edge="mean", meaning="pre_arcing", base="A", parts=parts)
    plate = Nameplate(key=f"moor-g{rating:g}", kind="fuse", characteristic="gG", rated_current_a=rating)
    return DeviceRecord(nameplate=plate, curves=(curve,))


def finding(current, limit, permitted, outcome="meets", unit="s", time_s=None):
    return Finding(
        device="riverside-b16",
        standard="IEC 60898-1",
        clause="table 7",
        requirement="",
        limit=limit,
        unit=unit,
        value=None,
        interval=None,
        outcome=outcome,
        advisory=False,
        source="",
        rule="",
        current=current,
        base="xIn",
        permitted=permitted,
        time_s=time_s,
    )


FINDINGS = (
    finding(1.13, 3600.0, "at_least"),
    finding(1.45, 3600.0, "at_most"),
    finding(2.55, 60.0, "at_most", "undecided"),
    finding(2.55, 1.0, "at_least"),
    finding(None, 3.0, "at_least", unit="xIn", time_s=0.1),
    finding(None, 5.0, "at_most", unit="xIn", time_s=0.1),
)
"""Multiples and times of a type B circuit-breaker, IEC 60898-1:2015 table 7; which edge meets them is invented."""
