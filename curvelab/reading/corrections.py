"""What a person says about a reading, one thing at a time: each is a pure step from one worksheet to the next.

A step edits the worksheet's tables and reads them again, strictly, so that nothing gets in that could not be typed.
"""

import re
import tomllib
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, ClassVar, Literal, TypeAlias

from curvelab.errors import InputError
from curvelab.records.trace import Place
from curvelab.records.worksheet import Box, Worksheet
from curvelab.units import unit_factor
from curvelab.worksheets.read import worksheet_of
from curvelab.worksheets.write import worksheet_text

Tables: TypeAlias = dict[str, Any]
AxisName = Literal["current", "value", "time", "let_through", "peak"]
SECOND = ("time", "let_through", "peak")

NUMBER_AND_UNIT = re.compile(r"\s*([0-9.]+(?:[eE][+-]?[0-9]+)?)\s*([A-Za-z]\w*)?\s*")


def edited(worksheet: Worksheet, edit: Callable[[Tables], None]) -> Worksheet:
    """The worksheet whose tables were edited, with its text.

    Raises
    ------
    WorksheetError
        What was said cannot stand in a worksheet.
    """
    tables = tomllib.loads(worksheet_text(worksheet))
    edit(tables)
    said = worksheet_of(tables, "worksheet")
    return worksheet_of(tables, "worksheet", worksheet_text(said))


@dataclass(frozen=True, kw_only=True, slots=True)
class Passes:
    """A line passes a place: the one of an entry, or with ``curve`` None one that has no entry yet."""

    kind: ClassVar[str] = "passes"
    at: Place
    curve: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with one more guide place, in the order the line passes them."""
        if self.curve is None:
            return edited(worksheet, lambda tables: _list(tables, "curves").append({"through": [list(self.at)]}))
        entry = _entry_number(worksheet.curves, self.curve, "curve")
        rising = worksheet.value is not None and worksheet.value.quantity != "time"

        def along(place: Place) -> float:
            return place[0] - place[1] if rising else place[0] + place[1]

        if not entry.through:
            raise InputError(f"Curve {self.curve + 1} is typed from a table and passes no place of the sheet")
        places = sorted({*entry.through, self.at}, key=along)
        return _with_fields(worksheet, "curves", self.curve, {"through": [list(place) for place in places]})

    @property
    def words(self) -> str:
        """What the step is called."""
        return "A new line" if self.curve is None else f"Line {self.curve + 1} passes here"


@dataclass(frozen=True, kw_only=True, slots=True)
class Avoid:
    """What lies in a rectangle is not this line; with ``curve`` None none of the lines."""

    kind: ClassVar[str] = "avoid"
    box: Box
    curve: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the rectangle left out of one or all traced lines."""
        if self.curve is not None:
            _entry_number(worksheet.curves, self.curve, "curve")
        chosen = [
            index
            for index, entry in enumerate(worksheet.curves)
            if entry.through and self.curve in (None, index) and self.box not in entry.avoid
        ]
        if not chosen:
            raise InputError("There is no traced line to leave this out of", "", "Click a line first")
        for index in chosen:
            boxes = [list(box) for box in (*worksheet.curves[index].avoid, self.box)]
            worksheet = _with_fields(worksheet, "curves", index, {"avoid": boxes})
        return worksheet

    @property
    def words(self) -> str:
        """What the step is called."""
        return "Left out for all lines" if self.curve is None else f"Left out of line {self.curve + 1}"


@dataclass(frozen=True, kw_only=True, slots=True)
class SetCurve:
    """Keys of a curve's table; null takes one out. With ``curve`` None a new entry."""

    kind: ClassVar[str] = "set-curve"
    fields: Mapping[str, Any]
    curve: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the keys set."""
        return _with_fields(worksheet, "curves", self.curve, self.fields)

    @property
    def words(self) -> str:
        """What the step is called."""
        which = "A new line" if self.curve is None else f"Line {self.curve + 1}"
        return f"{which}: {_listed(self.fields)}"


@dataclass(frozen=True, kw_only=True, slots=True)
class RemoveCurve:
    """Strike an entry out."""

    kind: ClassVar[str] = "remove-curve"
    curve: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet without it."""
        _entry_number(worksheet.curves, self.curve, "curve")
        return edited(worksheet, lambda tables: _list(tables, "curves").pop(self.curve) and None)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Line {self.curve + 1} struck out"


