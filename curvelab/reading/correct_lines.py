"""What a person says about lines: where they pass, what is not theirs, which limit they are."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, ClassVar

from curvelab.errors import InputError
from curvelab.reading.tables import edited, entries_of, listed, numbered, with_fields
from curvelab.records.trace import Place
from curvelab.records.worksheet import Box, Worksheet


@dataclass(frozen=True, kw_only=True, slots=True)
class Passes:
    """A line passes a place: the one of an entry, or with ``curve`` None one that has no entry yet."""

    kind: ClassVar[str] = "passes"
    at: Place
    curve: int | None = None

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet with one more guide place, in the order the line passes them."""
        if self.curve is None:
            return edited(worksheet, lambda tables: entries_of(tables, "curves").append({"through": [list(self.at)]}))
        entry = numbered(worksheet.curves, self.curve, "curve")
        rising = worksheet.value is not None and worksheet.value.quantity != "time"

        def along(place: Place) -> float:
            return place[0] - place[1] if rising else place[0] + place[1]

        if not entry.through:
            raise InputError(f"Curve {self.curve + 1} is typed from a table and passes no place of the sheet")
        places = sorted({*entry.through, self.at}, key=along)
        return with_fields(worksheet, "curves", self.curve, {"through": [list(place) for place in places]})

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
            numbered(worksheet.curves, self.curve, "curve")
        chosen = [
            index
            for index, entry in enumerate(worksheet.curves)
            if entry.through and self.curve in (None, index) and self.box not in entry.avoid
        ]
        if not chosen:
            raise InputError("There is no traced line to leave this out of", "", "Click a line first")
        for index in chosen:
            boxes = [list(box) for box in (*worksheet.curves[index].avoid, self.box)]
            worksheet = with_fields(worksheet, "curves", index, {"avoid": boxes})
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
        return with_fields(worksheet, "curves", self.curve, self.fields)

    @property
    def words(self) -> str:
        """What the step is called."""
        which = "A new line" if self.curve is None else f"Line {self.curve + 1}"
        return f"{which}: {listed(self.fields)}"


@dataclass(frozen=True, kw_only=True, slots=True)
class RemoveCurve:
    """Strike an entry out."""

    kind: ClassVar[str] = "remove-curve"
    curve: int

    def made(self, worksheet: Worksheet) -> Worksheet:
        """The worksheet without it."""
        numbered(worksheet.curves, self.curve, "curve")
        return edited(worksheet, lambda tables: entries_of(tables, "curves").pop(self.curve) and None)

    @property
    def words(self) -> str:
        """What the step is called."""
        return f"Line {self.curve + 1} struck out"
