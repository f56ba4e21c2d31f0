"""Units of currents, times and energies: to base units, and back to what engineers write."""

import math
from collections.abc import Mapping
from types import MappingProxyType

from curvelab.errors import InputError

CURRENT_UNITS: Mapping[str, tuple[str, float]] = MappingProxyType(
    {
        "mA": ("A", 1e-3),
        "A": ("A", 1.0),
        "kA": ("A", 1e3),
        "xIn": ("xIn", 1.0),
        "xIr": ("xIr", 1.0),
        "xIsd": ("xIsd", 1.0),
        "xIi": ("xIi", 1.0),
        "xIg": ("xIg", 1.0),
        "xIdn": ("xIdn", 1.0),
    }
)
"""Unit of a current axis -> (base, factor): value in the base = printed value x factor."""

BASES = tuple(dict.fromkeys(base for base, _ in CURRENT_UNITS.values()))
"""What a current may be counted in."""

VALUE_UNITS: Mapping[str, Mapping[str, float]] = MappingProxyType(
    {
        "time": MappingProxyType({"ms": 1e-3, "s": 1.0, "min": 60.0, "h": 3600.0}),
        "let_through": MappingProxyType({"A2s": 1.0, "kA2s": 1e6}),
        "peak": MappingProxyType({"A": 1.0, "kA": 1e3}),
    }
)
"""Quantity of the second axis -> its units and their factor to s, A2s or A."""

QUANTITIES = tuple(VALUE_UNITS)

FIGURES, MOST_FIGURES = 3, 6
"""Significant figures a person is shown, and at most where a narrow interval asks for more."""


def unit_factor(quantity: str, unit: str) -> float:
    """Factor from a printed unit to the base unit of its quantity.

    Parameters
    ----------
    quantity : str
        ``current``, ``time``, ``let_through`` or ``peak``.
    unit : str
        A unit of that quantity.

    Raises
    ------
    InputError
        The unit is not one of that quantity.
    """
    if quantity == "current":
        factors: Mapping[str, float] = {name: factor for name, (_, factor) in CURRENT_UNITS.items()}
    else:
        factors = VALUE_UNITS[quantity]
    if unit not in factors:
        raise InputError(
            f"Unit '{unit}' is not a unit of {quantity.replace('_', '-')}",
            f"Known units: {', '.join(factors)}",
        )
    return factors[unit]


def _rounded(value: float, figures: int) -> str:
    """Significant figures without an exponent."""
    if value == 0 or not math.isfinite(value):
        return f"{value:g}"
    digits = max(0, figures - 1 - math.floor(math.log10(abs(value)) + 1e-12))
    text = f"{value:.{digits}f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def written_current(value: float, base: str, figures: int = FIGURES) -> str:
    """A current as engineers write it, three figures: ``'1.37 kA'``, ``'5 xIn'``."""
    if base != "A":
        return f"{_rounded(value, figures)} {base}"
    if abs(value) >= 1000:
        return f"{_rounded(value / 1000, figures)} kA"
    if 0 < abs(value) < 1:
        return f"{_rounded(value * 1000, figures)} mA"
    return f"{_rounded(value, figures)} A"


def written_let_through(energy_a2s: float, figures: int = FIGURES) -> str:
    """A let-through energy as engineers write it, three figures: ``'300 A2s'``, ``'27 x 10^3 A2s'``."""
    if abs(energy_a2s) >= 1e4:
        return f"{_rounded(energy_a2s / 1e3, figures)} x 10^3 A2s"
    return f"{_rounded(energy_a2s, figures)} A2s"


def written(value: float, unit: str, figures: int = FIGURES) -> str:
    """A quantity with its unit, by what it is: a time (``s``), an energy (``A2s``), a ratio, or a current."""
    if unit == "ratio":
        return _rounded(value, figures)
    if unit == "A2s":
        return written_let_through(value, figures)
    return written_time(value, figures) if unit == "s" else written_current(value, unit, figures)


def written_time(time_s: float, figures: int = FIGURES) -> str:
    """A time as engineers write it, three figures: ``'12.3 ms'``, ``'0.4 s'``, ``'2.5 min'``, ``'1 h'``."""
    if 0 < time_s < 0.1:
        return f"{_rounded(time_s * 1e3, figures)} ms"
    if time_s < 120:
        return f"{_rounded(time_s, figures)} s"
    if time_s < 3600:
        return f"{_rounded(time_s / 60, figures)} min"
    return f"{_rounded(time_s / 3600, figures)} h"


def written_between(value: float, interval: tuple[float, float] | None, unit: str) -> str:
    """A quantity with its 95 % interval, in as many figures as show it: ``48.81 s (48.78 s to 48.84 s)``."""
    if interval is None:
        return written(value, unit)
    figures = interval_figures(value, *interval)
    read, low, high = (written(each, unit, figures) for each in (value, *interval))
    return f"{read} ({low} to {high})"


def written_percent(share: float) -> str:
    """A signed share in percent, three figures: ``'+18.6 %'``."""
    percent = 100 * share
    return f"{'+' if percent >= 0 else ''}{_rounded(percent, FIGURES) if abs(percent) >= 1e-3 else '0'} %"


def interval_figures(value: float, lower: float, upper: float) -> int:
    """As many figures as show the interval about a value: its half-width in two of them, three to six in all."""
    half = max(abs(upper - value), abs(value - lower))
    if not (math.isfinite(half) and half > 0 and value != 0):
        return FIGURES
    return min(max(FIGURES, 2 - math.floor(math.log10(half / abs(value)))), MOST_FIGURES)
