"""The axes of a worksheet: current, and one of time, let-through or peak."""

from typing import Literal, get_args

from curvelab.errors import WorksheetError
from curvelab.records.axes import Direction, Mark, Scale
from curvelab.records.worksheet import AxisEntry
from curvelab.units import CURRENT_UNITS, VALUE_UNITS
from curvelab.worksheets import keys
from curvelab.worksheets.fields import Table

Quantity = Literal["current", "time", "let_through", "peak"]
SECOND: tuple[Quantity, ...] = ("time", "let_through", "peak")

SCALES: tuple[Scale, ...] = get_args(Scale)
DIRECTIONS: tuple[Direction, ...] = get_args(Direction)


def units_of(quantity: Quantity) -> tuple[str, ...]:
    """The units an axis of this quantity may be printed in."""
    return tuple(CURRENT_UNITS if quantity == "current" else VALUE_UNITS[quantity])


def _mark(table: Table, quantity: Quantity, scale: Scale | None) -> Mark:
    at = table.pair("at", "the mark's place on the sheet: at = [x, y]")
    if at is None:
        raise table.wrong("at", "Expected the mark's place on the sheet: at = [x, y]")
    value = table.needed_number("value")
    if value <= 0 and scale != "linear":
        raise table.wrong("value", "A log axis has only values above 0", "Correct it, or say scale = 'linear'")
    return Mark(at=at, value=value, unit=table.choice("unit", units_of(quantity)))


def _axis(table: Table, quantity: Quantity) -> AxisEntry:
    scale = table.choice("scale", SCALES)
    return AxisEntry(
        quantity=quantity,
        scale=scale,
        unit=table.choice("unit", units_of(quantity)),
        factor=table.positive("factor"),
        direction=table.choice("direction", DIRECTIONS),
        marks=tuple(_mark(each, quantity, scale) for each in table.tables("marks", keys.MARK)),
    )


def read_axes(top: Table, name: str) -> tuple[AxisEntry | None, AxisEntry | None]:
    """The current axis and the second axis, each None where nothing is said of it."""
    if "axes" not in top:
        return None, None
    axes = Table(top.raw("axes"), f"{name}, [axes]", keys.AXES)
    entries: dict[Quantity, AxisEntry] = {}
    for quantity in ("current", *SECOND):
        if quantity in axes:
            entries[quantity] = _axis(Table(axes.raw(quantity), f"{name}, [axes.{quantity}]", keys.AXIS), quantity)
    second = [quantity for quantity in SECOND if quantity in entries]
    if len(second) > 1:
        found = " and ".join(f"[axes.{quantity}]" for quantity in second)
        raise WorksheetError(
            f"{name}, [axes]: {found} are both given", "A plot has one second axis", "Keep the one the sheet shows"
        )
    current, value = entries.get("current"), entries[second[0]] if second else None
    if current and value and current.direction is not None and current.direction == value.direction:
        raise WorksheetError(
            f"{name}, [axes]: current and {second[0]} both run along '{current.direction}'",
            "One axis runs along x, the other along y",
        )
    return current, value
