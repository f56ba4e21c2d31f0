"""A device as it is stored: its nameplate and its curves."""

from dataclasses import dataclass
from typing import Literal

from curvelab.records.curve import Curve

KINDS = ("fuse", "mcb", "mccb", "acb", "rcd", "rcbo", "relay", "switch")


@dataclass(frozen=True, kw_only=True, slots=True)
class Breaking:
    """One rated breaking (or making, withstand) capacity."""

    quantity: str
    value_a: float
    voltage_v: float | None = None
    supply: Literal["ac", "dc"] | None = None
    duration_s: float | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Setting:
    """One adjustable setting: a range (``from_value`` to ``to_value``) or ``steps``.

    ``base`` is what a current setting is counted in (``xIn``, ``A``...), ``at`` the current a time setting holds at
    (``6 Ir``).
    """

    name: str
    from_value: float | None = None
    to_value: float | None = None
    steps: tuple[float, ...] = ()
    base: str | None = None
    at: str | None = None
    can_be_off: bool = False


@dataclass(frozen=True, kw_only=True, slots=True)
class Derating:
    """Factor on the rated or set current at an ambient temperature."""

    ambient_c: float
    factor: float
    element: str = "whole"


@dataclass(frozen=True, kw_only=True, slots=True)
class Tolerance:
    """Stated limits about a mean line: relative in current, relative in time, or in seconds; (lower, upper) each."""

    current: tuple[float, float] | None = None
    time: tuple[float, float] | None = None
    time_s: tuple[float, float] | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Nameplate:
    """What a device is called and rated; None where it is not said."""

    key: str
    kind: str
    characteristic: str | None = None
    standard: str | None = None
    standard_edition: str | None = None
    rated_current_a: float | None = None
    rated_residual_current_a: float | None = None
    residual_waveform: str | None = None
    residual_delay: str | None = None
    rated_voltage_v: float | None = None
    poles: int | None = None
    frequency_hz: float | None = None
    ambient_reference_c: float | None = None
    utilisation_category: str | None = None
    maker: str | None = None
    series: str | None = None
    catalogue: str | None = None
    breaking: tuple[Breaking, ...] = ()
    settings: tuple[Setting, ...] = ()
    derating: tuple[Derating, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class DeviceRecord:
    """A nameplate with curves; ``revision`` and ``state`` are set once it comes from a library."""

    nameplate: Nameplate
    curves: tuple[Curve, ...] = ()
    revision: int | None = None
    state: str | None = None
