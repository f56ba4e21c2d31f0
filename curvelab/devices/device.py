"""A device that can be asked: elements combined at a setting, currents turned between bases, answers with status."""

from collections.abc import Callable, Mapping, Sequence
from types import MappingProxyType
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from curvelab.devices.ask import edge_currents, edge_times
from curvelab.devices.asked import as_given, positive, shown_edge
from curvelab.devices.bases import amperes, checked_base
from curvelab.devices.breaking import breaking_capacity_a
from curvelab.devices.element import pick_up
from curvelab.devices.found import Found
from curvelab.devices.limiting import edge_limits, edge_values
from curvelab.devices.lines import Lines, is_off, lines_of_edge, needed_settings
from curvelab.devices.question import Path, Question, path_of, sees
from curvelab.devices.settings import Given, checked_settings, missing_settings
from curvelab.records.answer import EdgeAnswer, LetThrough, LetThroughCurrents, TripCurrents, TripTimes
from curvelab.records.arrays import Floats
from curvelab.records.band import Band, bands_of
from curvelab.records.curve import Conditions, Curve, Edge
from curvelab.records.device import DeviceRecord, Nameplate

Limiting = Literal["let_through", "peak"]
"""What a current-limiting device is drawn for beside its times."""

Quantity = Literal["time", "let_through", "peak"]

Ask = Callable[[tuple[Lines, ...], Edge], Found]
"""How the lines of one edge are asked."""

_NONE: Given = MappingProxyType({})
_EDGES: tuple[Edge, ...] = ("fast", "slow", "mean")


