"""Refuses a device that could not be trusted once stored, before any file is touched."""

import re
from collections.abc import Iterable

import numpy as np

from curvelab.errors import DeviceError
from curvelab.records.curve import EDGES, ELEMENTS, MEANINGS, Curve, Part
from curvelab.records.device import KINDS, DeviceRecord
from curvelab.units import BASES, QUANTITIES

_KEY = re.compile(r"[A-Za-z0-9_-]{1,64}")


def refuse_unsound(record: DeviceRecord) -> None:
    """Check key, kind and every curve.

    Raises
    ------
    DeviceError
        A word is unknown, two curves claim one place, or points are out of order or not positive.
    """
    plate = record.nameplate
    if not _KEY.fullmatch(plate.key):
        raise DeviceError(
            f"'{plate.key}' is no device key", "A key is 1 to 64 of letters, digits, '-', '_'", "Give another key"
        )
    _refuse_unknown(f"{plate.key}: kind", plate.kind, KINDS)
    refuse_twice(plate.key, record.curves)
    for curve in record.curves:
        refuse_unsound_curve(f"{plate.key}, {curve.element} {curve.edge}", curve)


def refuse_twice(key: str, curves: Iterable[Curve]) -> None:
    """Refuse two curves that claim one place."""
    seen: set[object] = set()
    for curve in curves:
        if (curve.identity, curve.meaning) in seen:
            raise DeviceError(
                f"{key}, {curve.element} {curve.edge}: two curves of the same element, edge, meaning and conditions",
                "Each line is stored once",
                "Remove one, or state how their conditions differ",
            )
        seen.add((curve.identity, curve.meaning))


def refuse_unsound_curve(name: str, curve: Curve) -> None:
    """Refuse a curve with an unknown word, or with points out of order or not positive."""
    _refuse_unknown(f"{name}: element", curve.element, ELEMENTS)
    _refuse_unknown(f"{name}: edge", curve.edge, EDGES)
    _refuse_unknown(f"{name}: quantity", curve.quantity, QUANTITIES)
    _refuse_unknown(f"{name}: base", curve.base, BASES)
    if curve.meaning is not None:
        _refuse_unknown(f"{name}: meaning", curve.meaning, MEANINGS)
    if not curve.parts:
        raise DeviceError(f"{name}: the curve has no points", "At least one part with points is needed")
    for number, part in enumerate(curve.parts, start=1):
        _refuse_part(f"{name}, part {number}", part, falling=curve.quantity == "time")


def _refuse_part(name: str, part: Part, falling: bool) -> None:
    arrays = (part.current, part.value, part.sd_current, part.sd_value, part.sd_common)
    if part.current.ndim != 1 or part.current.size == 0 or any(array.shape != part.current.shape for array in arrays):
        raise DeviceError(f"{name}: its columns differ in length or are empty")
    for quantity, values in (("current", part.current), ("value", part.value)):
        if values.min() > 0 and values.max() < np.inf:
            continue
        wrong = np.flatnonzero(~(np.isfinite(values) & (values > 0)))
        raise DeviceError(
            f"{name}, point {wrong[0] + 1}: the {quantity} {values[wrong[0]]:g} is not above zero and finite"
        )
    uncertainties = np.stack(arrays[2:])
    if (uncertainties < 0).any() or np.isinf(uncertainties).any():
        raise DeviceError(f"{name}: an uncertainty is negative or infinite", "Unknown uncertainty is NaN")
    _refuse_disorder(name, "current", "falls", part.current[1:] < part.current[:-1])
    if falling:
        _refuse_disorder(name, "time", "rises", part.value[1:] > part.value[:-1])


def _refuse_disorder(name: str, quantity: str, verb: str, wrong: np.ndarray[tuple[int], np.dtype[np.bool_]]) -> None:
    if wrong.any():
        places = np.flatnonzero(wrong)
        raise DeviceError(
            f"{name}: the {quantity} {verb} between points {places[0] + 1} and {places[0] + 2}",
            "Along a part the current never falls and the time never rises",
            "Correct the points, or begin a new part",
        )


def _refuse_unknown(place: str, word: str, known: tuple[str, ...]) -> None:
    if word not in known:
        raise DeviceError(f"{place} '{word}' is not known", f"Known: {', '.join(known)}")
