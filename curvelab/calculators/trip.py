"""Trip times at currents and currents for times, edge by edge, with the reason wherever there is no number."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from curvelab.calculators.cautions import Caution, cautions_of, least_breaking_current_a
from curvelab.calculators.estimate import Estimate, estimate
from curvelab.calculators.refusals import reason, residual_only
from curvelab.devices.bases import amperes
from curvelab.devices.device import Device, Quantity
from curvelab.devices.meaning import TOTAL
from curvelab.devices.question import Path
from curvelab.records.answer import EdgeAnswer
from curvelab.records.curve import Edge
from curvelab.units import written_current

ANSWERED = ("value", "at_least", "at_most", "never")
"""Statuses that answer what was asked."""

UNITS: Mapping[Quantity, str] = {"time": "s", "let_through": "A2s", "peak": "A"}
_OF_TIMES: Mapping[str, Edge] = {"fast": "fast", "slow": "slow", "mean": "mean"}
_OF_CURRENTS: Mapping[str, Edge] = {"trips": "slow", "holds": "fast", "mean": "mean"}

Edges = Mapping[str, Estimate | None]
"""Edge -> its answer, None where the device has no such line: fast, slow, mean; or trips, holds, mean."""


@dataclass(frozen=True, kw_only=True, slots=True)
class TripAnswer:
    """What a device does at one current, or which currents go with one time in s.

    ``let_through`` in A2s and ``peak`` in A at a current are None where the device has no such sheet.
    """

    asked: float
    edges: Edges
    let_through: Edges | None = None
    peak: Edges | None = None

    @property
    def is_answered(self) -> bool:
        """Whether every line asked, and at least one, says something: of times, else of let-through and cut-off."""
        drawn = [_drawn(edges) for edges in (self.edges, self.let_through, self.peak)]
        asked = drawn[0] or [*drawn[1], *drawn[2]]
        return bool(asked) and all(each.status in ANSWERED for each in asked)

    @property
    def reasons(self) -> tuple[str, ...]:
        """Why there is no number, each reason once."""
        every = (each for edges in (self.edges, self.let_through, self.peak) for each in _drawn(edges))
        return tuple(dict.fromkeys(each.reason for each in every if each.reason))


@dataclass(frozen=True, kw_only=True, slots=True)
class TripAnswers:
    """Answers of one device in the order asked; ``of_times`` where currents were asked and times are answered.

    ``base`` is what the currents are counted in.
    """

    device: str
    base: str
    of_times: bool
    answers: tuple[TripAnswer, ...]
    notes: tuple[str, ...]
    cautions: tuple[Caution, ...]


def trip_times(device: Device, currents: Sequence[float], path: Path | None = None, base: str = "A") -> TripAnswers:
    """Times at currents in a base, and let-through energies and cut-off currents where the device has their sheets.

    Raises
    ------
    DeviceError
        A current that is not positive, or an adjustable device without its settings.
    """
    return TripAnswers(
        device=device.key,
        base=base,
        of_times=True,
        answers=tuple(_at(device, each, path, base) for each in currents),
        notes=(*_on_meaning(device, path), *_below_least_breaking(device, currents, base)),
        cautions=cautions_of(device),
    )


def trip_currents(device: Device, times_s: Sequence[float], path: Path | None = None, base: str = "A") -> TripAnswers:
    """Currents in a base for times: which surely trip by then, which surely hold.

    Raises
    ------
    DeviceError
        A time that is not positive, or an adjustable device without its settings.
    """
    return TripAnswers(
        device=device.key,
        base=base,
        of_times=False,
        answers=tuple(_for(device, each, path, base) for each in times_s),
        notes=tuple(_on_meaning(device, path)),
        cautions=cautions_of(device),
    )


def _drawn(edges: Edges | None) -> list[Estimate]:
    return [] if edges is None else [each for each in edges.values() if each is not None]


def _at(device: Device, current: float, path: Path | None, base: str) -> TripAnswer:
    times, blind = device.trip_time(current, base, path=path), _is_blind(device, path)
    energies = device.let_through(current, base) if device.limiting("let_through") else None
    peaks = device.let_through(current, base, quantity="peak") if device.limiting("peak") else None
    return TripAnswer(
        asked=current,
        edges=_not_seen(device, _OF_TIMES, "s") if blind else _edges(device, times, _OF_TIMES, "time", "s"),
        let_through=None if energies is None else _edges(device, energies, _OF_TIMES, "let_through", "A2s"),
        peak=None if peaks is None else _edges(device, peaks, _OF_TIMES, "peak", "A"),
    )


def _for(device: Device, time_s: float, path: Path | None, base: str) -> TripAnswer:
    currents = device.trip_current(time_s, base, path=path)
    if _is_blind(device, path):
        return TripAnswer(asked=time_s, edges=_not_seen(device, _OF_CURRENTS, base))
    return TripAnswer(asked=time_s, edges=_edges(device, currents, _OF_CURRENTS, "time", base))


def _is_blind(device: Device, path: Path | None) -> bool:
    return path == "line_to_neutral" and bool(residual_only(device))


def _edges(device: Device, answer: object, names: Mapping[str, Edge], quantity: Quantity, unit: str) -> Edges:
    found: dict[str, Estimate | None] = {}
    for name, edge in names.items():
        told: EdgeAnswer | None = getattr(answer, name)
        found[name] = None if told is None else estimate(told, unit, reason(device, edge, told, quantity))
    return found


def _not_seen(device: Device, names: Mapping[str, Edge], unit: str) -> Edges:
    """A residual current device asked for a current that comes back through it, whether its sheet is there or not."""
    words = residual_only(device)
    seen = Estimate(status="not_seen", value=None, interval=None, unit=unit, reason=words)
    return {name: None if edge == "mean" else seen for name, edge in names.items()}


def _below_least_breaking(device: Device, currents: Sequence[float], base: str) -> Sequence[str]:
    least_a = least_breaking_current_a(device)
    if least_a is None:
        return []
    one_a = amperes(device.nameplate, device.settings, base)
    return [
        f"At {written_current(each, base)} it may melt and not break." for each in currents if each * one_a < least_a
    ]


def _on_meaning(device: Device, path: Path | None) -> Sequence[str]:
    """A sentence where the longest time is not that until the current is off."""
    slow = device.trip_time(1.0, path=path).slow
    if slow is None or slow.meaning is None or slow.meaning in TOTAL:
        return []
    return [f"The slow edge is of {slow.meaning.replace('_', '-')} times: the current is off only later."]
