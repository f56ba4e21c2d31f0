"""The first stretch of currents in which only the downstream device acts, and its end with a 95 % interval."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from curvelab.calculators.estimate import Estimate
from curvelab.calculators.in_series import FAILS, HOLDS, Series, State
from curvelab.calculators.spans import Codes, Span, spans_of
from curvelab.records.answer import Status
from curvelab.records.arrays import Floats

Bools = NDArray[np.bool_]

_NONE = Estimate(status="not_covered", value=None, interval=None, unit="A", reason="nowhere does it surely hold")


@dataclass(frozen=True, kw_only=True, slots=True)
class Holding:
    """From which current in A only the downstream device acts, and up to which.

    ``beyond`` is what follows: the `State` above ``up_to``, None where nothing more is drawn. ``fails_from_a`` is the
    first current at which the upstream device may act too.
    """

    from_a: float | None
    up_to: Estimate
    beyond: State | None
    fails_from_a: float | None


def holding_of(series: Series, spans: tuple[Span, ...], places: Floats) -> Holding:
    """The first stretch that holds, from the spans of the best values."""
    fails = next((span.from_a for span in spans if span.code in FAILS), None)
    runs = _runs(spans)
    if not runs:
        return Holding(from_a=None, up_to=_NONE, beyond=None, fails_from_a=fails)
    start, end = runs[0]
    after = next((State(span.code) for span in spans if span.from_a == end), None)
    status: Status = "value" if after in (*FAILS, State.UNDETERMINED) else "at_least"
    interval = _interval(series, runs[0], places) if status == "value" else None
    up_to = Estimate(status=status, value=end, interval=interval, unit="A")
    return Holding(from_a=start, up_to=up_to, beyond=after, fails_from_a=fails)


def _runs(spans: tuple[Span, ...]) -> list[tuple[float, float]]:
    """Stretches of spans that hold, one way or another, without a break."""
    runs: list[tuple[float, float]] = []
    for span in spans:
        if span.code not in HOLDS:
            continue
        if runs and runs[-1][1] == span.from_a:
            runs[-1] = (runs[-1][0], span.to_a)
        else:
            runs.append((span.from_a, span.to_a))
    return runs


def _interval(series: Series, run: tuple[float, float], places: Floats) -> tuple[float, float] | None:
    """Where the stretch ends at worst and at best; None where the uncertainty of a line is not known."""
    inside = places[(places > run[0]) & (places < run[1])]
    if inside.size == 0 or np.isnan(series.at(inside).margin.lower).all():
        return None

    def at_worst(current_a: Floats) -> Bools:
        margin = series.at(current_a).margin
        return np.asarray(margin.sure > 0)

    def at_best(current_a: Floats) -> Bools:
        margin = series.at(current_a).margin
        return np.asarray(np.where(np.isnan(margin.upper), margin.best, margin.upper) > 0)

    return min(_end(at_worst, run, places), run[1]), max(_end(at_best, run, places), run[1])


def _end(holds: Callable[[Floats], Bools], run: tuple[float, float], places: Floats) -> float:
    """Where the first stretch that holds and shares a current with a run ends; the run's start without any."""

    def codes(current_a: Floats) -> Codes:
        return holds(current_a).astype(np.int8)

    shared = (each for each in spans_of(codes, places) if each.code and each.from_a < run[1] and each.to_a > run[0])
    return next((each.to_a for each in shared), run[0])
