"""A reading as the JSON object other programs take, format 1: plain lists, null for what is not known."""

import json
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import asdict
from typing import Any, TypeAlias

import numpy as np

from curvelab.reading.fit_json import fit_json
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, Axis, Mark
from curvelab.records.band import bands_of
from curvelab.records.curve import Curve, Part
from curvelab.records.finding import finding_json
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.sheet import Sheet
from curvelab.records.warning import Acceptance, ReadingWarning
from curvelab.records.worksheet import SheetEntry

Json: TypeAlias = dict[str, Any]

FORMAT = 1
PROJECTIVE = tuple(f"h{index}" for index in range(8))


def reading_json(reading: Reading) -> Json:
    """The reading's sheet, axes, curves, bands, findings and warnings, always with the same keys in the same order.

    ``sheet`` and ``axes`` are null for typed points. Currents are in the axis's base, times in s, let-through in A2s,
    peaks in A; uncertainties are relative.
    """
    return {
        "format": FORMAT,
        "program_version": reading.program_version,
        "sheet": _sheet(reading.sheet, reading.worksheet.sheet) if reading.sheet else None,
        "axes": _axes(reading.axes) if reading.axes else None,
        "curves": [_curve(curve) for curve in reading.curves],
        "bands": list(_bands(reading)),
        "findings": [finding_json(finding) for finding in reading.findings],
        "warnings": [_warning(warning) for warning in reading.warnings],
    }


def numbers(values: Floats) -> list[float | None]:
    """A list with null for what is not a finite number."""
    array = np.asarray(values, dtype=np.float64)
    told: list[float | None] = array.tolist()
    for index in np.flatnonzero(~np.isfinite(array)):
        told[index] = None
    return told


def _sheet(sheet: Sheet, entry: SheetEntry | None) -> Json:
    return {
        "file": sheet.file,
        "sha256": sheet.sha256,
        "page": sheet.page,
        "plot": (entry.plot if entry else None) or 1,
        "width": sheet.width,
        "height": sheet.height,
        "unit": sheet.unit,
    }


def _mark(mark: Mark) -> Json:
    return {
        "at": list(mark.at),
        "value": mark.value,
        "unit": mark.unit,
        "from": mark.origin,
        "residual": mark.residual,
    }


def _axis(axis: Axis, axes: Axes) -> Json:
    residuals = [mark.residual for mark in axis.marks if mark.residual is not None]
    own_rms = float(np.sqrt(np.mean(np.square(residuals)))) if residuals else axes.mark_residual_rms
    return {
        "scale": axis.scale,
        "unit": axis.unit,
        "factor": axis.factor,
        "base": axis.base,
        "direction": axis.direction,
        "marks": [_mark(mark) for mark in axis.marks],
        "mark_residual_rms": numbers(np.array([own_rms]))[0],
    }


def _axes(axes: Axes) -> Json:
    plane = axes.map
    warp = [f"{name}_x{i}y{j}" for name in ("current", axes.value.quantity) for i, j in plane.powers]
    return {
        "current": _axis(axes.current, axes),
        axes.value.quantity: _axis(axes.value, axes),
        "automatic": axes.automatic,
        "frame": list(axes.frame),
        "grid_residual_rms": axes.grid_residual_rms,
        "map": {
            "centre": plane.centre.tolist(),
            "reach": plane.reach,
            "projective": plane.projective.tolist(),
            "powers": [list(power) for power in plane.powers],
            "warp": plane.warp.tolist(),
        },
        "covariance": {"parameters": [*PROJECTIVE, *warp], "matrix": [numbers(row) for row in plane.covariance]},
    }


