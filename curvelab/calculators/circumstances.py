"""What a device has to disconnect: voltage, system, circuit, practice and the loop of the fault."""

from dataclasses import dataclass
from math import isfinite

from curvelab.calculators.practices import CIRCUITS, DEFAULT_PRACTICE, SYSTEMS, Circuit, System
from curvelab.errors import InputError
from curvelab.units import written, written_current

_NUMBERS = ("voltage_v", "required_s", "loop_ohm", "breaker_time_s")


@dataclass(frozen=True, kw_only=True, slots=True)
class Circumstances:
    """What a device has to disconnect.

    Parameters
    ----------
    voltage_v : float
        Nominal a.c. voltage to earth.
    practice : str
        Name of the practice the loop is reckoned by.
    required_s : float, optional
        In place of the tabulated time.
    loop_ohm : float, optional
        Impedance of the fault loop to be judged; in a TT system with a residual current device the resistance of the
        earth electrode with its protective conductor.
    measured : bool
        The loop was measured, its conductors cold; else it is as designed, at the temperature of a fault.
    breaker_time_s : float, optional
        What the breaker adds to the output of a relay.

    Raises
    ------
    InputError
        A number is not positive, or a word is not known.
    """

    voltage_v: float
    system: System = "TN"
    circuit: Circuit = "final"
    practice: str = DEFAULT_PRACTICE
    required_s: float | None = None
    loop_ohm: float | None = None
    measured: bool = False
    breaker_time_s: float | None = None

    def __post_init__(self) -> None:
        for name, words in (("system", SYSTEMS), ("circuit", CIRCUITS)):
            if getattr(self, name) not in words:
                raise InputError(f"'{getattr(self, name)}' is not a {name}", f"Expected one of: {', '.join(words)}")
        for name in _NUMBERS:
            value = getattr(self, name)
            if value is not None and not (isfinite(value) and value > 0):
                raise InputError(f"{name} = {value:g} cannot be", "A positive number")
        if self.measured and self.loop_ohm is None:
            raise InputError("A measured loop has no impedance", "", "Give the loop impedance that was measured")


@dataclass(frozen=True, kw_only=True, slots=True)
class Reckoning:
    """How a loop's current is reckoned: the share of U0 that drives it, and the factor of loops measured cold.

    ``residual_a`` is the rated residual current the current is also counted in, of a device that acts on it.
    """

    voltage_factor: float
    measured_factor: float
    residual_a: float | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Fault:
    """The fault of a given loop: the current in A that flows, and how it was reckoned in words."""

    current_a: float
    words: str


def fault_of(asked: Circumstances, by: Reckoning) -> Fault | None:
    """The fault in the loop given; None without one. A loop measured cold is turned to the temperature of a fault."""
    if asked.loop_ohm is None:
        return None
    warming = by.measured_factor if asked.measured else 1.0
    current_a = by.voltage_factor * asked.voltage_v / (asked.loop_ohm / warming)
    loop = f"{asked.loop_ohm:g} ohm" if warming == 1.0 else f"({asked.loop_ohm:g} ohm / {warming:.3g})"
    words = f"{written_current(current_a, 'A', 4)} ({written_voltage(asked.voltage_v, by.voltage_factor)} / {loop})"
    if by.residual_a is not None:
        words += f" = {written(current_a / by.residual_a, 'ratio')} IΔn"
    return Fault(current_a=current_a, words=words)


def written_voltage(voltage_v: float, factor: float) -> str:
    """The voltage that drives a fault: ``0.95 x 230 V``."""
    return f"{voltage_v:g} V" if factor == 1.0 else f"{factor:g} x {voltage_v:g} V"
