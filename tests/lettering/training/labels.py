"""What is printed along axes, drawn at random: numbers, units, titles, and strings without sense."""

import numpy as np

from curvelab.lettering.network import CLASSES

TITLES = (
    "Current in A", "Prospective current kA", "Pre-arcing time in s", "Multiple of rated current", "x In",
    "I/In", "I / Ir", "Time (s)", "t [s]", "I²t in A²s", "Residual current in mA", "Strom in A", "Zeit in s",
    "Courant présumé (A)", "Temps (s)", "Tripping time t / s", "Operating time / s", "Current / A x 10", "I / IΔn",
    "Multiple of IΔn", "x Ir", "Prospective current (r.m.s.) / A", "Let-through I²t / A²s", "Clearing time / s",
    "Break time / ms", "Vielfaches des Nennstroms", "Auslösezeit in s", "I²t (kA²s)", "Peak cut-off current kA",
    "Current in amperes", "Time in seconds", "minutes", "hours", "seconds", "Virtual time [s]", "x10 A",
    "RMS symmetrical", "Cold start, 20 °C", "B16", "C 32", "gG 100 A", "Sheet No. 12", "Schmelzzeit in s",
    "Durée de fusion", "Temps de déclenchement", "Time in ms", "Time [ms]", "Time / min", "Melting time (ms)",
    "Multiples of setting current Ir", "Multiple of rated current In", "Short-circuit current in kA", "I (A)", "t (s)",
    "I [kA]", "t / s", "Total clearing time in seconds", "Multiples of In", "Current in multiples of In", "s", "min",
    "Operating current [A]", "Breaking time (s)", "Temps de fusion en s", "Corrente (A)", "Tiempo (s)",
    "Trip time, seconds", "Current, amperes", "Fault current A", "Sekunden", "Minuten", "Stunden", "Time in minutes",
)  # fmt: skip
CAPITALS = 0.15
"""Share of titles in capitals throughout."""

UNITS = ("s", "ms", "min", "h", "A", "kA", "mA", "x In", "xIn", "x Ir", "%", "k")


def label(rng: np.random.Generator, *, sensible: bool = False) -> tuple[str, str]:
    """A text and the raised exponent that follows it (or none); strings without sense only where allowed."""
    kind = rng.random() * (0.85 if sensible else 1.0)
    if kind < 0.32:
        return number(rng), ""
    if kind < 0.44:
        exponent = int(rng.integers(-5, 8))
        lead = f"{rng.integers(1, 10)} x " if rng.random() < 0.15 else ""
        return lead + "10", str(exponent)
    if kind < 0.55:
        return f"{number(rng)}{' ' if rng.random() < 0.7 else ''}{rng.choice(UNITS)}", ""
    if kind < 0.85:
        title = str(rng.choice(TITLES))
        return (title.upper() if rng.random() < CAPITALS and title.isascii() else title), ""
    letters = np.array(list(CLASSES))
    return "".join(rng.choice(letters, rng.integers(2, 8))), ""


def number(rng: np.random.Generator) -> str:
    """A number in one of the ways they are printed."""
    decade = int(rng.integers(-4, 6))
    digit = int(rng.choice([1, 1, 1, 2, 3, 4, 5, 6, 7, 8, 9, 15, 25]))
    if decade < 0:
        text = f"{digit * 10.0**decade:.{-decade}f}"
        text = text.replace(".", "," if rng.random() < 0.3 else ".")
        return text.removeprefix("0") if rng.random() < 0.1 else text
    value = digit * 10**decade
    style = rng.random()
    if value >= 1000 and style < 0.5:
        return f"{value:,}".replace(",", str(rng.choice([" ", ",", "."])))
    if value >= 1000 and style < 0.65:
        return f"{value / 1000:g}k"
    return str(value) if style < 0.9 else str(rng.integers(0, 100000))
