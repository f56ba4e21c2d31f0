"""Stored devices as JSON: rows of a list, one device with all that is known of it, its history, its bands."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import asdict
from itertools import groupby
from pathlib import Path, PurePosixPath
from typing import Any

import numpy as np

from curvelab.calculators.cautions import cautions_of
from curvelab.calculators.compare import compare
from curvelab.calculators.comparison_json import comparison_json
from curvelab.calculators.stretches import sides_of
from curvelab.devices.device import Device
from curvelab.library.library import Library
from curvelab.library.search import COLUMNS
from curvelab.reading.as_json import bands_json
from curvelab.records.curve import Curve
from curvelab.records.finding import finding_json
from curvelab.standards.review import review_alone
from curvelab.standards.rules import rules_beside
from curvelab.workbench.amperes import with_amperes
from curvelab.workbench.limits import drawn_limits

Row = Mapping[str, Any]


def listed(library: Library, found: Iterable[Row]) -> list[dict[str, Any]]:
    """Devices that were found, with who stored them and when."""
    rows = list(found)
    every = library.revisions([row["device_key"] for row in rows]) if rows else []
    by_key = {key: list(group) for key, group in groupby(every, key=lambda row: row["device_key"])}
    return [_row(row, by_key[row["device_key"]]) for row in rows]


def _row(row: Row, revisions: Sequence[Row]) -> dict[str, Any]:
    own = next(each for each in revisions if each["revision"] == row["revision"])
    told = {name: value for name, value in row.items() if name != "device_key"}
    return {
        "key": row["device_key"],
        **told,
        "stored_at": own["created_at"],
        "author": own["author"],
        "revisions": len(revisions),
    }


def told(library: Library, key: str, revision: int | None) -> dict[str, Any]:
    """One device with all that is known of it."""
    device = Device(library.record(key, revision))
    revisions = library.history(key)
    own = next(each for each in revisions if each["revision"] == device.revision)
    plate = asdict(device.nameplate)
    findings = review_alone(device, rules_beside(library.path))
    return {
        **_row({name: own[name] for name in COLUMNS}, revisions),
        "is_current": bool(own["is_current"]),
        "reason": own["reason"],
        "program_version": own["program_version"],
        "nameplate": plate,
        "settings": plate["settings"],
        "cautions": [caution.text for caution in cautions_of(device)],
        "curves": [_curve(number, curve) for number, curve in enumerate(device.record.curves, start=1)],
        "findings": [finding_json(each) for each in findings],
        "limits": drawn_limits([device.record], findings),
        "readings": _readings(library, key, device.revision),
    }


def _curve(number: int, curve: Curve) -> dict[str, Any]:
    told = {
        name: getattr(curve, name) for name in ("edge", "meaning", "element", "quantity", "base", "basis", "source")
    }
    sheet = curve.sheet and {"file": curve.sheet.file, "sha256": curve.sheet.sha256, "page": curve.sheet.page}
    return {"id": number, **told, "at": dict(curve.at), "conditions": asdict(curve.conditions), "sheet": sheet}


def _readings(library: Library, key: str, revision: int | None) -> list[dict[str, Any]]:
    """What overlays there are: the sheets that led to a revision, and whether their bytes were kept."""
    listed = []
    for number, stored in enumerate(library.evidence(key, revision).readings, start=1):
        sheet = stored.reading.worksheet.sheet
        listed.append(
            {
                "number": number,
                "file": PurePosixPath(sheet.file).name if sheet else None,
                "page": sheet.page if sheet else None,
                "is_kept": stored.source is not None,
            }
        )
    return listed


def happened(library: Library, key: str) -> list[dict[str, Any]]:
    """What happened to a device's revisions, oldest first; the present state of each stands with it."""
    now = {row["revision"]: row["state"] for row in library.history(key)}
    return [
        {
            "revision": entry.revision,
            "state": entry.state,
            "now": now[entry.revision],
            "when": entry.at,
            "name": entry.name,
            "action": entry.action,
            "reason": entry.reason,
            "note": entry.reason if entry.action == "noted" else "",
            "origin": entry.origin,
        }
        for entry in library.log(key)
    ]


def drawn(device: Device, settings: Mapping[str, float | str]) -> dict[str, Any]:
    """The device's curves gathered into bands, as they were drawn; settings are checked and told with them."""
    device = device.at(**settings)
    curves = device.record.curves
    return {
        "device": device.key,
        "revision": device.revision,
        "state": device.state,
        "settings": dict(device.settings),
        "base": curves[0].base if curves else None,
        "rated_current_a": device.nameplate.rated_current_a,
        "bands": with_amperes(bands_json(device.key, curves), [device.record], device.settings),
    }


def found_of(device: Device, library: Path) -> dict[str, Any]:
    """Findings of a device by the rules that hold beside a library, and their limits."""
    findings = review_alone(device, rules_beside(library))
    return {
        "device": device.key,
        "revision": device.revision,
        "findings": [finding_json(each) for each in findings],
        "limits": drawn_limits([device.record], findings),
    }


def compared(devices: Sequence[Device], currents_a: Sequence[float]) -> dict[str, Any]:
    """Devices side by side: numbers, and who surely clears first stretch by stretch."""
    asked = np.asarray(currents_a, dtype=np.float64) if currents_a else None
    return comparison_json(compare(devices, asked), sides_of(devices))
