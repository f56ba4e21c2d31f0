"""Answers of a device as JSON: plain numbers, null for what is not known."""

from collections.abc import Sequence
from dataclasses import asdict
from typing import Any, TypeAlias

import numpy as np

from curvelab.devices.device import Device
from curvelab.records.answer import EdgeAnswer
from curvelab.records.device import Nameplate

Json: TypeAlias = dict[str, Any]

FORMAT = 1


def times_json(device: Device, currents_a: Sequence[float]) -> Json:
    """Times in s at currents in A, edge by edge.

    Raises
    ------
    DeviceError
        A current that cannot be asked, or an adjustable device without its settings.
    """
    times = device.trip_time(np.asarray(currents_a, dtype=np.float64))
    edges = {"fast": times.fast, "slow": times.slow, "mean": times.mean}
    return _answers(device, "current", currents_a, edges)


def currents_json(device: Device, times_s: Sequence[float]) -> Json:
    """Currents in A for times in s: the least that surely trips, the greatest that surely holds; errors as above."""
    currents = device.trip_current(np.asarray(times_s, dtype=np.float64))
    edges = {"trips": currents.trips, "holds": currents.holds, "mean": currents.mean}
    return _answers(device, "time", times_s, edges)


def _answers(device: Device, asked: str, values: Sequence[float], edges: dict[str, EdgeAnswer | None]) -> Json:
    told = {name: edge_json(edge) for name, edge in edges.items()}
    return {
        "format": FORMAT,
        "device": device.key,
        "revision": device.revision,
        "state": device.state,
        "settings": dict(device.settings),
        "base": "A",
        "answers": [
            {asked: value, **{name: edge and edge[k] for name, edge in told.items()}} for k, value in enumerate(values)
        ],
    }


def edge_json(edge: EdgeAnswer | None) -> list[Json] | None:
    """One edge's answer to each thing asked; None where the device has no such line."""
    if edge is None:
        return None
    rows = zip(*(np.ravel(each).tolist() for each in (edge.status, edge.value, edge.lower, edge.upper)), strict=True)
    return [
        {
            "status": status,
            "value": number(value),
            "interval": None if number(lower) is None or number(upper) is None else [lower, upper],
            "basis": edge.basis,
        }
        for status, value, lower, upper in rows
    ]


def number(value: float) -> float | None:
    """The number, None where it is not finite."""
    return float(value) if np.isfinite(value) else None


def nameplate_json(plate: Nameplate) -> Json:
    """Everything that is said on a nameplate; null where it is not said."""
    return asdict(plate)
