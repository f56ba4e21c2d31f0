"""The devices a sheet shows, as its words name them, or as a worksheet gives them."""

import re
from collections.abc import Mapping, Sequence

from curvelab.reading.said import Said
from curvelab.records.curve import Conditions
from curvelab.records.device import Nameplate, Setting
from curvelab.records.worksheet import CurveEntry, DeviceEntry

LONGEST_STEM = 40
"""Letters of a proposed key before the rating."""
LETTER_KINDS = ("B", "C", "D", "K", "Z")
"""Types of miniature circuit-breakers (IEC 60898-1; K and Z are common practice)."""


def kind_of(said: Said) -> str | None:
    """The kind of device; a type letter alone means a miniature circuit-breaker."""
    if said.kind is not None:
        return said.kind
    return "mcb" if said.characteristics and set(said.characteristics) <= set(LETTER_KINDS) else None


def meaning_of(said: Said, kind: str | None) -> str | None:
    """What ends at a line's time, in the words of its kind of device; None where that is not sure."""
    words = said.meaning
    if kind == "fuse":
        return {"pre_arcing": "pre_arcing", "operating": "operating", "clearing": "operating"}.get(words or "")
    if kind == "relay":
        return {"operating": "relay_output", "tripping": "relay_output", "relay_output": "relay_output"}.get(
            words or ""
        )
    if kind in ("mcb", "rcd", "rcbo"):
        # what the standards of these devices call tripping or operating ends with the current
        return {"operating": "clearing", "tripping": "clearing", "clearing": "clearing"}.get(words or "")
    if kind in ("mccb", "acb"):
        return {"clearing": "clearing", "unlatching": "unlatching"}.get(words or "")
    return None


def proposed(title: str, said: Said, settings: Mapping[str, tuple[float, ...]], taken: Sequence[str]) -> DeviceEntry:
    """The device that words name, with a key of its own.

    Parameters
    ----------
    title : str
        Of the sheet.
    said : Said
        What is said of the device; its kind is known.
    settings : mapping
        Setting -> the values at which lines are drawn.
    taken : sequence of str
        Keys that are given already.
    """
    kind = kind_of(said)
    if kind is None:
        raise ValueError("a device needs a kind")
    return DeviceEntry(
        nameplate=Nameplate(
            key=_key(title, said, kind, taken),
            kind=kind,
            characteristic=said.characteristic,
            standard=said.standard,
            rated_current_a=said.rating,
            rated_residual_current_a=said.residual_current_a if kind in ("rcd", "rcbo") else None,
            residual_delay=said.residual_delay if kind in ("rcd", "rcbo") else None,
            settings=tuple(Setting(name=name, steps=steps) for name, steps in sorted(settings.items())),
        )
    )


def _key(title: str, said: Said, kind: str, taken: Sequence[str]) -> str:
    stem = re.sub(r"[^a-z0-9]+", "-", title.lower())[:LONGEST_STEM].strip("-") or kind
    letter = (said.characteristic or "").lower().replace(" ", "-")
    parts = [stem, "" if letter in stem.split("-") or len(letter) > 3 else letter]
    rating = f"{said.rating:g}".replace(".", "_") if said.rating is not None else ""
    key = "-".join(part for part in (*parts, "" if stem.endswith(rating) else rating) if part)
    number, free = 2, key
    while free in taken:
        free, number = f"{key}-{number}", number + 1
    return free


def given_for(said: Said, devices: Sequence[DeviceEntry]) -> str | None:
    """The key of the only given device that what is said fits; None where none or several fit."""
    fitting = [entry.nameplate.key for entry in devices if _fits(said, entry)]
    return fitting[0] if len(fitting) == 1 else None


def _fits(said: Said, entry: DeviceEntry) -> bool:
    plate = entry.nameplate
    ratings = entry.ratings or ((plate.rated_current_a,) if plate.rated_current_a is not None else ())
    if said.rating is not None and ratings and said.rating not in ratings:
        return False
    letters = said.characteristics
    return not letters or plate.characteristic is None or plate.characteristic in letters


def conditions_of(said: Said) -> Conditions:
    """What a line is drawn for, where its words state it."""
    return Conditions(start=said.start)


def twins(entries: Sequence[CurveEntry]) -> set[int]:
    """Entries that say the same of two lines: at most one of them can be right."""
    seen: dict[object, list[int]] = {}
    for number, entry in enumerate(entries):
        if entry.edge is not None and entry.devices:
            settings = tuple(sorted(entry.at.items()))
            said = (entry.devices, entry.edge, entry.meaning, entry.element, entry.conditions, settings)
            seen.setdefault(said, []).append(number)
    return {number for numbers in seen.values() if len(numbers) > 1 for number in numbers}
