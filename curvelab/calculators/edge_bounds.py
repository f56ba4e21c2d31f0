"""What an edge says of times beside where it is drawn: times never rise with current, so that neighbours bound them."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from curvelab.devices.device import Device
from curvelab.devices.meaning import TOTAL
from curvelab.devices.question import Path
from curvelab.records.answer import EdgeAnswer, TripTimes
from curvelab.records.arrays import Floats

_STEP = 1e-9
_SILENT = ("above_breaking", "not_seen")


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Between:
    """Times in s lie from ``least`` (0 where nothing is known) to ``most`` (infinite likewise); drawn, both are one."""

    least: Floats
    most: Floats


class EdgeBounds:
    """The fast or the slow edge of a device, known at its bends.

    The last time of a fast edge bounds all to its right. That of a slow edge, which must be one until the current is
    off, does so only up to the breaking capacity, as the device's own answers say.
    """

    def __init__(self, device: Device, edge: Literal["fast", "slow"], path: Path) -> None:
        self._edge = edge
        bends = device.bends_a(path)
        self._at = np.unique(np.concatenate((bends * (1 - _STEP), bends, bends * (1 + _STEP))))
        least, most = _told(self.answer(device.trip_time(self._at, path=path)), self._at.size)
        # From the right the least time known so far, from the left the longest one still possible.
        self._least = np.append(np.maximum.accumulate(least[::-1])[::-1], 0.0)
        self._most = np.concatenate(([np.inf], np.minimum.accumulate(most)))
        if edge == "slow":
            self._most[-1] = np.inf

    def answer(self, times: TripTimes) -> EdgeAnswer | None:
        """The edge's own answer; None where it does not say when the current is off."""
        if self._edge == "fast":
            return times.fast
        return times.slow if times.slow is not None and times.slow.meaning in TOTAL else None

    def between(self, current_a: Floats, times: TripTimes) -> Between:
        """The bounds at currents in A, given the device's own times there."""
        answer = self.answer(times)
        least, most = _told(answer, current_a.size)
        place = self._at.searchsorted(current_a)
        silent = np.zeros(current_a.size, dtype=bool) if answer is None else np.isin(np.asarray(answer.status), _SILENT)
        return Between(
            least=np.where(silent, 0.0, np.maximum(least, self._least[place])),
            most=np.where(silent, np.inf, np.minimum(most, self._most[place])),
        )


def _told(answer: EdgeAnswer | None, size: int) -> tuple[Floats, Floats]:
    """Least and most time each answer leaves possible."""
    if answer is None:
        return np.zeros(size), np.full(size, np.inf)
    status, value = np.asarray(answer.status), np.asarray(answer.value)
    least = np.where(np.isin(status, ("value", "at_least")), value, np.where(status == "never", np.inf, 0.0))
    most = np.where(np.isin(status, ("value", "at_most")), value, np.inf)
    return least, most
