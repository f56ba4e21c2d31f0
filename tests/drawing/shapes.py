"""Random but believable lines of each kind of device, in canonical values."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np

from demo_curves.drawing.design import AxisDesign, BandFill, CurveDesign
from demo_curves.drawing.formulas import (
    Line,
    inverse_piece,
    relay_line,
    smooth_through,
    straight,
    with_vertices,
)


@dataclass(frozen=True, kw_only=True, slots=True)
class Subject:
    """What one sheet shows: its axes, lines, tinted bands and the devices of its worksheet."""

    title: str
    current: AxisDesign
    time: AxisDesign
    curves: tuple[CurveDesign, ...]
    devices: tuple[Mapping[str, object], ...]
    bands: tuple[BandFill, ...] = ()


def _curve(name: str, line: Line, **words: object) -> CurveDesign:
    keys = {"edge": "mean", "meaning": "clearing", "element": "whole"} | words
    return CurveDesign(name=name, current=line[0], value=line[1], **keys)  # type: ignore[arg-type]


def _current_axis(unit: str, low: float, high: float, rng: np.random.Generator) -> AxisDesign:
    labelled = ((1,), (1, 2, 5), (1, 3))[rng.integers(3)]
    words = {
        "A": "Current in A",
        "mA": "Residual current in mA",
        "xIn": "Multiple of rated current In",
        "xIr": "Multiple of setting current Ir",
    }[unit]
    ticks = str(rng.choice(["plain", "thousands"])) if unit == "A" else "plain"
    return AxisDesign(quantity="current", unit=unit, low=low, high=high, label=words, labelled=labelled, ticks=ticks)


def _time_axis(unit: str, low: float, high: float, rng: np.random.Generator) -> AxisDesign:
    ticks = str(rng.choice(["plain", "power", "spaced"]))
    labelled = (1,) if ticks == "power" else ((1,), (1, 2, 5))[rng.integers(2)]
    return AxisDesign(
        quantity="time", unit=unit, low=low, high=high, label=f"Time in {unit}", labelled=labelled, ticks=ticks
    )


def _breaker_lines(rng: np.random.Generator, step: float, top: float) -> tuple[Line, Line]:
    """Fast and slow edges with their magnetic steps, in multiples of rated current."""
    fast_step, slow_step = step * rng.uniform(1.03, 1.15), 2 * step * rng.uniform(0.85, 0.97)
    fast = inverse_piece(rng.uniform(1.14, 1.18), rng.uniform(8, 16), rng.uniform(1.8, 2.2), top, fast_step)
    slow = inverse_piece(rng.uniform(1.34, 1.40), rng.uniform(60, 100), rng.uniform(1.8, 2.1), top, slow_step)
    floor = rng.uniform(0.025, 0.06)
    fast = with_vertices(fast, [(fast_step, 0.0005)])
    slow = with_vertices(slow, [(slow_step, floor), (40 * step, floor * rng.uniform(0.3, 0.7))])
    return fast, slow


def breaker(rng: np.random.Generator) -> Subject:
    """A miniature breaker's band, in multiples or amperes; outlined, tinted or hatched."""
    step = float(rng.choice([3.0, 5.0, 10.0]))
    top = 10.0 ** int(rng.integers(3, 5))
    fast, slow = _breaker_lines(rng, step, top * 2)
    amperes = bool(rng.integers(2))
    rating = 16.0 if amperes else 1.0
    fast, slow = ((line[0] * rating, line[1]) for line in (fast, slow))
    curves = (_curve("fast", fast, edge="fast"), _curve("slow", slow, edge="slow"))
    style = rng.integers(3)
    bands = () if style == 0 else (BandFill(between=("fast", "slow"), colour="#d6e2ee", hatch_pt=6.0 * (style == 2)),)
    device = {"key": "trial-breaker", "kind": "mcb", "characteristic": "X", "rated_current_a": 16}
    high = (100.0 if step > 4 else 30.0) * (10 if amperes else 1)
    return Subject(
        title="Tripping characteristic",
        current=_current_axis("A" if amperes else "xIn", 10.0 if amperes else 1.0, high, rng),
        time=_time_axis("s", float(rng.choice([0.001, 0.01])), top, rng),
        curves=curves,
        devices=(device,),
        bands=bands,
    )


def _fuse_line(rating: float, rng: np.random.Generator, longest_s: float = 10000.0) -> Line:
    """A pre-arcing line shaped like a fuse's, falling smoothly to the adiabatic slope."""
    bend = rng.uniform(0.96, 1.04)
    vertices = [
        (1.42, longest_s),
        (1.62, 1000),
        (2.1, 100),
        (3.1, 10),
        (5.1, 1),
        (8.6, 0.1),
        (16.5, 0.01),
        (46.0, 0.001),
    ]
    return smooth_through([(rating * current * (bend if t < 500 else 1.0), t) for current, t in vertices])


