"""From what a worksheet says of a device or a series, and its curves, to the records that are stored."""

from collections.abc import Mapping, Sequence
from dataclasses import replace

import numpy as np

from curvelab.devices.nameplate import checked_nameplate, doubts_about
from curvelab.devices.tolerance import edges_of_mean
from curvelab.errors import DeviceError
from curvelab.records.curve import Curve
from curvelab.records.device import DeviceRecord, Nameplate, Tolerance
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import DeviceEntry

_RATED = ("overload", "delayed", "instantaneous", "whole")
"""Elements whose currents go with the rated current; others may have the same amperes in all ratings."""


def device_records(
    entry: DeviceEntry, keys: Sequence[str], curves: Mapping[str, Sequence[Curve]]
) -> tuple[tuple[DeviceRecord, ...], tuple[ReadingWarning, ...]]:
    """The devices of one entry with their curves, and what is doubtful about them.

    Parameters
    ----------
    entry : DeviceEntry
        One device, or with ratings a series: then every rating has the same band in its base.
    keys : sequence of str
        The key of each device the entry stores, in the order of its ratings.
    curves : mapping
        Device key -> its curves.

    Raises
    ------
    DeviceError
        The nameplate, a tolerance or a curve cannot be.
    """
    plates = _nameplates(entry, keys)
    if len(plates) > 1:
        _refuse_amperes(entry, [curve for plate in plates for curve in curves.get(plate.key, ())])
    records = tuple(_record(checked_nameplate(plate), entry.tolerance, curves.get(plate.key, ())) for plate in plates)
    return records, tuple(doubt for plate in plates for doubt in doubts_about(plate))


def _nameplates(entry: DeviceEntry, keys: Sequence[str]) -> tuple[Nameplate, ...]:
    if not entry.ratings:
        return (entry.nameplate,)
    return tuple(
        replace(entry.nameplate, key=key, rated_current_a=rating)
        for key, rating in zip(keys, entry.ratings, strict=True)
    )


def _refuse_amperes(entry: DeviceEntry, curves: Sequence[Curve]) -> None:
    """A line in amperes is that of one rating: what another rating does cannot be told from it."""
    drawn = next((curve for curve in curves if curve.base == "A" and curve.element in _RATED), None)
    if drawn is not None:
        ratings = ", ".join(f"{rating:g}" for rating in entry.ratings)
        raise DeviceError(
            f"The {drawn.edge} edge of element '{drawn.element}' is drawn in amperes, for ratings {ratings} A alike",
            "A series has curves in multiples, such as xIn",
            "Give each printed rating its own device and its own line; ratings between them are not known",
        )


def _record(plate: Nameplate, tolerance: Tolerance | None, curves: Sequence[Curve]) -> DeviceRecord:
    for curve in curves:
        _check_curve(plate, curve)
    _refuse_twins(plate, curves)
    edges = _declared_edges(curves, tolerance) if tolerance is not None else ()
    return DeviceRecord(nameplate=plate, curves=(*curves, *edges))


def _declared_edges(curves: Sequence[Curve], tolerance: Tolerance) -> tuple[Curve, ...]:
    """Edges of the mean lines that have none of their own."""
    held = {_line(curve) for curve in curves}
    derived = (edge for mean in curves if mean.edge == "mean" for edge in edges_of_mean(mean, tolerance))
    return tuple(edge for edge in derived if _line(edge) not in held)


def _line(curve: Curve) -> tuple[object, ...]:
    """What only one curve of a device may be: a pre-arcing and an operating line may stand side by side."""
    return (curve.meaning, *curve.identity)


def _check_curve(plate: Nameplate, curve: Curve) -> None:
    place = f"The {curve.edge} edge of element '{curve.element}' of '{plate.key}'"
    if not curve.parts or any(part.current.size == 0 for part in curve.parts):
        raise DeviceError(f"{place} has no points", "At least one point")
    for part in curve.parts:
        numbers = np.concatenate((part.current, part.value))
        if not (np.isfinite(numbers) & (numbers > 0)).all():
            raise DeviceError(f"{place} has a point that is not positive", "Positive currents and times")
        if (np.diff(part.current) < 0).any():
            raise DeviceError(f"{place} goes back in current", "Points in order of current")
        if curve.quantity == "time" and (np.diff(part.value) > 0).any():
            late = int(np.argmax(np.diff(part.value) > 0)) + 1
            raise DeviceError(
                f"{place} has a longer time at {part.current[late]:g} {curve.base} than before it",
                "Times never rise with current",
            )


def _refuse_twins(plate: Nameplate, curves: Sequence[Curve]) -> None:
    seen: set[tuple[object, ...]] = set()
    for curve in curves:
        if _line(curve) in seen:
            raise DeviceError(
                f"'{plate.key}' has two {curve.edge} edges of element '{curve.element}' for the same conditions",
                "One line for each element, edge, meaning, conditions and settings",
                "Say what differs: element, meaning, at, start, voltage_v",
            )
        seen.add(_line(curve))