@dataclass(frozen=True, kw_only=True, slots=True)
class SetMark:
    """A place on an axis has a value: in the axis's unit, or with its own as in ``2 kA`` or ``30 ms``."""

    kind: ClassVar[str] = "mark"
    axis: AxisName
    at: Place
    value: float | str

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with one more mark."""
        mark = {"at": list(self.at), **_number_and_unit(self.value)}
        return _with_marks(worksheet, self.axis, lambda marks: marks.append(mark))

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Mark {self.value} on the {_axis_words(self.axis)} axis"


@dataclass(frozen=True, kw_only=True, slots=True)
class MoveMark:
    """A mark lies elsewhere, or has another value."""

    kind: ClassVar[str] = "move-mark"
    axis: AxisName
    index: int
    at: Place | None = None
    value: float | str | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the mark moved."""

        def move(marks: list[Tables]) -> None:
            mark = _entry_number(marks, self.index, "mark")
            if self.at is not None:
                mark["at"] = list(self.at)
            if self.value is not None:
                mark.pop("unit", None)
                mark.update(_number_and_unit(self.value))

        return _with_marks(worksheet, self.axis, move)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Mark {self.index + 1} of the {_axis_words(self.axis)} axis moved"


@dataclass(frozen=True, kw_only=True, slots=True)
class RemoveMark:
    """A mark is struck out."""

    kind: ClassVar[str] = "remove-mark"
    axis: AxisName
    index: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet without the mark."""

        def remove(marks: list[Tables]) -> None:
            _entry_number(marks, self.index, "mark")
            marks.pop(self.index)

        return _with_marks(worksheet, self.axis, remove)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Mark {self.index + 1} of the {_axis_words(self.axis)} axis struck out"


@dataclass(frozen=True, kw_only=True, slots=True)
class SetAxis:
    """Keys of an axis's table; null takes one out."""

    kind: ClassVar[str] = "set-axis"
    axis: AxisName
    fields: Mapping[str, Any]

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the keys set."""

        def edit(tables: Tables) -> None:
            _merge(_axis_table(tables, self.axis), self.fields)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"The {_axis_words(self.axis)} axis: {_listed(self.fields)}"


@dataclass(frozen=True, kw_only=True, slots=True)
class SetDevice:
    """Keys of a device's table; null takes one out. With ``device`` None a new device."""

    kind: ClassVar[str] = "set-device"
    fields: Mapping[str, Any]
    device: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the keys set; curves follow a device that gets another key."""
        return _with_fields(worksheet, "devices", self.device, self.fields, rename=True)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"{'A new device' if self.device is None else 'The device'}: {_listed(self.fields)}"


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
            said = _number_and_unit(value)
            value = said["value"] * unit_factor("current", said.get("unit", "A"))
        return _with_fields(worksheet, "devices", self.device, {self.name: value})

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
        _entry_number(worksheet.devices, self.device, "device")
        return edited(worksheet, lambda tables: _list(tables, "devices").pop(self.device) and None)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Device {self.device + 1} struck out"


@dataclass(frozen=True, kw_only=True, slots=True)
class Accept:
    """A doubt was looked at and is accepted, by whom and why."""

    kind: ClassVar[str] = "accept"
    code: str
    reason: str
    name: str
    at: Place | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with the acceptance."""
        if not self.reason.strip() or not self.name.strip():
            raise InputError("To accept a doubt needs a reason and a name", "", "Say why, and who says so")
        entry: Tables = {"code": self.code, "reason": self.reason, "name": self.name}
        if self.at is not None:
            entry["place"] = list(self.at)
        return edited(worksheet, lambda tables: _list(tables, "accepted").append(entry))

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Accepted: {self.reason}"


