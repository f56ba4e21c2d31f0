"""Sheets of devices in and out of their standard: what is wrong with each is known before it is drawn."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace

import numpy as np

from demo_curves.drawing.design import AxisDesign, CurveDesign
from demo_curves.drawing.formulas import Line, inverse_piece, smooth_through, straight, with_vertices
from tests.drawing.shapes import Subject

TOP_S = 1e4


@dataclass(frozen=True, kw_only=True, slots=True)
class Case:
    """A sheet, and the rules its device breaks: ``fails`` surely, ``open`` where the sheet cannot decide.

    Rules that begin with one of ``beside`` it may break as well.
    """

    subject: Subject
    fails: frozenset[str] = frozenset()
    open: frozenset[str] = frozenset()
    beside: tuple[str, ...] = ()

    def keeps(self, rule: str) -> bool:
        """Whether the device is sure to keep a rule."""
        return rule not in self.fails | self.open and not rule.startswith(self.beside or ("-",))


INSTANTANEOUS = {"B": (3.0, 5.0), "C": (5.0, 10.0), "D": (10.0, 20.0)}
"""Characteristic -> limits of the instantaneous range in multiples of rated current: IEC 60898-1."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Breaker:
    """A miniature breaker's numbers; times and currents in seconds and multiples of rated current."""

    characteristic: str
    rating: float
    magnetic: tuple[float, float]
    slow_pick_up: float
    slow_at_2_55_s: float
    start: str = "cold"


def _good_breaker(rng: np.random.Generator, ratings: tuple[float, ...] = (10.0, 16.0, 32.0, 40.0, 63.0)) -> Breaker:
    characteristic = str(rng.choice(list(INSTANTANEOUS)))
    low, high = INSTANTANEOUS[characteristic]
    return Breaker(
        characteristic=characteristic,
        rating=float(rng.choice(ratings)),
        magnetic=(low * rng.uniform(1.04, 1.15), high * rng.uniform(0.85, 0.96)),
        slow_pick_up=rng.uniform(1.32, 1.39),
        slow_at_2_55_s=rng.uniform(25.0, 55.0),
    )


def _breaker(breaker: Breaker, rng: np.random.Generator) -> Subject:
    fast_step, slow_step = breaker.magnetic
    exponent = rng.uniform(1.8, 2.1)
    constant = breaker.slow_at_2_55_s * ((2.55 / breaker.slow_pick_up) ** exponent - 1)
    fast = inverse_piece(rng.uniform(1.15, 1.18), rng.uniform(9, 16), rng.uniform(1.8, 2.1), 2 * TOP_S, fast_step)
    slow = inverse_piece(breaker.slow_pick_up, constant, exponent, 2 * TOP_S, slow_step)
    floor = rng.uniform(0.025, 0.06)
    fast = with_vertices(fast, [(fast_step, 0.0005)])
    slow = with_vertices(slow, [(slow_step, floor), (60.0, floor * rng.uniform(0.3, 0.7))])
    return Subject(
        title="Tripping characteristic",
        current=AxisDesign(quantity="current", unit="xIn", low=1.0, high=100.0, label="Multiple of rated current"),
        time=AxisDesign(quantity="time", unit="s", low=0.001, high=TOP_S, label="Time in s"),
        curves=tuple(_curve(edge, line, start=breaker.start) for edge, line in (("fast", fast), ("slow", slow))),
        devices=(
            {
                "key": "trial-breaker",
                "kind": "mcb",
                "characteristic": breaker.characteristic,
                "standard": "IEC 60898-1",
                "rated_current_a": breaker.rating,
            },
        ),
    )


def _curve(
    edge: str, line: Line, *, meaning: str = "clearing", element: str = "whole", start: str = "cold"
) -> CurveDesign:
    return CurveDesign(
        name=edge,
        current=line[0],
        value=line[1],
        edge=edge,
        meaning=meaning,
        element=element,
        width_pt=1.1,
        extra={"start": start},
    )


def good_breaker(rng: np.random.Generator) -> Case:
    return Case(subject=_breaker(_good_breaker(rng), rng))


def late_thermal_hot(rng: np.random.Generator) -> Case:
    """Drawn hot, and still in at 1.45 times its rated current after an hour."""
    breaker = replace(_good_breaker(rng), slow_pick_up=rng.uniform(1.5, 1.6), start="hot")
    return Case(subject=_breaker(breaker, rng), fails=frozenset({"b-le63"}))


def late_thermal_cold(rng: np.random.Generator) -> Case:
    """The same drawn cold: a hot test on a cold line may be met, never failed."""
    breaker = replace(_good_breaker(rng), slow_pick_up=rng.uniform(1.5, 1.6))
    return Case(subject=_breaker(breaker, rng), open=frozenset({"b-le63"}))


def loose_magnetic(rng: np.random.Generator) -> Case:
    """A magnetic band at 4 to 8 times the rated current sold as type C."""
    breaker = replace(_good_breaker(rng), characteristic="C", magnetic=(4 * rng.uniform(1.0, 1.1), 8.0))
    return Case(subject=_breaker(breaker, rng), fails=frozenset({"d-hold-C"}))


