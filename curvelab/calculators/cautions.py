"""Cautions of an answer: short, present, never in place of local rules, the maker's data or a licensed person."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from curvelab.calculators.facts import rows_of
from curvelab.devices.device import Device
from curvelab.units import written_current

_RECLOSE = "Do not re-close on a fault: find it first, and let a bimetal cool."
BACK_UP = ("aM", "aR")
"""Characteristics of fuses that break short circuits only: they give no overload protection."""

_BREAKERS = ("mcb", "mccb", "acb", "rcbo")


@dataclass(frozen=True, kw_only=True, slots=True)
class Caution:
    """One caution, with a code programs can tell it by."""

    code: str
    text: str


GENERAL = Caution(
    code="qualified-person",
    text="Supports a qualified person; local rules, the maker's data and licensed practice decide.",
)


def cautions_of(*devices: Device) -> tuple[Caution, ...]:
    """Cautions on the devices an answer rests on, and the general one last."""
    of_devices = (caution for device in devices for caution in _of_device(device))
    return (*dict.fromkeys(of_devices), *_overload(devices), *_reclosing(devices), GENERAL)


def least_breaking_current_a(device: Device) -> float | None:
    """The current in A below which a back-up fuse may not break; None where nothing is said or usual.

    The nameplate's ``Imin``, else the usual multiple of its characteristic.
    """
    plate = device.nameplate
    stated = [entry.value_a for entry in plate.breaking if entry.quantity == "Imin"]
    if stated:
        return max(stated)
    if plate.kind != "fuse" or plate.rated_current_a is None:
        return None
    usual = [row for row in rows_of("selectivity", "back_up") if row["characteristic"] == plate.characteristic]
    return float(usual[0]["multiple"]) * plate.rated_current_a if usual else None


def _of_device(device: Device) -> Iterator[Caution]:
    if device.state is not None and device.state != "released":
        text = f"Revision {device.revision} of {device.key} is not released ({device.state})."
        yield Caution(code="not-released", text=text)
    least_a = least_breaking_current_a(device)
    if least_a is not None:
        text = (
            f"{device.key} is a back-up fuse: below {written_current(least_a, 'A')} it may melt and not break; "
            "another device must clear those currents."
        )
        yield Caution(code="least-breaking-current", text=text)


def _overload(devices: tuple[Device, ...]) -> Iterator[Caution]:
    for device in devices:
        if device.nameplate.kind == "fuse" and device.nameplate.characteristic in BACK_UP:
            yield Caution(code="no-overload-protection", text=f"{device.key} gives no overload protection.")


def _reclosing(devices: tuple[Device, ...]) -> Iterator[Caution]:
    if any(device.nameplate.kind in _BREAKERS for device in devices):
        yield Caution(code="re-closing", text=_RECLOSE)


def cautions_json(cautions: Sequence[Caution]) -> list[dict[str, str]]:
    """Cautions as JSON objects."""
    return [{"code": caution.code, "text": caution.text} for caution in cautions]