class Device:
    """A stored or read device at its settings; it never changes.

    Parameters
    ----------
    record : DeviceRecord
        Nameplate and curves.
    settings : mapping, optional
        Setting by name: a number, or ``"off"``.

    Raises
    ------
    DeviceError
        A setting the device does not have, or a value it cannot take.
    """

    def __init__(self, record: DeviceRecord, settings: Given = _NONE) -> None:
        self._record = record
        self._settings = checked_settings(record.nameplate, settings)
        self._times = tuple(curve for curve in record.curves if curve.quantity == "time")

    def __repr__(self) -> str:
        settings = "".join(f", {name}={value}" for name, value in self._settings.items())
        return f"<Device {self.key}{settings}>"

    @property
    def record(self) -> DeviceRecord:
        """What is stored of it."""
        return self._record

    @property
    def nameplate(self) -> Nameplate:
        """What it is called and rated."""
        return self._record.nameplate

    @property
    def key(self) -> str:
        """Its key in a library."""
        return self._record.nameplate.key

    @property
    def revision(self) -> int | None:
        """Its revision; None where it does not come from a library."""
        return self._record.revision

    @property
    def state(self) -> str | None:
        """The state of its revision; None where it does not come from a library."""
        return self._record.state

    @property
    def settings(self) -> Mapping[str, float | str]:
        """The settings it is asked at."""
        return self._settings

    @property
    def bands(self) -> tuple[Band, ...]:
        """Its curves gathered into bands."""
        return bands_of(self._record.curves)

    @property
    def is_set(self) -> bool:
        """Whether it can be asked: it is not adjustable, or has the settings its curves depend on."""
        declared = {setting.name for setting in self.nameplate.settings}
        missing = [name for name in needed_settings(self._times) if name in declared and name not in self._settings]
        return not missing and (not declared or bool(self._settings))

    def at(self, **settings: float | str) -> "Device":
        """The device at settings, such as ``at(ir=0.8, isd=5)`` or ``at(ii="off")``; those given before are kept.

        Raises
        ------
        DeviceError
            A setting the device does not have, or a value it cannot take; the message says what is possible.
        """
        return Device(self._record, {**self._settings, **settings})

    def trip_time(
        self,
        current: ArrayLike,
        base: str = "A",
        *,
        path: Path | None = None,
        meaning: str | None = None,
        conditions: Conditions = Conditions(),
        own: bool = False,
    ) -> TripTimes:
        """Times in s at currents, edge by edge, with 95 % intervals and status.

        Parameters
        ----------
        current : float or array
            Prospective current in ``base``, positive.
        base : str
            ``A`` or multiples of a rating or setting.
        path, meaning, conditions
            See `Question`.
        own : bool
            Intervals without the part of the uncertainty that all curves of a sheet share, for differences.

        Raises
        ------
        DeviceError
            A current that is not positive, a base the device lacks, or an adjustable device without its settings.
        """
        asked = positive(current, "current")
        question = Question(path=path, meaning=meaning, conditions=conditions)
        way = path_of(question, self.nameplate, checked_base(base))
        self._refuse_unset()
        capacity_a = breaking_capacity_a(self.nameplate, question, way)
        limited = np.ravel(asked), None if capacity_a is None else capacity_a * self._units_per_unit("A", base)

        def times(lines: tuple[Lines, ...], edge: Edge) -> Found:
            return edge_times(lines, edge, self._units(lines, base), limited, own=own)

        answers = self._each_edge(self._times, times, (question, way), asked.shape)
        return TripTimes(current=as_given(asked), base=base, **answers)

    def trip_current(
        self,
        time_s: ArrayLike,
        base: str = "A",
        *,
        path: Path | None = None,
        meaning: str | None = None,
        conditions: Conditions = Conditions(),
    ) -> TripCurrents:
        """Currents for times: the least that surely trips by the time, the greatest that surely holds for it.

        Parameters
        ----------
        time_s : float or array
            Positive, in s.
        base : str
            What the currents are to be counted in.
        path, meaning, conditions
            See `Question`.

        Raises
        ------
        DeviceError
            As for `trip_time`.
        """
        asked = positive(time_s, "time")
        question = Question(path=path, meaning=meaning, conditions=conditions)
        way = path_of(question, self.nameplate, checked_base(base))
        self._refuse_unset()

        def currents(lines: tuple[Lines, ...], edge: Edge) -> Found:
            return edge_currents(lines, edge, self._units(lines, base), np.ravel(asked))

        answers = self._each_edge(self._times, currents, (question, way), asked.shape)
        return TripCurrents(
            time_s=as_given(asked), base=base, trips=answers["slow"], holds=answers["fast"], mean=answers["mean"]
        )

    def let_through(
        self,
        current: ArrayLike,
        base: str = "A",
        *,
        quantity: Limiting = "let_through",
        meaning: str | None = None,
        conditions: Conditions = Conditions(),
    ) -> LetThrough:
        """Let-through energies in A2s, or with ``quantity="peak"`` cut-off currents in A, at prospective currents.

        Never beyond what is drawn; over several voltages, none of which is asked for, the slow edge answers the
        largest. Parameters and errors as for `trip_time`.
        """
        asked = positive(current, "current")
        question = Question(meaning=meaning, conditions=conditions)
        way = path_of(question, self.nameplate, checked_base(base))
        self._refuse_unset()
        capacity_a = breaking_capacity_a(self.nameplate, question, way)
        limited = np.ravel(asked), None if capacity_a is None else capacity_a * self._units_per_unit("A", base)

        def values(lines: tuple[Lines, ...], edge: Edge) -> Found:
            return edge_values(lines, edge, self._units(lines, base), limited)

        answers = self._each_edge(self.limiting(quantity), values, (question, way), asked.shape)
        return LetThrough(quantity=quantity, current=as_given(asked), base=base, **answers)

    def let_through_current(
        self,
        value: ArrayLike,
        base: str = "A",
        *,
        quantity: Limiting = "let_through",
        meaning: str | None = None,
        conditions: Conditions = Conditions(),
    ) -> LetThroughCurrents:
        """The greatest prospective current up to which each line stays at or below an energy in A2s (a peak in A).

        ``at_least`` the last current drawn where the line never exceeds it. Parameters and errors as for `trip_time`.
        """
        asked = positive(value, "let-through")
        question = Question(meaning=meaning, conditions=conditions)
        way = path_of(question, self.nameplate, checked_base(base))
        self._refuse_unset()

        def limits(lines: tuple[Lines, ...], _: Edge) -> Found:
            return edge_limits(lines, self._units(lines, base), np.ravel(asked))

        answers = self._each_edge(self.limiting(quantity), limits, (question, way), asked.shape)
        return LetThroughCurrents(quantity=quantity, value=as_given(asked), base=base, **answers)

    def limiting(self, quantity: Limiting) -> tuple[Curve, ...]:
        """Its let-through or cut-off lines."""
        return tuple(curve for curve in self._record.curves if curve.quantity == quantity)

    def bends_a(self, path: Path | None = None, quantity: Quantity = "time") -> Floats:
        """Currents in A, rising, at which its lines may bend or step: what is tabulated, and declared pick-ups.

        Of the elements that act on the path, by default that of a current when nothing else is said; shape (n,), empty
        without curves.

        Raises
        ------
        DeviceError
            An adjustable device without its settings, or a rating its curves need is missing.
        """
        self._refuse_unset()
        way = path_of(Question(path=path), self.nameplate, "A")
        acting = [
            curve
            for curve in self._record.curves
            if curve.quantity == quantity and sees(curve.element, way) and not is_off(curve.element, self._settings)
        ]
        bends = [
            np.append(part.current, pick_up(curve) or part.current[:0])
            * amperes(self.nameplate, self._settings, curve.base)
            for curve in acting
            for part in curve.parts
        ]
        return np.unique(np.concatenate(bends)) if bends else np.array([])

    def _refuse_unset(self) -> None:
        if not self.is_set:
            raise missing_settings(self.nameplate)

    def _each_edge(
        self, curves: Sequence[Curve], ask: Ask, asked: tuple[Question, Path], shape: tuple[int, ...]
    ) -> dict[Edge, EdgeAnswer | None]:
        """The answer of each edge that some of the curves draw."""
        answers: dict[Edge, EdgeAnswer | None] = {}
        for edge in _EDGES:
            lines = lines_of_edge(curves, edge, self.nameplate, self._settings, *asked)
            answers[edge] = None if lines is None else shown_edge(ask(lines, edge), lines, shape)
        return answers

    def _units(self, elements: tuple[Lines, ...], base: str) -> dict[str, float]:
        """What one unit of each base the lines are drawn in is in the base asked."""
        bases = {line.curve.base for each in elements for line in each.lines}
        return {drawn: self._units_per_unit(drawn, base) for drawn in sorted(bases)}

    def _units_per_unit(self, base: str, asked: str) -> float:
        """Units of the base asked in one unit of another; in the very base a curve is drawn in no rating is needed."""
        if base == asked:
            return 1.0
        plate, settings = self.nameplate, self._settings
        return amperes(plate, settings, base) / amperes(plate, settings, asked)
