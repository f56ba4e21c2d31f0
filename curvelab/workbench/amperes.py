"""What one unit of a base is in A, so that devices counted in different bases go on one pair of axes."""

from collections.abc import Iterable, Mapping
from typing import Any

from curvelab.devices.bases import amperes
from curvelab.errors import DeviceError
from curvelab.records.device import DeviceRecord, Nameplate


def amperes_per_unit(plate: Nameplate, settings: Mapping[str, float | str], base: str) -> float | None:
    """Amperes in one unit of a base; None where the rating or setting it counts in is not known."""
    try:
        return amperes(plate, settings, base)
    except DeviceError:
        return None


def with_amperes(
    bands: Iterable[dict[str, Any]], devices: Iterable[DeviceRecord], settings: Mapping[str, float | str]
) -> list[dict[str, Any]]:
    """Bands as JSON, each with ``amperes_per_unit`` of its base at the settings, else at those it is drawn for."""
    plates = {record.nameplate.key: record.nameplate for record in devices}
    told = []
    for band in bands:
        plate = plates.get(band["device"])
        factor = amperes_per_unit(plate, {**band["at"], **settings}, band["base"]) if plate else None
        told.append({**band, "amperes_per_unit": factor})
    return told
