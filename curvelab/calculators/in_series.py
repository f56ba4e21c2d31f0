"""Two devices in series at currents: whether only the downstream one acts, by times or, below 0.1 s, by energies."""

from dataclasses import dataclass
from enum import IntEnum
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from curvelab.calculators.edge_bounds import EdgeBounds
from curvelab.calculators.energy import drawn_energies
from curvelab.calculators.facts import rows_of
from curvelab.calculators.margin import Asked, Margin, margin_between
from curvelab.calculators.spans import Codes
from curvelab.devices.device import Device
from curvelab.devices.question import Path
from curvelab.records.answer import EdgeAnswer
from curvelab.records.arrays import Floats


class State(IntEnum):
    """Whether only the downstream device acts at a current, and what tells; or why nothing does."""

    HOLDS_BY_TIME = 0
    HOLDS_BY_ENERGY = 1
    HOLDS_BY_CURRENT = 2
    FAILS_BY_TIME = 3
    FAILS_BY_ENERGY = 4
    UNDETERMINED = 5
    NOT_COVERED = 6
    DOWNSTREAM_NEVER = 7


HOLDS = (State.HOLDS_BY_TIME, State.HOLDS_BY_ENERGY, State.HOLDS_BY_CURRENT)
FAILS = (State.FAILS_BY_TIME, State.FAILS_BY_ENERGY)


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Fault:
    """How two devices see a fault.

    Parameters
    ----------
    share : float
        The upstream device's current for 1 A in the downstream one: 1, or what a transformer makes of it.
    path : Path
        On the residual path times alone tell, down to the shortest.
    """

    name: str
    share: float = 1.0
    path: Path = "line_to_neutral"


class Series:
    """Two devices in series, at their settings, and a fault both may see."""

    def __init__(self, upstream: Device, downstream: Device, fault: Fault) -> None:
        self.upstream = upstream
        self.downstream = downstream
        self.fault = fault
        self.waits = EdgeBounds(upstream, "fast", fault.path)
        self.clears = EdgeBounds(downstream, "slow", fault.path)

    def at(self, current_a: Floats) -> "InSeries":
        """Both devices asked at currents in A of the downstream one."""
        return InSeries(self, current_a)