def fuse_family(rng: np.random.Generator) -> Subject:
    """Mean pre-arcing lines of several ratings, close together."""
    ratings = [16, 25, 40, 63, 100, 160, 250][: int(rng.integers(4, 8))]
    curves = tuple(
        _curve(f"{rating}", _fuse_line(rating, rng), meaning="pre_arcing", devices=(f"trial-fuse-{rating}",))
        for rating in ratings
    )
    devices = tuple(
        {
            "key": f"trial-fuse-{rating}",
            "kind": "fuse",
            "characteristic": "gX",
            "rated_current_a": rating,
            "tolerance_current": [-0.1, 0.1],
        }
        for rating in ratings
    )
    return Subject(
        title="Pre-arcing times",
        current=_current_axis("A", 10.0, float(rng.choice([1000.0, 10000.0])), rng),
        time=_time_axis("s", float(rng.choice([0.001, 0.01])), 10000.0, rng),
        curves=curves,
        devices=devices,
    )


def crossing(rng: np.random.Generator) -> Subject:
    """A breaker's band crossed by a fuse's lines: two devices on one plot."""
    fast, slow = _breaker_lines(rng, 5.0, 2e4)
    fuse = _fuse_line(63.0, rng)
    breaker_words = {"devices": ("trial-breaker",)}
    fuse_words = {"devices": ("trial-fuse",)}
    curves = (
        _curve("fast", (fast[0] * 32, fast[1]), edge="fast", **breaker_words),
        _curve("slow", (slow[0] * 32, slow[1]), edge="slow", **breaker_words),
        _curve("pre-arcing", fuse, edge="fast", meaning="pre_arcing", **fuse_words),
        _curve("operating", (fuse[0] * 1.2, fuse[1] * 1.1), edge="slow", meaning="operating", **fuse_words),
    )
    return Subject(
        title="Fuse and breaker",
        current=_current_axis("A", 20.0, 5000.0, rng),
        time=_time_axis("s", 0.01, 10000.0, rng),
        curves=curves,
        devices=(
            {"key": "trial-breaker", "kind": "mcb", "characteristic": "X", "rated_current_a": 32},
            {"key": "trial-fuse", "kind": "fuse", "characteristic": "gX", "rated_current_a": 63},
        ),
    )


def residual(rng: np.random.Generator) -> Subject:
    """A residual-current device: upright and sloping pieces only, in mA and ms."""
    low, high = rng.uniform(0.55, 0.7), rng.uniform(0.8, 0.95)
    fast = straight([(30 * low, 10), (30 * low, 0.09), (60, 0.045), (150, 0.018), (9e3, 0.014)])
    slow = straight([(30 * high, 10), (30 * high, 0.25), (60, 0.11), (150, 0.037), (9e3, 0.03)])
    fast, slow = ((line[0] / 1000, line[1]) for line in (fast, slow))
    return Subject(
        title="Break time",
        current=_current_axis("mA", 10.0, float(rng.choice([1000.0, 3000.0])), rng),
        time=_time_axis("ms", 10.0, 1000.0, rng),
        curves=(
            _curve("fast", fast, edge="fast", element="residual"),
            _curve("slow", slow, edge="slow", element="residual"),
        ),
        devices=({"key": "trial-rcd", "kind": "rcd", "rated_current_a": 40, "rated_residual_current_a": 0.03},),
    )


def relay(rng: np.random.Generator) -> Subject:
    """An inverse-time relay at several time multipliers."""
    name = str(rng.choice(["IEC inverse", "IEC very inverse", "IEC extremely inverse"]))
    curves = tuple(
        _curve(f"tms {tms}", relay_line(name, tms, (1.05, 25.0)), meaning="relay_output", at={"tms": tms})
        for tms in (0.1, 0.3, 1.0)
    )
    device = {"key": "trial-relay", "kind": "relay", "characteristic": name, "standard": "IEC 60255-151"}
    settings = {"tms": {"from": 0.05, "to": 1.0}}
    return Subject(
        title="Operating time",
        current=_current_axis("xIr", 1.0, float(rng.choice([20.0, 30.0])), rng),
        time=_time_axis("s", 0.01, 100.0, rng),
        curves=curves,
        devices=({**device, "tolerance_time": [-0.05, 0.05], "settings": settings},),
    )


KINDS: Mapping[str, Callable[[np.random.Generator], Subject]] = {
    "breaker": breaker,
    "fuse-family": fuse_family,
    "crossing": crossing,
    "residual": residual,
    "relay": relay,
}
