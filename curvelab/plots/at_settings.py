"""An adjustable device as it is drawn: its elements combined at its settings, in amperes."""

from collections.abc import Iterator
from dataclasses import replace
from typing import cast

import numpy as np

from curvelab.devices.device import Device
from curvelab.records.answer import EdgeAnswer
from curvelab.records.arrays import Floats
from curvelab.records.curve import COVERAGE_FACTOR, Basis, Curve, Edge, Part
from curvelab.records.device import DeviceRecord

STEP = 1e-9
"""Relative distance at which both sides of a vertical stretch are asked."""
APART = 1.02
"""Ratio of neighbouring currents at most."""
EDGES: tuple[Edge, ...] = ("fast", "slow", "mean")


def drawn_record(device: Device) -> DeviceRecord:
    """What is stored where the device is not adjustable or has no settings; else its lines at the settings.

    Raises
    ------
    DeviceError
        Settings that its curves need are missing.
    """
    if not (device.nameplate.settings and device.settings):
        return device.record
    current = _currents(device)
    times = device.trip_time(current)
    curves = [_curve(edge, getattr(times, edge), current) for edge in EDGES if getattr(times, edge) is not None]
    return replace(device.record, curves=tuple(curve for curve in curves if curve.parts))


def _currents(device: Device) -> Floats:
    bends = device.bends_a()
    count = int(np.ceil(np.log(bends[-1] / bends[0]) / np.log(APART))) + 1
    return np.unique(
        np.concatenate([bends * (1 - STEP), bends, bends * (1 + STEP), np.geomspace(bends[0], bends[-1], count)])
    )


def _curve(edge: Edge, answer: EdgeAnswer, current: Floats) -> Curve:
    return Curve(
        element="whole",
        edge=edge,
        meaning=answer.meaning,
        base="A",
        parts=tuple(_parts(answer, current)),
        basis=cast(Basis, answer.basis),
    )


def _parts(answer: EdgeAnswer, current: Floats) -> Iterator[Part]:
    """The stretches along which the edge has a value, its interval as an uncertainty of the time."""
    covered = np.asarray(answer.status) == "value"
    sd_value = (np.log(answer.upper) - np.log(answer.lower)) / (2 * COVERAGE_FACTOR)
    unknown = np.full(current.shape, np.nan)
    for run in np.split(np.arange(current.size), np.flatnonzero(np.diff(covered)) + 1):
        if covered[run[0]] and run.size > 1:
            columns = (current, np.asarray(answer.value), unknown, np.asarray(sd_value), unknown)
            values = [column[run] for column in columns]
            yield Part(
                current=values[0], value=values[1], sd_current=values[2], sd_value=values[3], sd_common=values[4]
            )
