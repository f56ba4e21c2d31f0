"""The current by which a device trips in a required time, as a practice reckons it, and its time at a current."""

from dataclasses import replace

from curvelab.calculators.estimate import Estimate, estimate
from curvelab.calculators.facts import rows_of
from curvelab.calculators.practices import Practice
from curvelab.calculators.refusals import no_total_time, not_protective, reason
from curvelab.devices.device import Device
from curvelab.devices.question import Path
from curvelab.errors import DeviceError
from curvelab.units import written_current

_BREAKERS = ("mcb", "rcbo")
_EARTH: Path = "residual"
"""A fault to earth is seen by elements for residual current and by those for overcurrent."""

_PRODUCT_STANDARDS = ("61008", "61009")
_SMALL_A = 0.03
"""Up to this rated residual current a fixed current may take the place of 5 times it."""

LEAST_MEAN_TIME_S = 0.1
"""Mean instantaneous tripping currents say nothing of shorter times."""


def residual_rating_a(device: Device) -> float | None:
    """The rated residual current in A of a device that acts on it; None of any other."""
    return device.nameplate.rated_residual_current_a if device.nameplate.kind in ("rcd", "rcbo") else None


def tripping_current(device: Device, time_s: float, practice: Practice, breaker_time_s: float | None) -> Estimate:
    """The current in A of a fault to earth by which a device is off within a time in s.

    Of a practice that counts on the mean current, that; a device that acts on residual current is never reckoned so.

    Raises
    ------
    DeviceError
        An adjustable device without its settings, or a breaker's time for a device that is no relay.
    """
    if practice.current == "mean" and residual_rating_a(device) is None:
        return _mean_current(device, time_s, practice)
    return sure_current(device, time_s, breaker_time_s)


def sure_current(device: Device, time_s: float, breaker_time_s: float | None) -> Estimate:
    """The current in A from which a fault to earth is surely off within a time in s."""
    left_s = _time_left(device, time_s, breaker_time_s)
    if left_s <= 0:
        words = "the breaker alone takes as long as is allowed"
        return Estimate(status="not_covered", value=None, interval=None, unit="A", reason=words)
    trips = device.trip_current(left_s, path=_EARTH, meaning=_meaning(breaker_time_s)).trips
    missing = "" if breaker_time_s else no_total_time(device)
    found = estimate(trips, "A", not_protective(device) or missing or reason(device, "slow", trips))
    return found if found.is_known else _by_product_standard(device, left_s) or found


def _by_product_standard(device: Device, time_s: float) -> Estimate | None:
    """The residual current in A for which its product standard allows no longer time.

    None where the standard says nothing, and for a device that has a sheet: that may show it to be slower.
    """
    plate, rated_a = device.nameplate, residual_rating_a(device)
    drawn = any(curve.quantity == "time" for curve in device.record.curves)
    if drawn or rated_a is None or not any(number in (plate.standard or "") for number in _PRODUCT_STANDARDS):
        return None
    delay = plate.residual_delay or "general"
    for row in rows_of("disconnection", "break_times"):
        if row["delay"] == delay and row["time_s"] <= time_s:
            least_a = float(row.get("least_a", 0.0)) if rated_a <= _SMALL_A else 0.0
            words = (
                f"no sheet is at hand: at most {row['time_s']:g} s at {row['multiple']:g} IΔn by {row['origin'].clause}"
            )
            current_a = max(row["multiple"] * rated_a, least_a)
            return Estimate(status="at_most", value=current_a, interval=None, unit="A", basis="standard", reason=words)
    return None


def overcurrent_alone(device: Device, time_s: float) -> Estimate:
    """The current in A by which the elements that do not act on residual current are off within a time in s."""
    trips = device.trip_current(time_s, path="line_to_neutral", meaning="clearing").trips
    return estimate(trips, "A", reason(device, "slow", trips))


def time_at(device: Device, current_a: float, breaker_time_s: float | None) -> Estimate:
    """The longest time in s until a fault current to earth is off."""
    slow = device.trip_time(current_a, path=_EARTH, meaning=_meaning(breaker_time_s)).slow
    missing = "" if breaker_time_s else no_total_time(device)
    found = estimate(slow, "s", not_protective(device) or missing or reason(device, "slow", slow))
    return found.mapped(lambda time_s: time_s + (breaker_time_s or 0.0), "s")


def _meaning(breaker_time_s: float | None) -> str:
    return "relay_output" if breaker_time_s else "clearing"


def _time_left(device: Device, time_s: float, breaker_time_s: float | None) -> float:
    if breaker_time_s is None:
        return time_s
    if device.nameplate.kind != "relay":
        raise DeviceError(
            f"'{device.key}' is no relay: the time of a breaker adds nothing to its own",
            "",
            "Leave the breaker time out",
        )
    return time_s - breaker_time_s


def _mean_current(device: Device, time_s: float, practice: Practice) -> Estimate:
    """By the factor of its characteristic; of other devices by their mean line."""
    plate = device.nameplate
    multiple = practice.mean_multiples.get(plate.characteristic or "") if plate.kind in _BREAKERS else None
    if multiple is not None and plate.rated_current_a is not None and time_s >= LEAST_MEAN_TIME_S:
        words = f"mean tripping current {multiple:g} In of type {plate.characteristic}, {practice.origin.clause}"
        value = multiple * plate.rated_current_a
        holds = device.trip_current(time_s).holds
        if holds is not None and holds.value > value * (1 + 1e-9):
            held = written_current(float(holds.value), "A")
            words = f"the sheet shows that it surely holds up to {held}, above the {words}"
            return Estimate(status="not_covered", value=None, interval=None, unit="A", reason=words)
        return Estimate(status="value", value=value, interval=None, unit="A", basis="standard", reason=words)
    mean = device.trip_current(time_s, meaning="clearing").mean
    found = estimate(mean, "A", not_protective(device) or f"'{device.key}' has no mean line of operating times there")
    return replace(found, reason=found.reason or "mean line of the sheet")
