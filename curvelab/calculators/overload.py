"""Protection of a conductor against overload: IB <= In <= Iz, and I2 <= 1.45 Iz from the device's own band."""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from math import isfinite

from curvelab.calculators.cautions import BACK_UP, Caution, cautions_of
from curvelab.calculators.estimate import Estimate, estimate
from curvelab.calculators.facts import Origin, Row, lies_in, rows_of
from curvelab.calculators.refusals import no_total_time, not_protective, reason, residual_only
from curvelab.calculators.verdict import Requirement, verdict
from curvelab.devices.bases import amperes
from curvelab.devices.device import Device
from curvelab.devices.settings import OFF
from curvelab.errors import InputError
from curvelab.records.finding import Finding
from curvelab.units import written_current, written_time


@dataclass(frozen=True, kw_only=True, slots=True)
class Load:
    """What the conductor carries: its capacity Iz in A, and where given the design current IB of the circuit.

    ``conventional_time_s`` takes the place of the tabulated time within which the device has to trip.

    Raises
    ------
    InputError
        A number is not positive.
    """

    capacity_a: float
    design_a: float | None = None
    conventional_time_s: float | None = None

    def __post_init__(self) -> None:
        for name in ("capacity_a", "design_a", "conventional_time_s"):
            value = getattr(self, name)
            if value is not None and not (isfinite(value) and value > 0):
                raise InputError(f"{name} = {value:g} cannot be", "A positive number")


@dataclass(frozen=True, kw_only=True, slots=True)
class Overload:
    """Whether a device protects a conductor against overload.

    ``set_a`` is the rated current, or the one the overload release is set to; ``trips`` the current I2 in A that surely
    trips within the conventional time, from the band where it reaches there, else the standard's; ``least_capacity``
    the least Iz in A the device protects. ``refusal`` says why it protects none.
    """

    device: str
    revision: int | None
    state: str | None
    load: Load
    set_a: float | None
    conventional_time_s: float | None
    conventional_origin: Origin | None
    trips: Estimate
    least_capacity: Estimate
    refusal: str
    findings: tuple[Finding, ...]
    cautions: tuple[Caution, ...]


def overload(device: Device, load: Load) -> Overload:
    """Whether a device protects a conductor against overload.

    Raises
    ------
    DeviceError
        An adjustable device without its settings.
    """
    refusal = no_overload_protection(device)
    set_a = None if refusal else _set_current(device)
    row = None if set_a is None else _conventional(device, set_a)
    time_s = load.conventional_time_s or (row["time_s"] if row else None)
    trips = _tripping(device, time_s, row, set_a, refusal)
    factor, origin = _factor()
    by_trip = trips.mapped(lambda current_a: current_a / factor, "A")
    return Overload(
        device=device.key,
        revision=device.revision,
        state=device.state,
        load=load,
        set_a=set_a,
        conventional_time_s=time_s,
        conventional_origin=row["origin"] if row and load.conventional_time_s is None else None,
        trips=trips,
        least_capacity=_larger(by_trip, set_a),
        refusal=refusal,
        findings=tuple(_findings(device, load, set_a, trips, (factor, origin))),
        cautions=cautions_of(device),
    )


def no_overload_protection(device: Device) -> str:
    """Why a device protects against no overload; empty where it may."""
    plate = device.nameplate
    if plate.kind == "fuse" and plate.characteristic in BACK_UP:
        kind = f"'{device.key}' is an {plate.characteristic} fuse"
        return f"{kind}: it breaks short circuits only and gives no overload protection"
    if device.settings.get("ir") == OFF:
        return f"'{device.key}' has its overload release off"
    return not_protective(device) or residual_only(device)


def _set_current(device: Device) -> float | None:
    plate = device.nameplate
    if any(setting.name == "ir" for setting in plate.settings):
        return amperes(plate, device.settings, "xIr")
    return plate.rated_current_a


def _conventional(device: Device, set_a: float) -> Row | None:
    plate = device.nameplate
    rated_a = plate.rated_current_a or set_a
    for row in rows_of("conventional", "devices"):
        known = row.get("characteristics")
        if (
            plate.kind in row["kinds"]
            and lies_in(rated_a, row, "a")
            and (known is None or plate.characteristic in known)
        ):
            return row
    return None


def _tripping(device: Device, time_s: float | None, row: Row | None, set_a: float | None, refusal: str) -> Estimate:
    unknown = Estimate(status="not_covered", value=None, interval=None, unit="A", reason=refusal)
    if refusal:
        return unknown
    if time_s is None:
        words = f"no conventional time is tabulated for '{device.key}': give it"
        return Estimate(status="not_covered", value=None, interval=None, unit="A", reason=words)
    trips = device.trip_current(time_s, path="line_to_neutral", meaning="clearing").trips
    found = estimate(trips, "A", no_total_time(device) or reason(device, "slow", trips))
    if found.is_known or row is None or set_a is None:
        return found
    value = row["multiple"] * set_a
    if _is_later(device, time_s, value):
        return replace(found, reason=f"{found.reason}, and they lie beyond {row['multiple']:g} In")
    words = f"{row['multiple']:g} In by {row['origin'].clause}; the band does not say: {found.reason}"
    return Estimate(status="at_most", value=value, interval=None, unit="A", basis="standard", reason=words)


def _is_later(device: Device, time_s: float, current_a: float) -> bool:
    """Whether what comes before the current is off, as melting does, already needs a larger current by that time."""
    before = device.trip_current(time_s, path="line_to_neutral").trips
    return before is not None and bool(before.value > current_a * (1 + 1e-9))


def _factor() -> tuple[float, Origin]:
    row = rows_of("conventional", "overload")[0]
    return row["factor"], row["origin"]


def _larger(found: Estimate, set_a: float | None) -> Estimate:
    """The larger of what I2 and what In ask for."""
    if found.value is None or set_a is None or found.value >= set_a:
        return found
    return Estimate(status="value", value=set_a, interval=None, unit="A", basis="standard")


def _findings(
    device: Device, load: Load, set_a: float | None, trips: Estimate, by: tuple[float, Origin]
) -> Iterator[Finding]:
    factor, origin = by
    rated = Estimate(
        status="not_covered" if set_a is None else "value",
        value=set_a,
        interval=None,
        unit="A",
        basis="standard",
        reason=trips.reason or "the rated current is not given",
    )
    if load.design_a is not None:
        words = f"In is at least IB = {written_current(load.design_a, 'A', 4)}"
        yield verdict(
            Requirement(
                device=device.key, rule="design", words=words, limit=load.design_a, permitted="at_least", origin=origin
            ),
            rated,
        )
    words = f"In is at most Iz = {written_current(load.capacity_a, 'A', 4)}"
    yield verdict(
        Requirement(
            device=device.key, rule="rated", words=words, limit=load.capacity_a, permitted="at_most", origin=origin
        ),
        rated,
    )
    limit_a = factor * load.capacity_a
    words = f"I2 is at most {factor:g} Iz = {written_current(limit_a, 'A', 4)}"
    yield verdict(
        Requirement(device=device.key, rule="trips", words=words, limit=limit_a, permitted="at_most", origin=origin),
        trips,
    )


def written_conventional(answer: Overload) -> str:
    """The conventional time and its clause in words."""
    if answer.conventional_time_s is None:
        return "not known"
    clause = answer.conventional_origin.clause if answer.conventional_origin else "as given"
    return f"{written_time(answer.conventional_time_s)} ({clause})"
