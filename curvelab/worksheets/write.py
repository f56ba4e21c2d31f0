"""A worksheet as text that reads back as the same worksheet, in one order of keys."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import asdict, fields

from curvelab.records.axes import Mark
from curvelab.records.curve import Conditions
from curvelab.records.device import Breaking, Derating, Nameplate, Setting, Tolerance
from curvelab.records.warning import Acceptance
from curvelab.records.worksheet import AxisEntry, CurveEntry, DeviceEntry, Document, SheetEntry, Worksheet
from curvelab.worksheets import keys
from curvelab.worksheets.read import FORMAT
from curvelab.worksheets.toml import Entries, Value, inline, line, table

ORIGINS: Mapping[str, str] = {
    "given": "",
    "grid": "from the sheet's grid",
    "label": "from the label read there",
    "vector": "from the file's exact strokes",
}
"""What the comment beside a mark says of where it comes from."""


def worksheet_text(worksheet: Worksheet) -> str:
    """The worksheet in TOML, format 1.

    Everything it says is written, nothing is left to defaults that could change. What a mark was found from stands
    beside it as a comment: once written, it is given.
    """
    return "\n\n".join(_blocks(worksheet)) + "\n"


def _blocks(worksheet: Worksheet) -> Iterator[str]:
    yield line("format", FORMAT)
    if worksheet.document != Document():
        yield table("[document]", _stated(asdict(worksheet.document)))
    if worksheet.sheet is not None:
        yield _sheet(worksheet.sheet)
    for axis in (worksheet.current, worksheet.value):
        if axis is not None:
            yield _axis(axis)
    for curve in worksheet.curves:
        yield table("[[curves]]", _curve(curve))
    for device in worksheet.devices:
        yield from _device(device)
    for acceptance in worksheet.accepted:
        yield table("[[accepted]]", _acceptance(acceptance))


def _stated(entries: Entries) -> Entries:
    """Without empty texts and lists."""
    return {key: value for key, value in entries.items() if value is not None and value not in ("", ())}


def _sheet(sheet: SheetEntry) -> str:
    return table("[sheet]", asdict(sheet))


def _axis(axis: AxisEntry) -> str:
    words = {"scale": axis.scale, "unit": axis.unit, "factor": axis.factor, "direction": axis.direction}
    text = table(f"[axes.{axis.quantity}]", words)
    if not axis.marks:
        return text
    return "\n".join([text, "marks = [", *map(_mark, axis.marks), "]"])


def _mark(mark: Mark) -> str:
    entries: dict[str, Value] = {"at": mark.at, "value": mark.value}
    if mark.unit is not None:
        entries["unit"] = mark.unit
    comment = ORIGINS[mark.origin]
    return f"    {inline(entries)}," + (f"  # {comment}" if comment else "")


def _limits(tolerance: Tolerance | None) -> Entries:
    if tolerance is None:
        return {}
    return dict(zip(keys.TOLERANCE, (tolerance.current, tolerance.time, tolerance.time_s), strict=True))


def _conditions(conditions: Conditions) -> Entries:
    return {key: getattr(conditions, key) for key in keys.CONDITIONS}


def _curve(curve: CurveEntry) -> Entries:
    one = len(curve.devices) == 1
    return {
        "edge": curve.edge,
        "meaning": curve.meaning,
        "element": curve.element,
        "device": curve.devices[0] if one else None,
        "devices": curve.devices if len(curve.devices) > 1 else None,
        "through": curve.through or None,
        "colour": curve.colour,
        "avoid": curve.avoid or None,
        "at": dict(curve.at) or None,
        **_conditions(curve.conditions),
        **_limits(curve.tolerance),
        "base": curve.base,
        "points": curve.points or None,
        "source": curve.source or None,
    }


def _device(device: DeviceEntry) -> Iterator[str]:
    plate = device.nameplate
    yield table("[[devices]]", {**_plate(plate, device.ratings), **_limits(device.tolerance)})
    if plate.settings:
        yield "\n".join(["[devices.settings]", *(line(each.name, _setting(each)) for each in plate.settings)])
    for breaking in plate.breaking:
        yield table("[[devices.breaking]]", _record(breaking))
    for derating in plate.derating:
        yield table("[[devices.derating]]", _record(derating))


def _plate(plate: Nameplate, ratings: Sequence[float]) -> Entries:
    lists = (*keys.TOLERANCE, "breaking", "settings", "derating")
    single = [key for key in keys.DEVICE if key not in lists and key != "ratings"]
    entries: dict[str, Value | None] = {}
    for key in single:
        entries[key] = getattr(plate, key)
        if key == "rated_current_a":
            entries["ratings"] = tuple(ratings) or None
    return entries


def _setting(setting: Setting) -> dict[str, Value]:
    entries: Entries = {
        "from": setting.from_value,
        "to": setting.to_value,
        "steps": setting.steps or None,
        "base": setting.base,
        "at": setting.at,
        "off": True if setting.can_be_off else None,
    }
    return {key: value for key, value in entries.items() if value is not None}


def _record(record: Breaking | Derating) -> Entries:
    return {field.name: getattr(record, field.name) for field in fields(record)}


def _acceptance(acceptance: Acceptance) -> Entries:
    return _stated({key: getattr(acceptance, key) for key in keys.ACCEPTED})