@dataclass(frozen=True, kw_only=True, slots=True)
class ChoosePlot:
    """Another plot of the page is read; what was said about the first does not hold there."""

    kind: ClassVar[str] = "plot"
    plot: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet of that plot."""

        def edit(tables: Tables) -> None:
            _sheet_table(tables)["plot"] = self.plot
            for name in ("axes", "curves", "accepted"):
                tables.pop(name, None)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Plot {self.plot}"


@dataclass(frozen=True, kw_only=True, slots=True)
class ChoosePage:
    """Another page of the file is read; what was said about the first does not hold there."""

    kind: ClassVar[str] = "page"
    page: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet of that page."""

        def edit(tables: Tables) -> None:
            _sheet_table(tables)["page"] = self.page
            for name in ("axes", "curves", "accepted"):
                tables.pop(name, None)
            tables["sheet"].pop("plot", None)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Page {self.page}"


Correction: TypeAlias = (
    Passes
    | Avoid
    | SetCurve
    | RemoveCurve
    | SetMark
    | MoveMark
    | RemoveMark
    | SetAxis
    | SetDevice
    | FillDevice
    | RemoveDevice
    | Accept
    | ChoosePlot
    | ChoosePage
)
"""Everything a person can say in one step."""


def _sheet_table(tables: Tables) -> Tables:
    if "sheet" not in tables:
        raise InputError("The worksheet has no sheet: its points are typed")
    table: Tables = tables["sheet"]
    return table


def _list(tables: Tables, name: str) -> list[Any]:
    entries: list[Any] = tables.setdefault(name, [])
    return entries


def _entry_number(entries: Any, index: int, what: str) -> Any:
    if not 0 <= index < len(entries):
        raise InputError(f"There is no {what} {index + 1}", f"There are {len(entries)}", "Look at the newest state")
    return entries[index]


def _merge(table: Tables, fields: Mapping[str, Any]) -> None:
    for key, value in fields.items():
        if value is None:
            table.pop(key, None)
        else:
            table[key] = value


def _with_fields(
    worksheet: Worksheet,
    name: Literal["curves", "devices"],
    index: int | None,
    fields: Mapping[str, Any],
    *,
    rename: bool = False,
) -> Worksheet:
    """The worksheet with keys set in one table of a list, or in a new one."""

    def edit(tables: Tables) -> None:
        entries = _list(tables, name)
        if index is None:
            entries.append({})
        table = entries[-1] if index is None else _entry_number(entries, index, name.removesuffix("s"))
        before = table.get("key")
        _merge(table, fields)
        if rename and before is not None and table.get("key") != before:
            _rename(tables, before, table.get("key"))

    return edited(worksheet, edit)


def _rename(tables: Tables, before: str, after: Any) -> None:
    """Let curves follow a device to its new key."""
    for curve in tables.get("curves", []):
        if curve.get("device") == before:
            curve["device"] = after
        if before in curve.get("devices", []):
            curve["devices"] = [after if key == before else key for key in curve["devices"]]


def _axis_table(tables: Tables, axis: AxisName) -> Tables:
    """The table of an axis, made where there is none; ``value`` is the second axis, whatever it counts."""
    axes = tables.setdefault("axes", {})
    name = axis if axis != "value" else next((each for each in SECOND if each in axes), "time")
    table: Tables = axes.setdefault(name, {})
    return table


def _with_marks(worksheet: Worksheet, axis: AxisName, edit: Callable[[list[Tables]], None]) -> Worksheet:
    return edited(worksheet, lambda tables: edit(_list(_axis_table(tables, axis), "marks")))


def _number_and_unit(value: float | str) -> Tables:
    """A mark's value as the worksheet says it."""
    if not isinstance(value, str):
        return {"value": value}
    found = NUMBER_AND_UNIT.fullmatch(value)
    try:
        number = float(found[1]) if found else None
    except ValueError:
        number = None
    if found is None or number is None:
        raise InputError(f"'{value}' is no value", "A number, or one with its unit, such as 2 kA or 30 ms")
    return {"value": number, "unit": found[2]} if found[2] else {"value": number}


def _axis_words(axis: AxisName) -> str:
    return {"value": "second", "let_through": "let-through"}.get(axis, axis)


def _listed(fields: Mapping[str, Any]) -> str:
    return ", ".join(f"{key} {'taken out' if value is None else value}" for key, value in fields.items()) or "as it was"
