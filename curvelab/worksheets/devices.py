"""The devices of a worksheet: nameplates, series, settings, breaking capacities and derating."""

from collections.abc import Mapping
from typing import Literal

from curvelab.errors import WorksheetError
from curvelab.records.curve import ELEMENTS
from curvelab.records.device import KINDS, Breaking, Derating, Nameplate, Setting
from curvelab.records.worksheet import DeviceEntry
from curvelab.units import BASES
from curvelab.worksheets import keys
from curvelab.worksheets.curves import SUPPLIES, read_tolerance
from curvelab.worksheets.fields import Table, written
from curvelab.worksheets.series import KEY, PLACEHOLDER, device_keys

WAVEFORMS: tuple[Literal["AC", "A", "F", "B"], ...] = ("AC", "A", "F", "B")
DELAYS: tuple[Literal["general", "S"], ...] = ("general", "S")


def _breaking(table: Table) -> Breaking:
    return Breaking(
        quantity=table.needed_text("quantity"),
        value_a=table.needed_positive("value_a"),
        voltage_v=table.positive("voltage_v"),
        supply=table.choice("supply", SUPPLIES),
        duration_s=table.positive("duration_s"),
    )


def _setting(name: str, table: Table) -> Setting:
    lowest, highest, steps = table.positive("from"), table.positive("to"), table.positives("steps")
    ranged = lowest is not None or highest is not None
    if ranged == bool(steps) or (ranged and (lowest is None or highest is None)):
        raise WorksheetError(
            f"{table.place}: the setting has no single range",
            "Expected either { from = 0.4, to = 1.0 } or { steps = [2, 4, 8] }",
        )
    if lowest is not None and highest is not None and lowest > highest:
        raise table.wrong("from", f"Expected at most to = {highest:g}")
    return Setting(
        name=name,
        from_value=lowest,
        to_value=highest,
        steps=steps,
        base=table.choice("base", BASES),
        at=table.text("at"),
        can_be_off=table.flag("off"),
    )


def _settings(table: Table) -> tuple[Setting, ...]:
    entries = table.raw("settings")
    if entries is None:
        return ()
    place = f"{table.place} settings"
    if not isinstance(entries, Mapping):
        raise WorksheetError(f"{place}: {written(entries)} is not valid", "Expected ir = { from = 0.4, to = 1.0 }")
    return tuple(_setting(name, Table(entry, f"{place} {name}", keys.SETTING)) for name, entry in entries.items())


def _derating(table: Table) -> Derating:
    ambient = table.needed_number("ambient_c")
    return Derating(
        ambient_c=ambient,
        factor=table.needed_positive("factor"),
        element=table.choice("element", ELEMENTS) or "whole",
    )


def _nameplate(table: Table) -> Nameplate:
    kind = table.choice("kind", KINDS)
    if kind is None:
        raise table.wrong("kind", f"Expected one of: {', '.join(KINDS)}")
    return Nameplate(
        key=table.needed_text("key"),
        kind=kind,
        characteristic=table.text("characteristic"),
        standard=table.text("standard"),
        standard_edition=table.text("standard_edition"),
        rated_current_a=table.positive("rated_current_a"),
        rated_residual_current_a=table.positive("rated_residual_current_a"),
        residual_waveform=table.choice("residual_waveform", WAVEFORMS),
        residual_delay=table.choice("residual_delay", DELAYS),
        rated_voltage_v=table.positive("rated_voltage_v"),
        poles=table.count("poles"),
        frequency_hz=table.positive("frequency_hz"),
        ambient_reference_c=table.number("ambient_reference_c"),
        utilisation_category=table.text("utilisation_category"),
        maker=table.text("maker"),
        series=table.text("series"),
        catalogue=table.text("catalogue"),
        breaking=tuple(_breaking(each) for each in table.tables("breaking", keys.BREAKING)),
        settings=_settings(table),
        derating=tuple(_derating(each) for each in table.tables("derating", keys.DERATING)),
    )


def _check_key(table: Table, entry: DeviceEntry) -> None:
    series = PLACEHOLDER in entry.nameplate.key
    if series and not entry.ratings:
        raise table.wrong("key", f"{PLACEHOLDER} needs ratings = [6, 10, 16]")
    if entry.ratings and not series:
        raise table.wrong("key", f"A series has {PLACEHOLDER} in its key", "Write key = 'riverside-b{rating}'")
    if entry.ratings and entry.nameplate.rated_current_a is not None:
        raise WorksheetError(
            f"{table.place}: both 'ratings' and 'rated_current_a' are given", "A series has only 'ratings'"
        )
    for key in device_keys(entry):
        if not KEY.fullmatch(key):
            raise table.wrong("key", "Expected 1 to 64 of the letters a to z, digits, '-' and '_'")


def read_device(table: Table) -> DeviceEntry:
    """One entry of ``[[devices]]``, made with the keys of a device.

    Raises
    ------
    WorksheetError
        Something in it is wrong.
    """
    entry = DeviceEntry(
        nameplate=_nameplate(table), ratings=table.positives("ratings"), tolerance=read_tolerance(table)
    )
    _check_key(table, entry)
    return entry
