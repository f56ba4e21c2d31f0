"""Settings that multiply time: a curve drawn at one of them scales with it."""

from dataclasses import replace

from curvelab.records.curve import Curve

TIME_MULTIPLIERS = ("tms", "td")
"""The time multiplier setting of IEC 60255-151 and the time dial of IEEE C37.112 scale every element's time."""

LONG_TIME_DELAY = "tr"
"""The long-time delay scales the overload element alone (common practice of I2t long-time releases)."""


def scaled_by_setting(curve: Curve) -> Curve:
    """The curve with the time setting it scales with, where it is drawn at one."""
    if curve.quantity != "time":
        return curve
    names = (*TIME_MULTIPLIERS, LONG_TIME_DELAY) if curve.element == "overload" else TIME_MULTIPLIERS
    for name in names:
        if name in curve.at:
            return replace(curve, time_setting=name, time_setting_at=curve.at[name])
    return curve
