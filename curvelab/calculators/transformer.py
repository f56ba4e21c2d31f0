"""A transformer between two devices: the line current on the primary side for a fault on the secondary side."""

import re
from dataclasses import dataclass
from math import isfinite

from curvelab.calculators.facts import Origin, rows_of
from curvelab.errors import InputError

_CLOCK = re.compile(r"\d+$")


@dataclass(frozen=True, kw_only=True, slots=True)
class FaultFactor:
    """Of one kind of fault, the largest line current of the primary side at a ratio of 1, for 1 A in a faulted line."""

    fault: str
    factor: float
    origin: Origin


@dataclass(frozen=True, kw_only=True, slots=True)
class Transformer:
    """``ratio`` of line voltages, primary over secondary, and how each kind of fault is passed on."""

    ratio: float
    connection: str
    faults: tuple[FaultFactor, ...]


def transformer_of(ratio: float, connection: str) -> Transformer:
    """A transformer by its ratio of line voltages and its connection, such as ``Dyn`` or ``Dyn11``.

    Raises
    ------
    InputError
        The ratio is not positive, or the connection is not tabulated.
    """
    if not (isfinite(ratio) and ratio > 0):
        raise InputError(f"A ratio of {ratio:g} cannot be", "Primary over secondary line voltage, such as 27.5")
    rows = [row for row in rows_of("transformers", "factors") if row["connection"] == _CLOCK.sub("", connection)]
    if not rows:
        known = dict.fromkeys(row["connection"] for row in rows_of("transformers", "factors"))
        raise InputError(f"The connection '{connection}' is not known", f"Known: {', '.join(known)}")
    faults = (FaultFactor(fault=row["fault"], factor=row["factor"], origin=row["origin"]) for row in rows)
    return Transformer(ratio=ratio, connection=connection, faults=tuple(faults))


def transformer_between(ratio: float | None, connection: str | None) -> Transformer | None:
    """The transformer where both are given; None where none is.

    Raises
    ------
    InputError
        One is missing, or `transformer_of` refuses them.
    """
    if ratio is None and connection is None:
        return None
    if ratio is None or connection is None:
        raise InputError(
            "A transformer has a ratio and a connection", "A ratio, and one such as Dyn", "Give both, or none"
        )
    return transformer_of(ratio, connection)