def _curve(read: ReadCurve) -> Json:
    curve, trace, quantity = read.curve, read.trace, read.curve.quantity
    places = trace.places if trace else np.full((read.current.size, 2), np.nan)
    return {
        "edge": curve.edge,
        "meaning": curve.meaning,
        "element": curve.element,
        "device": read.devices[0] if read.devices else None,
        "devices": list(read.devices),
        "label": read.label,
        "colour": "#{:02x}{:02x}{:02x}".format(*trace.colour) if trace and trace.colour else None,
        "from": trace.origin if trace else "typed",
        "confidence": trace.confidence if trace else 1.0,
        "points": {
            "x": numbers(places[:, 0]),
            "y": numbers(places[:, 1]),
            "current": numbers(read.current),
            quantity: numbers(read.value),
            "sd_current": numbers(read.sd_current),
            f"sd_{quantity}": numbers(read.sd_value),
        },
        "gaps": [{"from": list(gap.start), "to": list(gap.end)} for gap in (trace.gaps if trace else ())],
        "fit": fit_json(read.fit) if read.fit else None,
    }


def _part(part: Part, quantity: str) -> Json:
    return {
        "current": numbers(part.current),
        quantity: numbers(part.value),
        "sd_current": numbers(part.sd_current),
        f"sd_{quantity}": numbers(part.sd_value),
    }


def _edge(curve: Curve | None) -> Json | None:
    if curve is None:
        return None
    return {
        "meaning": curve.meaning,
        "basis": curve.basis,
        "leaves_top": curve.leaves_top,
        "parts": [_part(part, curve.quantity) for part in curve.parts],
    }


def _bands(reading: Reading) -> Iterable[Json]:
    owners: list[tuple[str | None, Sequence[Curve]]] = [
        (device.nameplate.key, device.curves) for device in reading.devices
    ] or [(None, [read.curve for read in reading.curves])]
    for key, curves in owners:
        yield from bands_json(key, curves)


def bands_json(key: str | None, curves: Iterable[Curve]) -> Iterable[Json]:
    """The bands that a device's curves make, as in the reading's list."""
    for band in bands_of(curves):
        yield {
            "device": key,
            "element": band.element,
            "base": band.base,
            "start": band.conditions.start,
            "conditions": asdict(band.conditions),
            "at": dict(sorted(band.at.items())),
            "fast": _edge(band.fast),
            "slow": _edge(band.slow),
            "mean": _edge(band.mean),
        }


def _acceptance(acceptance: Acceptance) -> Json:
    return {
        "code": acceptance.code,
        "place": list(acceptance.place) if acceptance.place else None,
        "reason": acceptance.reason,
        "name": acceptance.name,
    }


def _warning(warning: ReadingWarning) -> Json:
    return {
        "code": warning.code,
        "text": warning.text,
        "at": list(warning.at) if warning.at else None,
        "accepted": _acceptance(warning.accepted) if warning.accepted else None,
    }


def json_text(value: Any) -> str:
    """JSON as text, the same for the same value: shortest exact numbers, keys in the order given.

    Raises
    ------
    ValueError
        A number is not finite: JSON has none such.
    """
    return "".join(_pieces(value, "")) + "\n"


def _is_flat(value: Any) -> bool:
    return isinstance(value, list) and not any(isinstance(item, dict | list) for item in value)


def _is_short(value: Any) -> bool:
    """Whether it reads well within a line: a single value, a place or a box."""
    return not isinstance(value, dict | list) or (_is_flat(value) and len(value) <= 4)


def _on_one_line(value: Any) -> bool:
    if isinstance(value, dict):
        return len(value) <= 5 and all(map(_is_short, value.values()))
    return not isinstance(value, list) or _is_flat(value) or all(isinstance(i, list) and _is_short(i) for i in value)


def _pieces(value: Any, indent: str) -> Iterator[str]:
    if _on_one_line(value):
        yield json.dumps(value, ensure_ascii=False, allow_nan=False)
        return
    deeper = indent + "  "
    opening, closing = "{}" if isinstance(value, dict) else "[]"
    yield opening
    items = value.items() if isinstance(value, dict) else ((None, item) for item in value)
    for index, (key, item) in enumerate(items):
        yield ",\n" if index else "\n"
        yield deeper if key is None else f"{deeper}{json.dumps(key, ensure_ascii=False)}: "
        yield from _pieces(item, deeper)
    yield f"\n{indent}{closing}"
