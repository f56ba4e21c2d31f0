"""What a person says about axes: marks, scales and units."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, ClassVar, Literal

from curvelab.reading.tables import Tables, edited, entries_of, listed, merge, number_and_unit, numbered
from curvelab.records.trace import Place
from curvelab.records.worksheet import Worksheet

AxisName = Literal["current", "value", "time", "let_through", "peak"]
SECOND = ("time", "let_through", "peak")


@dataclass(frozen=True, kw_only=True, slots=True)
class SetMark:
    """A place on an axis has a value: in the axis's unit, or with its own as in ``2 kA`` or ``30 ms``."""

    kind: ClassVar[str] = "mark"
    axis: AxisName
    at: Place
    value: float | str

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with one more mark."""
        mark = {"at": list(self.at), **number_and_unit(self.value)}
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
            mark = numbered(marks, self.index, "mark")
            if self.at is not None:
                mark["at"] = list(self.at)
            if self.value is not None:
                mark.pop("unit", None)
                mark.update(number_and_unit(self.value))

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
            numbered(marks, self.index, "mark")
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
            merge(_axis_table(tables, self.axis), self.fields)

        return edited(worksheet, edit)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"The {_axis_words(self.axis)} axis: {listed(self.fields)}"


def _axis_table(tables: Tables, axis: AxisName) -> Tables:
    """The table of an axis, made where there is none; ``value`` is the second axis, whatever it counts."""
    axes = tables.setdefault("axes", {})
    name = axis if axis != "value" else next((each for each in SECOND if each in axes), "time")
    table: Tables = axes.setdefault(name, {})
    return table


def _with_marks(worksheet: Worksheet, axis: AxisName, edit: Callable[[list[Tables]], None]) -> Worksheet:
    return edited(worksheet, lambda tables: edit(entries_of(_axis_table(tables, axis), "marks")))


def _axis_words(axis: AxisName) -> str:
    return {"value": "second", "let_through": "let-through"}.get(axis, axis)
