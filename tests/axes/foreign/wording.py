"""What stands along an axis: its range, numbers, title and lines, in any of the ways they are printed."""

import math
from dataclasses import dataclass

import numpy as np

CURRENT_TITLES = {
    "A": (
        "Current in A", "Current (A)", "Current [A]", "I (A)", "I [A]", "I / A", "Prospective current A",
        "Prospective current (A rms)", "Current in amperes", "CURRENT IN AMPERES", "Strom in A", "Courant présumé (A)",
        "Prospective short-circuit current in A", "Fault current, amperes", "RMS symmetrical current (A)",
        "Corrente (A)",
    ),
    "kA": ("Prospective current kA", "Current in kA", "I (kA)", "Short-circuit current [kA]", "Strom in kA"),
    "mA": ("Residual current in mA", "Current (mA)", "I / mA", "Residual current IΔ (mA)"),
    "xIn": (
        "Multiples of rated current", "Multiple of rated current In", "I / In", "I/In", "x In",
        "Current in multiples of In", "Vielfaches des Nennstroms", "Multiples of In",
        "Multiple of the rated current (x In)", "× In",
    ),
    "xIr": ("Multiple of setting current Ir", "I / Ir", "x Ir", "I/Ir", "Multiples of Ir"),
}  # fmt: skip
TIME_TITLES = {
    "s": (
        "Time in s", "Time (s)", "Time [s]", "t (s)", "t [s]", "t / s", "Pre-arcing time in s", "Pre-arcing time (s)",
        "Time in seconds", "TIME IN SECONDS", "Tripping time / s", "Operating time (s)", "Zeit in s",
        "Auslösezeit in s",
        "Temps (s)", "Melting time in seconds", "Virtual time (s)", "Clearing time, seconds",
    ),
    "ms": ("Time in ms", "Time (ms)", "t [ms]", "Break time / ms"),
    "min": ("Time in minutes", "Time (min)", "t / min"),
}  # fmt: skip
FACTORED = {10.0: ("A x 10", "Current in A x 10", "Current / A × 10"), 100.0: ("Current in A x 100", "A x 100")}
NUMBERS = ("plain", "power", "thousands", "apart", "spaced", "comma", "grouped", "units")
SUPERSCRIPT = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")


@dataclass(frozen=True, kw_only=True, slots=True)
class Number:
    """A number along an axis: its printed value, its text and the raised exponent that follows."""

    value: float
    text: str
    exponent: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class Along:
    """One log axis: printed ends, unit, factor, title, numbers, and the values that have a line (decades, others)."""

    unit: str
    factor: float
    low: float
    high: float
    title: str
    numbers: tuple[Number, ...]
    decades: tuple[float, ...]
    others: tuple[float, ...]


def current_axis(rng: np.random.Generator) -> Along:
    """A current axis of one to four decades."""
    unit = str(rng.choice(["A", "A", "A", "kA", "mA", "xIn", "xIn", "xIr"]))
    factor = float(rng.choice([1.0, 1.0, 1.0, 1.0, 1.0, 10.0, 100.0])) if unit == "A" else 1.0
    titles = FACTORED[factor] if factor > 1 else CURRENT_TITLES[unit]
    low = {"A": 10.0 / factor, "kA": 0.1, "mA": 10.0, "xIn": 1.0, "xIr": 1.0}[unit]
    return _axis(rng, unit, factor, low, int(rng.integers(2, 4)), titles)


def time_axis(rng: np.random.Generator) -> Along:
    """A time axis of three to six decades."""
    unit = str(rng.choice(["s", "s", "s", "s", "ms", "min"]))
    low = {"s": float(rng.choice([0.001, 0.01])), "ms": 1.0, "min": 0.01}[unit]
    return _axis(rng, unit, 1.0, low, int(rng.integers(3, 7)), TIME_TITLES[unit])


def _axis(
    rng: np.random.Generator, unit: str, factor: float, low: float, decades: int, titles: tuple[str, ...]
) -> Along:
    high = low * 10.0**decades
    if rng.random() < 0.25:  # frames also begin and end inside a decade
        low *= float(rng.choice([1.0, 0.5, 2.0]))
        high *= float(rng.choice([1.0, 3.0, 5.0]))
    minor = [(2, 3, 4, 5, 6, 7, 8, 9), (2, 3, 4, 5, 6, 7, 8, 9), (2, 3, 4, 5, 6, 8), (2, 5), ()][rng.integers(5)]
    style = str(rng.choice(NUMBERS))
    labelled = (1,) if style == "power" or decades > 4 else [(1,), (1, 2, 5), (1, 5), (1, 3)][rng.integers(4)]
    if style == "units" and (unit.startswith("x") or factor > 1):
        style = "plain"
    values = _values(low, high, labelled)
    return Along(
        unit=unit,
        factor=factor,
        low=low,
        high=high,
        title=str(rng.choice(titles)),
        numbers=tuple(_number(value, style, unit) for value in values),
        decades=tuple(_values(low, high, (1,))),
        others=tuple(_values(low, high, minor)),
    )


def _values(low: float, high: float, digits: tuple[int, ...]) -> list[float]:
    exponents = range(math.floor(math.log10(low)) - 1, math.ceil(math.log10(high)) + 1)
    values = (float(f"{digit}e{exponent}") for exponent in exponents for digit in digits)
    return [value for value in values if low * (1 - 1e-9) <= value <= high * (1 + 1e-9)]


def _number(value: float, style: str, unit: str) -> Number:
    text = f"{value:.10g}" if value < 1e6 else f"{value:.0f}"
    exponent = ""
    match style:
        case "power":
            text, exponent = "10", str(round(math.log10(value)))
        case "thousands" if value >= 1000:
            text = f"{value / 1000:g}k"
        case "apart" if value >= 1000:
            text = f"{value / 1000:g} k"
        case "spaced" if value >= 1000:
            text = f"{value:,.0f}".replace(",", " ")
        case "comma":
            text = text.replace(".", ",")
        case "grouped" if value >= 1000:
            text = f"{value:,.0f}"
        case "units":
            text = _with_unit(value, unit)
    return Number(value=value, text=text, exponent=exponent)


def _with_unit(value: float, unit: str) -> str:
    """``500 ms``, ``10 s``, ``2 min``, ``1 h``; ``5 kA`` on a current axis."""
    if unit == "A" and value >= 1000:
        return f"{value / 1000:g} kA"
    if unit == "s" and value < 1:
        return f"{value * 1000:g} ms"
    return f"{value:g} {unit}"
