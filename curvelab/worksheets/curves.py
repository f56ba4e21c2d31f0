"""The curves of a worksheet: guide places on the sheet, or points typed from a table."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Literal, get_args

from curvelab.errors import WorksheetError
from curvelab.records.curve import ELEMENTS, MEANINGS, NO_SETTINGS, Conditions, Edge
from curvelab.records.device import Tolerance
from curvelab.records.worksheet import AxisEntry, Box, CurveEntry
from curvelab.units import BASES, CURRENT_UNITS, unit_factor
from curvelab.worksheets import keys
from curvelab.worksheets.fields import Table, as_number, written

EDGE_WORDS: tuple[Edge, ...] = get_args(Edge)
STARTS: tuple[Literal["cold", "hot"], ...] = ("cold", "hot")
TIME_KINDS: tuple[Literal["real", "virtual"], ...] = ("real", "virtual")
SUPPLIES: tuple[Literal["ac", "dc"], ...] = ("ac", "dc")


def read_conditions(table: Table) -> Conditions:
    """What a curve is drawn for; the same keys wherever they stand."""
    return Conditions(
        start=table.choice("start", STARTS),
        time_kind=table.choice("time_kind", TIME_KINDS),
        supply=table.choice("supply", SUPPLIES),
        voltage_v=table.positive("voltage_v"),
        frequency_hz=table.positive("frequency_hz"),
        ambient_c=table.number("ambient_c"),
        poles_loaded=table.count("poles_loaded"),
    )


def read_tolerance(table: Table) -> Tolerance | None:
    """Stated limits about a mean line; None where none is stated."""
    stated = {}
    for key in keys.TOLERANCE:
        limits = table.pair(key, f"the lower and the upper limit: {key} = [-0.1, 0.1]")
        if limits is None:
            continue
        if limits[0] > limits[1]:
            raise table.wrong(key, "Expected the lower limit first")
        if key != "tolerance_time_s" and limits[0] <= -1:
            raise table.wrong(key, "Relative limits lie above -1 (0.1 is 10 %)")
        stated[key.removeprefix("tolerance_")] = limits
    return Tolerance(**stated) if stated else None


def _settings(table: Table) -> Mapping[str, float]:
    value = table.raw("at")
    if value is None:
        return NO_SETTINGS
    if not isinstance(value, Mapping):
        raise table.wrong("at", "Expected settings: at = { ir = 1.0 }")
    numbers = {name: as_number(setting) for name, setting in value.items()}
    for name, number in numbers.items():
        if number is None:
            raise WorksheetError(f"{table.place} at: {name} = {written(value[name])} is not a finite number")
    return MappingProxyType({name: number for name, number in numbers.items() if number is not None})


def _boxes(table: Table) -> tuple[Box, ...]:
    boxes = []
    for x0, y0, x1, y1 in table.rows("avoid", 4, "rectangles: avoid = [[x0, y0, x1, y1]]"):
        if x0 == x1 or y0 == y1:
            raise table.wrong("avoid", "A rectangle needs two different corners: [x0, y0, x1, y1]")
        boxes.append((min(x0, x1), min(y0, y1), max(x0, x1), max(y0, y1)))
    return tuple(boxes)


def _named_devices(table: Table) -> tuple[str, ...]:
    if "device" in table and "devices" in table:
        raise WorksheetError(f"{table.place}: both 'device' and 'devices' are given", "", "Keep one of them")
    return (table.needed_text("device"),) if "device" in table else table.names("devices")


def _printed_factors(current: AxisEntry | None, value: AxisEntry | None) -> tuple[str, float, float]:
    """Base, and the factors that typed numbers take to base units, as the axes print them (else A, s)."""
    unit = (current.unit if current else None) or "A"
    by_current = unit_factor("current", unit) * ((current.factor if current else None) or 1.0)
    by_value = (value.factor if value else None) or 1.0
    if value and value.unit:
        by_value *= unit_factor(value.quantity, value.unit)
    return CURRENT_UNITS[unit][0], by_current, by_value


def _typed(
    table: Table, current: AxisEntry | None, value: AxisEntry | None
) -> tuple[str | None, tuple[tuple[float, float], ...]]:
    """Base and points; where ``base`` is said they are in base units, else in what the worksheet's axes print."""
    base = table.choice("base", BASES)
    points = table.rows("points", 2, "pairs: points = [[current, time], ...]")
    if not points:
        if base is not None:
            raise table.wrong("base", "Only typed points have a base of their own", "Give the axis's unit instead")
        return None, ()
    for index, (at, result) in enumerate(points, start=1):
        if at <= 0 or result <= 0:
            raise WorksheetError(
                f"{table.place}: points {index}: [{at:g}, {result:g}] is not on a log-log plot",
                "Currents and times lie above 0",
            )
    if base is not None:
        return base, tuple((at, result) for at, result in points)
    printed, by_current, by_value = _printed_factors(current, value)
    return printed, tuple((at * by_current, result * by_value) for at, result in points)


def _check_origin(table: Table, *, has_sheet: bool) -> None:
    """A curve is traced or typed, and says enough to be one of them."""
    typed, traced = "points" in table, [key for key in ("through", "colour", "avoid") if key in table]
    if typed and traced:
        raise WorksheetError(
            f"{table.place}: both 'points' and '{traced[0]}' are given",
            "A curve is typed or traced",
            "Make two [[curves]] of it, or drop one of them",
        )
    if not typed and "through" not in traced:
        raise WorksheetError(
            f"{table.place}: nothing says where this curve is",
            "Expected through = [[x, y]], places the line passes",
            "Or type points = [[current, time], ...] with their source",
        )
    if not typed and "source" in table:
        raise table.wrong("source", "Only typed points have a source of their own", "Use [document] for the sheet's")
    if not typed and not has_sheet:
        raise WorksheetError(
            f"{table.place}: there is no [sheet] to trace it on", "", "Name the sheet's file: [sheet] file = '...'"
        )


def read_curve(table: Table, current: AxisEntry | None, value: AxisEntry | None, *, has_sheet: bool) -> CurveEntry:
    """One entry of ``[[curves]]``.

    Parameters
    ----------
    table : Table
        Made with the keys of a curve.
    current, value : AxisEntry or None
        The worksheet's axes: typed points without a ``base`` are in their units.
    has_sheet : bool

    Raises
    ------
    WorksheetError
        Something in it is wrong.
    """
    _check_origin(table, has_sheet=has_sheet)
    base, points = _typed(table, current, value)
    return CurveEntry(
        edge=table.choice("edge", EDGE_WORDS),
        meaning=table.choice("meaning", MEANINGS),
        element=table.choice("element", ELEMENTS),
        devices=_named_devices(table),
        through=tuple((x, y) for x, y in table.rows("through", 2, "places: through = [[x, y], ...]")),
        colour=table.pattern("colour", "#[0-9a-fA-F]{6}", "Expected red, green and blue: colour = '#b02020'"),
        avoid=_boxes(table),
        at=_settings(table),
        conditions=read_conditions(table),
        tolerance=read_tolerance(table),
        points=points,
        base=base,
        source=table.text("source") or "",
    )
