"""The station that gives each curve to its devices."""

from dataclasses import replace

from curvelab.devices.series import device_records
from curvelab.devices.tolerance import checked_tolerance, edges_of_mean
from curvelab.errors import WorksheetError
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord
from curvelab.records.reading import ReadCurve
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import CurveEntry, Worksheet
from curvelab.worksheets.series import device_keys


def owned(worksheet: Worksheet, entry: CurveEntry, number: int) -> CurveEntry:
    """The entry with the device it belongs to: the only one where it names none and says which edge it is.

    Raises
    ------
    WorksheetError
        There are several devices and the entry names none.
    """
    if entry.devices or not worksheet.devices or entry.edge is None:
        return entry
    if len(worksheet.devices) > 1:
        keys = ", ".join(device.nameplate.key for device in worksheet.devices)
        raise WorksheetError(
            f"[[curves]] {number} names no device", f"device = one of: {keys}", "Say which device the line belongs to"
        )
    return replace(entry, devices=(worksheet.devices[0].nameplate.key,))


def assemble(
    worksheet: Worksheet, curves: tuple[ReadCurve, ...]
) -> tuple[tuple[DeviceRecord, ...], tuple[ReadingWarning, ...]]:
    """Every device of the worksheet with the curves that were read for it, and what is doubtful about them."""
    records: list[DeviceRecord] = []
    doubts: list[ReadingWarning] = [_unknown_meaning(read) for read in curves if read.curve.meaning is None]
    for entry in worksheet.devices:
        own = [curve for read in curves if entry.nameplate.key in read.devices for curve in _edges(read)]
        keys = device_keys(entry)
        found, more_doubts = device_records(entry, keys, dict.fromkeys(keys, own))
        records.extend(found)
        doubts.extend(more_doubts)
    return tuple(records), tuple(doubts)


def _edges(read: ReadCurve) -> tuple[Curve, ...]:
    """The curve, and its declared edges where the worksheet states a tolerance for this very line."""
    curve = read.curve
    if read.tolerance is None or curve.edge != "mean":
        return (curve,)
    return (curve, *edges_of_mean(curve, checked_tolerance(read.tolerance, "[[curves]]")))


def _unknown_meaning(read: ReadCurve) -> ReadingWarning:
    device = f" of {', '.join(read.devices)}" if read.devices else ""
    at = (float(read.trace.places[0, 0]), float(read.trace.places[0, 1])) if read.trace else None
    return ReadingWarning(
        code="meaning-unknown",
        text=f"What ends at the {read.curve.edge} edge{device} is not said; set meaning in [[curves]]",
        at=at,
    )