class InSeries:
    """Answers of both devices at currents in A of the downstream one."""

    def __init__(self, series: Series, current_a: Floats) -> None:
        path = series.fault.path
        self._series = series
        self._current_a = current_a
        self._upstream = Asked(series.upstream, current_a * series.fault.share, path)
        self._downstream = Asked(series.downstream, current_a, path)
        self._waits = series.waits.between(self._upstream.current_a, self._upstream.times)
        self._clears = series.clears.between(current_a, self._downstream.times)

    @cached_property
    def margin(self) -> Margin:
        """Logarithm of what the upstream device bears over what the downstream one takes, of times or of energies.

        NaN where it is not known, and its interval also where a line is only bounded by what is drawn beside. Where the
        upstream device may act within 0.1 s, and the downstream one does not take longer, energies tell.
        """
        parts = {}
        for world in ("best", "lower", "upper"):
            by_time: Floats = getattr(self._time_margin, world)
            tells = ~self._is_quick(world) & ~np.isnan(self._time_margin.best)
            parts[world] = np.where(tells, by_time, getattr(self._energy_margin, world))
        # At worst the upstream device acts too soon for times to tell, and no energies are known: it does not hold.
        lost = self._is_quick("lower") & ~self._is_quick("best") & np.isnan(self._energy_margin.best)
        parts["lower"] = np.where(lost, -np.inf, parts["lower"])
        return Margin(best=parts["best"], lower=parts["lower"], upper=parts["upper"])

    @property
    def states(self) -> Codes:
        """The `State` at each current, by the best values."""
        best = self.margin.best
        by_energy = self._is_quick("best") | np.isnan(self._time_margin.best)
        state = np.where(best > 0, np.where(by_energy, State.HOLDS_BY_ENERGY, State.HOLDS_BY_TIME), State.NOT_COVERED)
        state = np.where(best <= 0, np.where(by_energy, State.FAILS_BY_ENERGY, State.FAILS_BY_TIME), state)
        acts_soon = self._is_quick("best") & (self._waits.most < _energy_only_s())
        state[np.isnan(best) & acts_soon & np.isfinite(self._clears.most)] = State.UNDETERMINED
        state[(best > 0) & _is_never(self._upstream.times.fast, best)] = State.HOLDS_BY_CURRENT
        state[_is_never(self._downstream.times.slow, best)] = State.DOWNSTREAM_NEVER
        return state.astype(np.int8)

    @cached_property
    def _time_margin(self) -> Margin:
        """Of times; where a line is not drawn, or only bounded, its neighbours tell if they do so either way."""
        drawn = margin_between(self._upstream, self._downstream)
        with np.errstate(invalid="ignore", divide="ignore"):
            surely = np.log(self._waits.least) - np.log(self._clears.most)
            possibly = np.log(self._waits.most) - np.log(self._clears.least)
        bounded = np.where(surely > 0, surely, np.where(possibly <= 0, possibly, np.nan))
        exact = _has_value(self._upstream.times.fast, bounded) & _has_value(self._downstream.times.slow, bounded)
        exact &= ~np.isnan(drawn.best)
        return Margin(
            best=np.where(exact, drawn.best, bounded),
            lower=np.where(exact, drawn.lower, np.nan),
            upper=np.where(exact, drawn.upper, np.nan),
        )

    def _is_quick(self, world: str) -> NDArray[np.bool_]:
        """Where the upstream device may act too soon for times to tell; residual current is told by times alone."""
        if self._series.fault.path == "residual":
            return np.zeros(self._current_a.shape, dtype=np.bool_)
        acts, fast = self._waits.least, self._upstream.times.fast
        if world != "best" and fast is not None:
            bound = np.asarray(getattr(fast, world))
            acts = np.where(_has_value(fast, acts) & ~np.isnan(bound), bound, acts)
        below = _energy_only_s()
        return np.asarray((acts < below) & ~(self._clears.least >= below), dtype=np.bool_)

    @cached_property
    def _energy_margin(self) -> Margin:
        """Of the energy the upstream device bears before it acts, over what the downstream one lets through."""
        nothing = np.full(self._current_a.shape, np.nan)
        if self._series.fault.path == "residual":
            return Margin(best=nothing, lower=nothing, upper=nothing)
        meaning = "pre_arcing" if self._series.upstream.nameplate.kind == "fuse" else "unlatching"
        bears, bears_more = drawn_energies(self._series.upstream, self._upstream.current_a, "fast", meaning)
        passes, passes_less = drawn_energies(self._series.downstream, self._current_a, "slow", "clearing")
        with np.errstate(invalid="ignore", divide="ignore"):
            best = np.log(bears.value / passes.value)
            lower, upper = np.log(bears.lower / passes.upper), np.log(bears.upper / passes.lower)
        open_ones = (bears_more | passes_less) & ~(best > 0)
        hidden = np.where(open_ones, np.nan, 0.0)
        return Margin(best=best + hidden, lower=lower + hidden, upper=upper + hidden)


def _energy_only_s() -> float:
    """The time in s below which only energies tell."""
    return float(rows_of("selectivity", "energy_only")[0]["below_s"])


def _has_value(answer: EdgeAnswer | None, like: Floats) -> NDArray[np.bool_]:
    return _has_status(answer, ("value", "never"), like)


def _is_never(answer: EdgeAnswer | None, like: Floats) -> NDArray[np.bool_]:
    return _has_status(answer, ("never",), like)


def _has_status(answer: EdgeAnswer | None, words: tuple[str, ...], like: Floats) -> NDArray[np.bool_]:
    if answer is None:
        return np.zeros(like.shape, dtype=np.bool_)
    return np.isin(np.asarray(answer.status), words)
