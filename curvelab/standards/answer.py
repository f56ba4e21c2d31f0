"""A device asked for one rule: in the start, supply and meaning wanted, else by a line that bounds them.

Pre-arcing ends before operation: a pre-arcing time is at least reached by the operating time, and an operating time
bounds the pre-arcing time from above. A start that differs bounds as `curvelab.devices.conditions` says.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from math import nan
from typing import Any, Literal

import numpy as np

from curvelab.devices.device import Device
from curvelab.errors import DeviceError
from curvelab.records.answer import EdgeAnswer, TripCurrents, TripTimes
from curvelab.records.curve import Conditions, Edge
from curvelab.standards.point import Point

Bound = Literal["at_least", "at_most"]

REACH, PROBES = 30.0, 200
"""How far to either side of a gap an edge is looked for, as a ratio of currents, and at how many."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Answer:
    """What an edge says at a point: the time at its current, and the current for its time; None without such an edge.

    ``mean`` says that a mean line passes there; ``in_gap`` that the edge is drawn on both sides of it only;
    ``refusal`` why the device cannot be asked at all.
    """

    time: EdgeAnswer | None
    current: EdgeAnswer | None
    mean: bool = False
    in_gap: bool = False
    refusal: str = ""

    def reaches(self, point: Point) -> bool:
        """Whether the edge says anything there: of its time, or where an energy is limited of its current."""
        told = self.time if point.rule.let_through_a2s is None else self.current
        return told is not None and told.status not in ("not_covered", "not_seen")


@dataclass(frozen=True, kw_only=True, slots=True)
class _Way:
    meaning: str | None
    conditions: Conditions
    bound: Bound | None = None


def answer_of(device: Device, point: Point) -> Answer:
    """The answer of the first way that reaches the point; else that of the way the rule asks for."""
    wanted: Answer | None = None
    for way in _ways(point):
        answer = _answer(device, point, way)
        if answer.reaches(point):
            return answer
        wanted = wanted or answer
    return wanted or Answer(time=None, current=None)


def cold_answer(device: Device, point: Point) -> Answer:
    """What the cold line says where a rule starts hot."""
    asked = point.rule.asked
    return _answer(device, point, _Way(meaning=asked.meaning, conditions=Conditions(start="cold", supply=asked.supply)))


def _ways(point: Point) -> Iterator[_Way]:
    asked = point.rule.asked
    conditions = Conditions(start=asked.start, supply=asked.supply)
    yield _Way(meaning=asked.meaning, conditions=conditions)
    if asked.meaning == "pre_arcing":
        # Gates and pre-arcing I2t are stated in virtual time; down to a tenth of a second both agree.
        yield _Way(meaning="pre_arcing", conditions=replace(conditions, time_kind="virtual"))
        yield _Way(meaning="operating", conditions=conditions, bound="at_most")
    elif asked.meaning == "operating":
        yield _Way(meaning="pre_arcing", conditions=conditions, bound="at_least")


def _answer(device: Device, point: Point, way: _Way) -> Answer:
    words: dict[str, Any] = {"base": point.base, "path": point.rule.asked.path}
    words |= {"meaning": way.meaning, "conditions": way.conditions}
    try:
        times = device.trip_time(point.current, **words)
        currents = device.trip_current(point.limit_s, **words)
    except DeviceError as error:
        return Answer(time=None, current=None, refusal=error.problem)
    time, current = _of_edge(point.rule.edge, times, currents)
    return Answer(
        time=_bounding(time, way.bound),
        current=_bounding(current, way.bound),
        mean=times.mean is not None and times.mean.status == "value",
        in_gap=time is not None and time.status == "not_covered" and _is_in_gap(device, point, words),
    )


def _is_in_gap(device: Device, point: Point, words: Mapping[str, Any]) -> bool:
    """Whether the edge is drawn somewhere below and somewhere above the point's current."""
    either = (
        np.geomspace(point.current / REACH, point.current, PROBES),
        np.geomspace(1, REACH, PROBES) * point.current,
    )
    for currents in either:
        times = device.trip_time(currents, **words)
        edge = {"fast": times.fast, "slow": times.slow, "mean": times.mean}[point.rule.edge]
        if edge is None or not np.any(np.asarray(edge.status) == "value"):
            return False
    return True


def _of_edge(edge: Edge, times: TripTimes, currents: TripCurrents) -> tuple[EdgeAnswer | None, EdgeAnswer | None]:
    return {
        "fast": (times.fast, currents.holds),
        "slow": (times.slow, currents.trips),
        "mean": (times.mean, currents.mean),
    }[edge]


def _bounding(answer: EdgeAnswer | None, bound: Bound | None) -> EdgeAnswer | None:
    """An answer of another meaning as the bound it is; what bounds on the other side says nothing."""
    if answer is None or bound is None:
        return answer
    kept = {"value": bound, bound: bound} | ({"never": "never"} if bound == "at_least" else {})
    status = kept.get(str(answer.status))
    if status is None:
        return replace(answer, status="not_covered", value=nan, lower=nan, upper=nan)
    return replace(answer, status=status)
