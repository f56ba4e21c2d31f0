"""The station that checks devices: each against its standard and what is plausible, then the family they make."""

from collections.abc import Hashable, Sequence
from dataclasses import fields
from functools import partial

from curvelab.devices.device import Device
from curvelab.reading.remember import Remember
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord
from curvelab.records.finding import Finding
from curvelab.standards.family import doubts_about_family
from curvelab.standards.review import review_alone


def checked(records: Sequence[DeviceRecord], remember: Remember) -> tuple[Finding, ...]:
    """What `curvelab.standards.review.review` finds; a device whose curves are the same is not asked anew."""
    devices = [Device(record) for record in records]
    each = (
        finding
        for device in devices
        for finding in remember("check", _given(device.record), partial(review_alone, device))
    )
    return (*each, *doubts_about_family(devices))


def _given(record: DeviceRecord) -> tuple[Hashable, ...]:
    return (record.nameplate, *map(_said, record.curves))


def _said(curve: Curve) -> tuple[Hashable, ...]:
    """All that a curve says: its points count as the same where they are the same objects."""
    settings = tuple(sorted(curve.at.items()))
    return (settings, *(getattr(curve, field.name) for field in fields(curve) if field.name != "at"))
