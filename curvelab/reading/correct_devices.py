"""What a person says about devices: their nameplates."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, ClassVar

from curvelab.reading.tables import Tables, edited, entries_of, listed, merge, number_and_unit, numbered, with_fields
from curvelab.records.worksheet import Worksheet
from curvelab.units import unit_factor


@dataclass(frozen=True, kw_only=True, slots=True)
class SetDevice:
    """Keys of a device's table; null takes one out. With ``device`` None a new device."""

    kind: ClassVar[str] = "set-device"
    fields: Mapping[str, Any]
    device: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the keys set; curves follow a device that gets another key."""
        if self.device is None or "key" not in self.fields:
            return with_fields(worksheet, "devices", self.device, self.fields)
        before = numbered(worksheet.devices, self.device, "device").nameplate.key

        def edit(tables: Tables) -> None:
            merge(entries_of(tables, "devices")[self.device or 0], self.fields)
            _rename(tables, before, self.fields["key"])

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"{'A new device' if self.device is None else 'The device'}: {listed(self.fields)}"


@dataclass(frozen=True, kw_only=True, slots=True)
class FillDevice:
    """One blank of a device's nameplate: a text, or a number that may have its unit as in ``63 A`` or ``30 mA``."""

    kind: ClassVar[str] = "fill-device"
    device: int
    name: str
    value: float | str

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the blank filled."""
        value = self.value
        if self.name.endswith("_a") and isinstance(value, str):
            said = number_and_unit(value)
            value = said["value"] * unit_factor("current", said.get("unit", "A"))
        return with_fields(worksheet, "devices", self.device, {self.name: value})

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"The device: {self.name} {self.value}"


@dataclass(frozen=True, kw_only=True, slots=True)
class RemoveDevice:
    """Strike a device out."""

    kind: ClassVar[str] = "remove-device"
    device: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet without it."""
        numbered(worksheet.devices, self.device, "device")
        return edited(worksheet, lambda tables: entries_of(tables, "devices").pop(self.device) and None)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Device {self.device + 1} struck out"


def _rename(tables: Tables, before: str, after: Any) -> None:
    """Let curves follow a device to its new key."""
    for curve in tables.get("curves", []):
        if curve.get("device") == before:
            curve["device"] = after
        if before in curve.get("devices", []):
            curve["devices"] = [after if key == before else key for key in curve["devices"]]
