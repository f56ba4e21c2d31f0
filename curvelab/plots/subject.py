"""What a picture of devices is about: their curves in one base, the range they need, and what each is called."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from curvelab.devices.bases import amperes
from curvelab.devices.names import names_of
from curvelab.errors import DeviceError
from curvelab.plots.ink import DeviceInk, device_ink
from curvelab.records.band import Band, bands_of
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord, Nameplate
from curvelab.units import written_current

KIND_WORDS = {
    "fuse": "Fuse",
    "mcb": "Miniature circuit-breaker",
    "mccb": "Moulded-case circuit-breaker",
    "acb": "Air circuit-breaker",
    "rcd": "Residual current device",
    "rcbo": "Residual current breaker with overcurrent protection",
    "relay": "Relay",
    "switch": "Switch",
}


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Subject:
    """One device as it is drawn: its name, bands and ink, and its letter where there are several."""

    name: str
    plate: Nameplate
    bands: tuple[Band, ...]
    ink: DeviceInk
    letter: str

    @property
    def curves(self) -> tuple[Curve, ...]:
        """Every curve drawn."""
        return tuple(curve for band in self.bands for curve in band.edges.values())


def subjects_of(devices: Sequence[DeviceRecord], quantity: str) -> tuple[tuple[Subject, ...], str]:
    """The devices with their curves of one quantity, and the base that all of them are drawn in.

    Raises
    ------
    DeviceError
        There is no such curve, or currents of different bases cannot be turned into amperes.
    """
    owned = [(device.nameplate, [c for c in device.curves if c.quantity == quantity]) for device in devices]
    bases = {curve.base for _, curves in owned for curve in curves}
    if not bases:
        keys = ", ".join(plate.key for plate, _ in owned) or "no device"
        raise DeviceError(f"There is no curve of {quantity.replace('_', '-')} to draw for {keys}")
    ratings = {plate.rated_current_a for plate, _ in owned}
    alike = len(bases) == 1 and (bases == {"A"} or len(owned) == 1 or len(ratings) == 1)
    base = bases.pop() if alike else "A"
    subjects = tuple(
        Subject(
            name=name,
            plate=plate,
            bands=bands_of(_in_base(curve, base, plate) for curve in curves),
            ink=device_ink(index),
            letter=_letter(index) if len(owned) > 1 else "",
        )
        for index, (name, (plate, curves)) in enumerate(zip(names_of(devices), owned, strict=True))
    )
    return subjects, base


def _letter(index: int) -> str:
    first, second = divmod(index, 26)
    return (chr(64 + first) if first else "") + chr(65 + second)


def _in_base(curve: Curve, base: str, plate: Nameplate) -> Curve:
    if curve.base == base:
        return curve
    factor = amperes(plate, curve.at, curve.base) / amperes(plate, curve.at, base)
    parts = tuple(replace(part, current=part.current * factor) for part in curve.parts)
    return replace(curve, base=base, parts=parts)


def curves_in_base(subject: Subject, base: str) -> tuple[Curve, ...]:
    """The subject's curves with currents in another base.

    Raises
    ------
    DeviceError
        A rating or setting for it is not known.
    """
    return tuple(_in_base(curve, base, subject.plate) for curve in subject.curves)


def units_per_unit(subject: Subject, base: str, drawn_base: str) -> float | None:
    """Units of the base drawn in one unit of another; None where a rating or setting for it is not known."""
    if base == drawn_base:
        return 1.0
    at = subject.curves[0].at if subject.bands else {}
    try:
        return amperes(subject.plate, at, base) / amperes(subject.plate, at, drawn_base)
    except DeviceError:
        return None


def amperes_per_unit(subjects: Sequence[Subject], base: str) -> float | None:
    """Amperes of one unit of the base, where one device alone is drawn and they are known."""
    if base == "A" or len(subjects) != 1 or not subjects[0].bands:
        return None
    per_ampere = units_per_unit(subjects[0], "A", base)
    return None if per_ampere is None else 1.0 / per_ampere


def ranges(
    curves: Iterable[Curve], places: Iterable[tuple[float, float]] = ()
) -> tuple[tuple[float, float], tuple[float, float]]:
    """Least and greatest current and value of all points of curves, and of single places."""
    single = list(places)
    parts = [part for curve in curves for part in curve.parts]
    current = np.concatenate([*(part.current for part in parts), [place[0] for place in single]])
    value = np.concatenate([*(part.value for part in parts), [place[1] for place in single]])
    return (float(current.min()), float(current.max())), (float(value.min()), float(value.max()))


def states_uncertainty(curve: Curve) -> bool:
    """Whether any of its points has an uncertainty."""
    return any(bool(np.isfinite(each).any()) for part in curve.parts for each in (part.sd_current, part.sd_value))


def description(plate: Nameplate) -> str:
    """``Miniature circuit-breaker, characteristic B, 16 A, IEC 60898-1``."""
    words = [KIND_WORDS[plate.kind]]
    if plate.characteristic:
        words.append(plate.characteristic if plate.kind == "relay" else f"characteristic {plate.characteristic}")
    for rating, mark in ((plate.rated_current_a, ""), (plate.rated_residual_current_a, " residual")):
        if rating is not None:
            words.append(written_current(rating, "A") + mark)
    if plate.standard:
        words.append(plate.standard)
    return ", ".join(words)
