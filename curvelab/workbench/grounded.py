"""Lets a correction of something that was read, not said, start from what was read."""

from dataclasses import replace

from curvelab.reading.complete import completed
from curvelab.reading.correct_axes import MoveMark, RemoveMark, SetMark
from curvelab.reading.correct_devices import FillDevice, RemoveDevice, SetDevice
from curvelab.reading.correct_lines import Avoid, Passes, RemoveCurve, SetCurve
from curvelab.reading.corrections import Correction
from curvelab.records.reading import Reading
from curvelab.records.worksheet import AxisEntry, Worksheet

FEWEST_MARKS = 2
"""An axis with fewer was read from the sheet."""


def grounded(worksheet: Worksheet, reading: Reading | None, correction: Correction) -> Worksheet:
    """The worksheet in which the part that is corrected says what the reading found there.

    Everything else stays unsaid, so that doubts about it stay open.
    """
    if reading is None:
        return worksheet
    whole = completed(reading)
    if isinstance(correction, Passes | Avoid | SetCurve | RemoveCurve) and not worksheet.curves:
        devices = worksheet.devices or whole.devices
        return replace(worksheet, document=whole.document, curves=whole.curves, devices=devices)
    if isinstance(correction, SetDevice | FillDevice | RemoveDevice) and not worksheet.devices:
        return replace(worksheet, devices=whole.devices)
    if isinstance(correction, SetMark | MoveMark | RemoveMark):
        if correction.axis == "current":
            return replace(worksheet, current=_said(worksheet.current, whole.current))
        return replace(worksheet, value=_said(worksheet.value, whole.value))
    return worksheet


def _said(entry: AxisEntry | None, found: AxisEntry | None) -> AxisEntry | None:
    return entry if entry is not None and len(entry.marks) >= FEWEST_MARKS else found