def ninety_seconds_small(rng: np.random.Generator) -> Case:
    """90 s at 2.55 times: too long up to 32 A."""
    breaker = replace(_good_breaker(rng, (16.0, 20.0, 25.0, 32.0)), slow_at_2_55_s=rng.uniform(88.0, 92.0))
    return Case(subject=_breaker(breaker, rng), fails=frozenset({"c-upper-le32"}), beside=("d-upper",))


def ninety_seconds_large(rng: np.random.Generator) -> Case:
    """90 s at 2.55 times: in order above 32 A."""
    breaker = replace(_good_breaker(rng, (40.0, 50.0, 63.0)), slow_at_2_55_s=rng.uniform(88.0, 92.0))
    return Case(subject=_breaker(breaker, rng), beside=("d-upper",))


def _residual(rng: np.random.Generator, slower: float) -> Subject:
    low, high = rng.uniform(0.56, 0.7), rng.uniform(0.8, 0.92)
    fast = straight([(low, 10), (low, 0.09), (2, 0.045), (5, 0.018), (300, 0.014)])
    slow = straight([(high, 10), (high, 0.25 * slower), (2, 0.11 * slower), (5, 0.036 * slower), (300, 0.03 * slower)])
    device = {
        "key": "trial-rcd",
        "kind": "rcd",
        "standard": "IEC 61008-1",
        "rated_current_a": 40,
        "rated_residual_current_a": 0.1,
        "residual_waveform": "AC",
        "residual_delay": "general",
        "breaking": ({"quantity": "IDm", "value_a": 1000},),
    }
    return Subject(
        title="Break time",
        current=AxisDesign(quantity="current", unit="xIdn", low=0.1, high=1000.0, label="Multiple of residual current"),
        time=AxisDesign(quantity="time", unit="s", low=0.01, high=1.0, label="Time in s"),
        curves=tuple(_curve(edge, line, element="residual") for edge, line in (("fast", fast), ("slow", slow))),
        devices=(device,),
    )


def good_residual(rng: np.random.Generator) -> Case:
    return Case(subject=_residual(rng, 1.0))


def slow_residual(rng: np.random.Generator) -> Case:
    """A third to a half slower than a general device may be."""
    slower = rng.uniform(1.45, 1.6)
    subject = _residual(rng, slower)
    return Case(subject=subject, fails=frozenset({"general-2", "general-5"}), beside=("general",))


FUSE = ((1.42, 1e4), (1.62, 1e3), (2.1, 1e2), (3.1, 10.0), (5.1, 1.0), (8.6, 0.1), (16.5, 0.01), (46.0, 0.001))
"""Multiples of the rated current and pre-arcing times of a fuse amid the gates of 32 and 63 A."""


def _fuse(rating: float, quick: float) -> Subject:
    """A pre-arcing band of 3 % in current either side; ``quick`` scales the currents from 10 s down."""
    line = smooth_through([(rating * m * (quick if t <= 10 else quick**0.4 if t <= 100 else 1.0), t) for m, t in FUSE])
    return Subject(
        title="Pre-arcing times",
        current=AxisDesign(quantity="current", unit="A", low=10.0, high=10_000.0, label="Current in A"),
        time=AxisDesign(quantity="time", unit="s", low=0.001, high=TOP_S, label="Time in s"),
        curves=tuple(
            _curve(edge, (line[0] * factor, line[1]), meaning="pre_arcing")
            for edge, factor in (("fast", 0.97), ("slow", 1.03))
        ),
        devices=(
            {
                "key": "trial-fuse",
                "kind": "fuse",
                "characteristic": "gG",
                "standard": "IEC 60269-2",
                "rated_current_a": rating,
            },
        ),
    )


def good_fuse(rng: np.random.Generator) -> Case:
    return Case(subject=_fuse(float(rng.choice([32.0, 63.0])), 1.0))


def quick_fuse(rng: np.random.Generator) -> Case:
    """Below the lower gates of 63 A at 10 s and 0.1 s, and below its least pre-arcing energy."""
    rules = ("gate-10s-lower-63", "gate-0.1s-lower-63", "i2t-lower-63")
    return Case(subject=_fuse(63.0, rng.uniform(0.77, 0.81)), fails=frozenset(rules))


IN_STANDARD: Mapping[str, Callable[[np.random.Generator], Case]] = {
    "breaker": good_breaker,
    "90 s above 32 A": ninety_seconds_large,
    "residual": good_residual,
    "fuse": good_fuse,
}
OUT_OF_STANDARD: Mapping[str, Callable[[np.random.Generator], Case]] = {
    "late at 1.45 hot": late_thermal_hot,
    "late at 1.45 cold": late_thermal_cold,
    "4 to 8 In as C": loose_magnetic,
    "90 s up to 32 A": ninety_seconds_small,
    "slow residual": slow_residual,
    "quick fuse": quick_fuse,
}
