"""What devices are called beside each other: two revisions of one device share its key."""

from collections.abc import Sequence

from curvelab.records.device import DeviceRecord


def names_of(devices: Sequence[DeviceRecord]) -> tuple[str, ...]:
    """A name for each, all different: its key, with its revision or position where it needs one."""
    keys = [device.nameplate.key for device in devices]
    names = _told_apart(keys, [f"@{device.revision}" for device in devices])
    return tuple(_told_apart(names, [f" ({position})" for position in range(1, len(names) + 1)]))


def _told_apart(names: Sequence[str], more: Sequence[str]) -> list[str]:
    return [name + word if names.count(name) > 1 else name for name, word in zip(names, more, strict=True)]
