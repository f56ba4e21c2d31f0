"""What a report is made from: a stored revision with all that led to it, handed in by who opened the library."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any, Protocol

import numpy as np

from curvelab.devices.device import Device
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord
from curvelab.records.evidence import Evidence
from curvelab.records.finding import Finding
from curvelab.records.reading import ReadCurve, Reading


class Event(Protocol):
    """One entry of the library's log."""

    @property
    def at(self) -> str: ...  # noqa: D102
    @property
    def name(self) -> str: ...  # noqa: D102
    @property
    def action(self) -> str: ...  # noqa: D102
    @property
    def revision(self) -> int: ...  # noqa: D102
    @property
    def state(self) -> str: ...  # noqa: D102
    @property
    def reason(self) -> str: ...  # noqa: D102


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Case:
    """One revision of a device.

    Parameters
    ----------
    device : Device
        With its revision and state; an adjustable one may be at settings.
    evidence : Evidence
        Its readings; those whose sheet's bytes were kept with the sheet opened, so that it can be drawn.
    history : sequence of mapping
        Every revision, oldest first: rows of the view ``device_index``.
    log : sequence of Event
        What happened to the device, oldest first.
    findings : sequence of Finding
        Of the device against its standard and what is plausible.
    """

    device: Device
    evidence: Evidence
    history: Sequence[Mapping[str, Any]]
    log: Sequence[Event]
    findings: Sequence[Finding]

    @property
    def record(self) -> DeviceRecord:
        """Nameplate and curves."""
        return self.device.record

    @property
    def name(self) -> str:
        """``KEY@REVISION``, as it stands on every page."""
        return f"{self.device.key}@{self.device.revision}"

    @property
    def readings(self) -> tuple[Reading, ...]:
        """The readings that led to this device, each with its own curves alone."""
        return tuple(_of_device(stored.reading, self.record) for stored in self.evidence.readings)


def _of_device(reading: Reading, record: DeviceRecord) -> Reading:
    key = (record.nameplate.key,)
    own = tuple(
        replace(read, devices=key) for read in reading.curves if any(_is_same(read, curve) for curve in record.curves)
    )
    # Guides of other lines would only cover the sheet.
    return replace(reading, curves=own, worksheet=replace(reading.worksheet, curves=()))


def _is_same(read: ReadCurve, stored: Curve) -> bool:
    """Whether a line read is what a stored curve was made of: the same points."""
    one, other = read.curve, stored
    if (one.element, one.edge, one.quantity, one.base, len(one.parts)) != (
        other.element,
        other.edge,
        other.quantity,
        other.base,
        len(other.parts),
    ):
        return False
    pairs = zip(one.parts, other.parts, strict=True)
    return all(np.array_equal(a.current, b.current) and np.array_equal(a.value, b.value) for a, b in pairs)
