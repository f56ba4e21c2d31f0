"""What is required of a disconnection, and how practices reckon the loop impedance for it."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import ROUND_HALF_UP, Decimal
from typing import Literal

from curvelab.calculators.facts import Origin, lies_in, rows_of
from curvelab.errors import InputError

System = Literal["TN", "TT"]
SYSTEMS: tuple[System, ...] = ("TN", "TT")
Circuit = Literal["final", "distribution"]
CIRCUITS: tuple[Circuit, ...] = ("final", "distribution")
DEFAULT_PRACTICE = "bs7671"
"""The most cautious of the published ones: it reckons with the least voltage."""


@dataclass(frozen=True, kw_only=True, slots=True)
class RequiredTime:
    """The longest time in s in which the current must be off; ``origin`` None where the person asking gave it."""

    time_s: float
    origin: Origin | None


@dataclass(frozen=True, kw_only=True, slots=True)
class Practice:
    """How a greatest loop impedance is reckoned: ``voltage_factor`` x U0 over a tripping current.

    ``current`` says which: the one that surely trips, or the mean one, of breakers in ``mean_multiples`` of rated
    current by characteristic. A loop measured cold must stay below ``measured_factor`` of it. Tables of the practice
    print ``decimals`` places.
    """

    name: str
    title: str
    voltage_factor: float
    current: Literal["sure", "mean"]
    decimals: int
    measured_factor: float
    mean_multiples: Mapping[str, float]
    origin: Origin
    measured_origin: Origin

    def printed(self, impedance_ohm: float) -> float:
        """An impedance as tables print it."""
        step = Decimal(1).scaleb(-self.decimals)
        return float(Decimal(repr(impedance_ohm)).quantize(step, rounding=ROUND_HALF_UP))


def practice_named(name: str) -> Practice:
    """A practice by its name.

    Raises
    ------
    InputError
        None is called so; the message lists them.
    """
    rows = rows_of("practices", "practices")
    row = next((each for each in rows if each["name"] == name), None)
    if row is None:
        raise InputError(f"'{name}' is not a practice", f"Known practices: {', '.join(each['name'] for each in rows)}")
    return Practice(
        name=name,
        title=row["title"],
        voltage_factor=row["voltage_factor"],
        current=row["current"],
        decimals=row["decimals"],
        measured_factor=row["measured_factor"],
        mean_multiples=row.get("mean_multiples", {}),
        origin=row["origin"],
        measured_origin=Origin(
            clause=row["measured_clause"], source=row["measured_source"], confidence=row["measured_confidence"]
        ),
    )


def required_time(voltage_v: float, system: System, circuit: Circuit) -> RequiredTime:
    """The required time of an a.c. circuit at a nominal voltage to earth in V.

    Raises
    ------
    InputError
        The tables have no time for it.
    """
    for row in rows_of("disconnection", "times"):
        if row["system"] == system and row["circuit"] == circuit and lies_in(voltage_v, row, "v"):
            return RequiredTime(time_s=row["time_s"], origin=row["origin"])
    raise InputError(
        f"No disconnection time is tabulated for a {circuit} circuit of a {system} system at {voltage_v:g} V to earth",
        "More than 50 V and up to 1000 V a.c. to earth",
        "Give the required time",
    )


def touch_limit() -> tuple[float, Origin]:
    """The limit in V of the electrode's resistance times the rated residual current in a TT system."""
    row = rows_of("disconnection", "touch")[0]
    return row["voltage_v"], row["origin"]
