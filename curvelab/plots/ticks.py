"""Ticks of a logarithmic axis: decades, the lines between, and labels as engineers write them."""

import math
from collections.abc import Mapping
from types import MappingProxyType

STEPS = (1.0, 2.0, 5.0, 10.0)

HUMAN_TIMES: Mapping[float, str] = MappingProxyType(
    {60.0: "1 min", 300.0: "5 min", 1200.0: "20 min", 3600.0: "1 h", 7200.0: "2 h", 14400.0: "4 h", 86400.0: "1 d"}
)
"""Times above a minute that the second time scale names."""

_ROUNDING = 1e-9


def rounded_range(lowest: float, highest: float) -> tuple[float, float]:
    """The range widened to 1, 2 or 5 times a power of ten at both ends."""
    return _step_below(lowest), _step_above(highest)


def _step_below(value: float) -> float:
    decade = 10.0 ** math.floor(math.log10(value) + _ROUNDING)
    return max(step * decade for step in STEPS if step * decade <= value * (1 + _ROUNDING))


def _step_above(value: float) -> float:
    decade = 10.0 ** math.floor(math.log10(value) - _ROUNDING)
    return min(step * decade for step in STEPS if step * decade >= value * (1 - _ROUNDING))


def decades(lowest: float, highest: float) -> list[float]:
    """Powers of ten within the range."""
    first, last = math.ceil(math.log10(lowest) - _ROUNDING), math.floor(math.log10(highest) + _ROUNDING)
    return [10.0**power for power in range(first, last + 1)]


def between(lowest: float, highest: float) -> list[float]:
    """2 to 9 times each power of ten within the range."""
    first, last = math.floor(math.log10(lowest)), math.ceil(math.log10(highest))
    values = [step * 10.0**power for power in range(first, last + 1) for step in range(2, 10)]
    return [value for value in values if lowest * (1 - _ROUNDING) <= value <= highest * (1 + _ROUNDING)]


def is_two_or_five(value: float) -> bool:
    """Whether the first figure is a 2 or a 5: these are labelled where there is room."""
    step = value / 10.0 ** math.floor(math.log10(value) + _ROUNDING)
    return any(math.isclose(step, labelled, rel_tol=1e-6) for labelled in (2.0, 5.0))


def _grouped(value: float) -> str:
    """1 to 9999 as they are, larger ones with a thin space, small ones without an exponent."""
    text = f"{value:.6g}" if value < 1 else f"{value:,.6g}".replace(",", "\N{THIN SPACE}")
    return text if "e" not in text else f"{value:.9f}".rstrip("0")


def current_label(value: float, base: str) -> str:
    """``10 A``, ``1 kA``, ``30 mA``; a multiple is a bare number, the axis says of what."""
    if base != "A":
        return _grouped(value)
    if value >= 999.5:
        return f"{_grouped(value / 1000)} kA"
    return f"{_grouped(value)} A" if value > 0.95 else f"{_grouped(value * 1000)} mA"


def value_label(value: float, quantity: str) -> str:
    """``10 ms``, ``1 s``, ``1 000 s``; peaks as currents; let-through as a power of ten."""
    if quantity == "peak":
        return current_label(value, "A")
    if quantity == "let_through":
        power = math.floor(math.log10(value) + _ROUNDING)
        step = round(value / 10.0**power)
        return f"$10^{{{power}}}$" if step == 1 else f"${step}\\cdot 10^{{{power}}}$"
    return f"{_grouped(value)} s" if value > 0.95 else f"{_grouped(value * 1000)} ms"


def human_times(lowest: float, highest: float) -> dict[float, str]:
    """The named times within the range."""
    return {time: name for time, name in HUMAN_TIMES.items() if lowest <= time <= highest}
