"""Stated tolerances about a mean line turned into a fast and a slow edge."""

from dataclasses import replace

import numpy as np

from curvelab.errors import DeviceError
from curvelab.records.arrays import Floats
from curvelab.records.curve import Curve, Edge, Part
from curvelab.records.device import Tolerance

_NO_SHIFT = (0.0, 0.0)
_POWER = {"time": 0, "let_through": 2, "peak": 1}
"""A device that acts at another current as the mean one does at its own has all its currents scaled: its time stays,
its peak scales with the current, its energy with the square of it."""

_STEPS = 16
"""A shift in seconds bends a straight line of a log-log plot: each is cut into this many."""


def checked_tolerance(tolerance: Tolerance, place: str) -> Tolerance:
    """The tolerance, when each of its pairs goes from below to above and leaves currents and times positive.

    Raises
    ------
    DeviceError
        Naming the pair and its place.
    """
    pairs = (("tolerance_current", tolerance.current), ("tolerance_time", tolerance.time))
    for name, pair in (*pairs, ("tolerance_time_s", tolerance.time_s)):
        if pair is not None and not pair[0] <= 0 <= pair[1]:
            raise DeviceError(
                f"{place}: {name} = [{pair[0]:g}, {pair[1]:g}] does not lie about the mean line",
                "The first number is 0 or negative, the second 0 or positive",
                "Write for instance [-0.10, 0.10]",
            )
    for name, pair in pairs:
        if pair is not None and pair[0] <= -1:
            raise DeviceError(f"{place}: {name} = {pair[0]:g} takes away everything", "More than -1, as -0.10 is -10 %")
    return tolerance


def edges_of_mean(mean: Curve, tolerance: Tolerance) -> tuple[Curve, ...]:
    """The fast and slow edge of a mean line at its stated limits, basis ``declared``; none without limits.

    The fast edge shifts down in current and time, the slow edge up; where several limits are stated, both hold at once.
    On a let-through sheet a limit in current scales the energy by its square, a limit in time by itself; what a limit
    in time does to a peak current nobody can say, so that such a line stays without edges.

    Raises
    ------
    DeviceError
        The tolerance is not one about a mean line, or takes a time to zero.
    """
    checked_tolerance(tolerance, f"Curve '{mean.element}'")
    of_time = tolerance.time is not None or tolerance.time_s is not None
    if (tolerance.current is None and not of_time) or (of_time and mean.quantity == "peak"):
        return ()
    return _shifted(mean, tolerance, "fast", 0), _shifted(mean, tolerance, "slow", 1)


def _shifted(mean: Curve, tolerance: Tolerance, edge: Edge, side: int) -> Curve:
    in_current = 1 + (tolerance.current or _NO_SHIFT)[side]
    in_time = 1 + (tolerance.time or _NO_SHIFT)[side]
    in_seconds = (tolerance.time_s or _NO_SHIFT)[side]
    power = _POWER[mean.quantity]
    in_value = in_time * in_current**power
    parts = tuple(_shifted_part(part, in_current, in_value, in_seconds, power) for part in mean.parts)
    return replace(mean, edge=edge, parts=parts, basis="declared")


def _shifted_part(part: Part, in_current: float, in_value: float, in_seconds: float, power: int) -> Part:
    if in_seconds:
        part = _cut(part)
    relative = part.value * in_value
    value = relative + in_seconds * (part.current * in_current) ** power
    if (value <= 0).any():
        raise DeviceError(
            f"tolerance_time_s = {in_seconds:g} takes a time of {relative.min():g} s to zero or below",
            "Every time must stay positive",
            "State the tolerance for the part of the curve it holds for",
        )
    # Relative to a longer time the same error is smaller.
    return Part(
        current=part.current * in_current,
        value=value,
        sd_current=part.sd_current,
        sd_value=part.sd_value * relative / value,
        sd_common=part.sd_common,
    )


def _cut(part: Part) -> Part:
    """The part with each straight line of log-log cut into equal pieces."""
    places = np.arange(part.current.size, dtype=np.float64)
    fine = np.linspace(0, places[-1], _STEPS * (places.size - 1) + 1)

    def between(numbers: Floats) -> Floats:
        return np.asarray(np.exp(np.interp(fine, places, np.log(numbers))))

    return Part(
        current=between(part.current),
        value=between(part.value),
        sd_current=np.interp(fine, places, part.sd_current),
        sd_value=np.interp(fine, places, part.sd_value),
        sd_common=np.interp(fine, places, part.sd_common),
    )
