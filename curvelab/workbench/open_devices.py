"""What is open about devices: what was read of them and nobody has confirmed, blanks, findings against them."""

from collections.abc import Iterator

from curvelab.records.device import Nameplate
from curvelab.records.finding import Finding
from curvelab.records.reading import Reading
from curvelab.records.worksheet import DeviceEntry, Worksheet
from curvelab.units import written_between, written_current
from curvelab.workbench.open_entry import Answer, OpenEntry, accepting

KIND_WORDS = {
    "fuse": "fuse",
    "mcb": "miniature circuit-breaker",
    "mccb": "moulded-case circuit-breaker",
    "acb": "air circuit-breaker",
    "rcd": "residual current device",
    "rcbo": "residual current breaker with overcurrent protection",
    "relay": "relay",
    "switch": "switch",
}
WITHOUT_RATING = ("relay", "switch")
WITHOUT_STANDARD = ("switch",)


def of_devices(worksheet: Worksheet, reading: Reading) -> Iterator[OpenEntry]:
    """What a person must say of the devices before they can be stored and checked.

    Parameters
    ----------
    worksheet : Worksheet
        What was said.
    reading : Reading
        Its worksheet holds what was read too.
    """
    devices = reading.worksheet.devices
    if not devices:
        yield OpenEntry(code="no-device", text="Which device is it? Give its key and kind", kind="device")
    for number, entry in enumerate(devices):
        if not worksheet.devices:
            yield _confirm(number, entry.nameplate)
        yield from _blanks(number, entry)


def _confirm(number: int, plate: Nameplate) -> OpenEntry:
    words = [KIND_WORDS[plate.kind], *([f"characteristic {plate.characteristic}"] if plate.characteristic else [])]
    if plate.rated_current_a is not None:
        words.append(written_current(plate.rated_current_a, "A"))
    return OpenEntry(
        code="device-read",
        text=f"The sheet seems to show '{plate.key}': {', '.join(words)}. Is that right?",
        kind="device",
        answers=(Answer(text="It is right", change={"kind": "set-device", "device": number, "fields": {}}),),
    )


def _blanks(number: int, entry: DeviceEntry) -> Iterator[OpenEntry]:
    """Blanks without which a device cannot be asked in amperes, or not be checked."""
    plate = entry.nameplate
    is_rated = plate.rated_current_a is not None or plate.rated_residual_current_a is not None or bool(entry.ratings)
    if not is_rated and plate.kind not in WITHOUT_RATING:
        residual = plate.kind == "rcd"
        name = "rated_residual_current_a" if residual else "rated_current_a"
        yield _blank(number, plate, name, "rated residual current" if residual else "rated current")
    if plate.standard is None and plate.kind not in WITHOUT_STANDARD:
        yield _blank(number, plate, "standard", "standard")


def _blank(number: int, plate: Nameplate, name: str, words: str) -> OpenEntry:
    code = f"blank-{name.replace('_', '-')}-{plate.key}"
    change = {"kind": "fill-device", "device": number, "name": name}
    return OpenEntry(
        code=code,
        text=f"The {words} of '{plate.key}' is not known",
        kind="device",
        answers=(Answer(text=f"Give the {words}", change=change, asks="value"), accepting(code)),
    )


def of_finding(finding: Finding) -> OpenEntry:
    """A finding that fails or is undecided: to be looked at, and accepted with a reason."""
    code = f"finding-{finding.rule}-{finding.device}"
    read = "" if finding.value is None else f": read {written_between(finding.value, finding.interval, finding.unit)}"
    note = f". {finding.note}" if finding.note else ""
    return OpenEntry(
        code=code,
        text=f"{finding.device}, {finding.standard} {finding.clause}: "
        f"{finding.requirement}, {finding.outcome}{read}{note}",
        kind="finding",
        answers=(accepting(code),),
    )
