"""What a worksheet says of the axes, checked: every mark usable, units known, directions at right angles."""

import math
from typing import get_args

from curvelab.axes.marks import pixel_size
from curvelab.errors import AxesError, InputError
from curvelab.records.axes import Axis, Direction, Mark, Scale
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry
from curvelab.units import CURRENT_UNITS, VALUE_UNITS, unit_factor

CLOSEST_MARKS = 2.0
"""Least distance of two marks of one axis along it, in pixels."""

DEFAULT_UNITS = {"current": "A", "time": "s", "let_through": "A2s", "peak": "A"}


def checked_axes(
    sheet: Sheet, current: AxisEntry, value: AxisEntry
) -> tuple[tuple[Axis, Axis], tuple[ReadingWarning, ...]]:
    """Both axes as they will be calibrated, and warnings where something had to be assumed.

    Raises
    ------
    AxesError
        A mark, unit, factor or direction that cannot be used.
    """
    directions = _directions(current, value)
    axes = (_checked_axis(sheet, current, directions[0]), _checked_axis(sheet, value, directions[1]))
    warnings = tuple(_unit_assumed(entry) for entry in (current, value) if entry.unit is None)
    return axes, warnings


def table_name(quantity: str) -> str:
    """The worksheet's name of an axis: ``[axes.time]``."""
    return f"[axes.{quantity}]"


def mark_text(mark: Mark) -> str:
    """A mark as messages name it: ``mark 10 at (412, 1730.5)``."""
    return f"mark {mark.value:g} at ({mark.at[0]:g}, {mark.at[1]:g})"


def _unit_assumed(entry: AxisEntry) -> ReadingWarning:
    unit = DEFAULT_UNITS[entry.quantity]
    text = f"The unit of {table_name(entry.quantity)} is not given and taken as {unit}: give unit in the worksheet."
    return ReadingWarning(code="unit-assumed", text=text)


def _directions(current: AxisEntry, value: AxisEntry) -> tuple[Direction, Direction]:
    known = get_args(Direction)
    for entry in (current, value):
        if entry.direction is not None and entry.direction not in known:
            raise AxesError(
                f"Direction '{entry.direction}' of {table_name(entry.quantity)} is not known",
                "A direction is x or y",
            )
    other: dict[Direction, Direction] = {"x": "y", "y": "x"}
    along = current.direction or (other[value.direction] if value.direction else "x")
    across = value.direction or other[along]
    if along == across:
        raise AxesError(
            f"{table_name(current.quantity)} and {table_name(value.quantity)} both run along {along}",
            "One axis runs along x, the other along y",
            "Change one direction",
        )
    return along, across


def _checked_axis(sheet: Sheet, entry: AxisEntry, direction: Direction) -> Axis:
    name = table_name(entry.quantity)
    if entry.scale is not None and entry.scale not in get_args(Scale):
        raise AxesError(f"Scale '{entry.scale}' of {name} is not known", "A scale is log or linear")
    if entry.factor is not None and not (math.isfinite(entry.factor) and entry.factor > 0):
        raise AxesError(f"Factor {entry.factor:g} of {name} is not usable", "A factor is greater than 0")
    axis = Axis(
        quantity=entry.quantity,
        scale=entry.scale or "log",
        unit=entry.unit or DEFAULT_UNITS[entry.quantity],
        factor=1.0 if entry.factor is None else entry.factor,
        direction=direction,
        marks=entry.marks,
    )
    _check_units(axis)
    if len(axis.marks) < 2:
        raise AxesError(
            f"{name} has {len(axis.marks)} mark{'s' if len(axis.marks) != 1 else ''}",
            "At least two marks are needed on each axis",
            f"Give two places whose {entry.quantity.replace('_', '-')} is printed, "
            "as marks = [{ at = [x, y], value = ... }, ...]",
        )
    for mark in axis.marks:
        _check_mark(sheet, axis, mark)
    _check_pairs(sheet, axis)
    return axis


def _check_units(axis: Axis) -> None:
    known = CURRENT_UNITS if axis.quantity == "current" else VALUE_UNITS[axis.quantity]
    for unit in (axis.unit, *(mark.unit for mark in axis.marks if mark.unit)):
        try:
            unit_factor(axis.quantity, unit)
        except InputError as error:
            raise AxesError(
                f"Unit '{unit}' of {table_name(axis.quantity)} is not known", f"Known units: {', '.join(known)}"
            ) from error
        if axis.quantity == "current" and CURRENT_UNITS[unit][0] != axis.base:
            raise AxesError(
                f"A mark of {table_name('current')} is in {unit}, the axis in {axis.unit}",
                "All marks of one axis count in one base",
            )


def _check_mark(sheet: Sheet, axis: Axis, mark: Mark) -> None:
    name = f"{mark_text(mark)} of {table_name(axis.quantity)}"
    x, y = mark.at
    if not (math.isfinite(x) and math.isfinite(y) and math.isfinite(mark.value)):
        raise AxesError(f"The {name} is not a number", "A place and a value are finite numbers")
    # The first pixel's centre is (0, 0), so that its outer edge is at -0.5.
    edge = 0.5 if sheet.unit == "px" else 0.0
    if not (-edge <= x <= sheet.width - edge and -edge <= y <= sheet.height - edge):
        raise AxesError(f"The {name} lies off the page", f"The page is {sheet.width:g} x {sheet.height:g} {sheet.unit}")
    if axis.scale == "log" and mark.value <= 0:
        raise AxesError(
            f"The {name} has no place on a log axis", "Values on a log axis are greater than 0", "Check scale and value"
        )


def _check_pairs(sheet: Sheet, axis: Axis) -> None:
    index = 0 if axis.direction == "x" else 1
    least = CLOSEST_MARKS * pixel_size(sheet)
    for i, first in enumerate(axis.marks):
        for second in axis.marks[i + 1 :]:
            pair = f"{mark_text(first)} and {mark_text(second)} of {table_name(axis.quantity)}"
            if math.isclose(axis.value_of(first), axis.value_of(second), rel_tol=1e-12):
                raise AxesError(f"{pair} have the same value", "Each mark of an axis has its own value")
            if abs(first.at[index] - second.at[index]) < least:
                raise AxesError(
                    f"{pair} coincide along {axis.direction}",
                    f"Marks of one axis lie at least {least:.3g} {sheet.unit} apart along it",
                )
