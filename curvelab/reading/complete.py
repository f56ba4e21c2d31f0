"""The complete worksheet that repeats a reading: everything used is said in it, ready to be corrected by hand."""

from dataclasses import replace

from curvelab.records.axes import Axis
from curvelab.records.reading import Reading
from curvelab.records.worksheet import AxisEntry, Worksheet


def completed(reading: Reading) -> Worksheet:
    """The reading's worksheet with the file's hash and every key of both axes filled in."""
    worksheet = reading.worksheet
    if reading.sheet is None or reading.axes is None or worksheet.sheet is None:
        return worksheet
    return replace(
        worksheet,
        sheet=replace(worksheet.sheet, sha256=reading.sheet.sha256),
        current=_entry(reading.axes.current),
        value=_entry(reading.axes.value),
    )


def _entry(axis: Axis) -> AxisEntry:
    return AxisEntry(
        quantity=axis.quantity,
        scale=axis.scale,
        unit=axis.unit,
        factor=axis.factor,
        direction=axis.direction,
        marks=tuple(replace(mark, residual=None) for mark in axis.marks),
    )
