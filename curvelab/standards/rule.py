"""One requirement of a standard, and which devices it is for."""

import re
from dataclasses import dataclass
from math import inf
from typing import Literal

from curvelab.records.curve import Edge
from curvelab.records.device import Nameplate

_STANDARD_NUMBER = re.compile(r"[A-Z]?\d[\d.]*(?:-\d+)*")


@dataclass(frozen=True, kw_only=True, slots=True)
class Applicability:
    """A kind of device, and the numbers of the standards that bring it under the table.

    A device that names no standard is taken by its kind, unless ``named`` asks for the name.
    """

    kind: str
    standards: tuple[str, ...]
    named: bool = False

    def covers(self, plate: Nameplate) -> bool:
        """Whether a device is of the kind and under one of the standards."""
        if plate.kind != self.kind:
            return False
        if plate.standard is None:
            return not self.named
        return any(number in self.standards for number in _STANDARD_NUMBER.findall(plate.standard.upper()))


@dataclass(frozen=True, kw_only=True, slots=True)
class Span:
    """Above one value, up to and including another."""

    above: float = 0.0
    up_to: float = inf

    def holds(self, value: float | None) -> bool:
        """Whether a value lies in it; one that is not known only where everything does."""
        if value is None:
            return self.above == 0.0 and self.up_to == inf
        return self.above < value <= self.up_to


@dataclass(frozen=True, kw_only=True, slots=True)
class Devices:
    """Which devices of a table a rule is for; an empty field is for all."""

    applies_to: tuple[Applicability, ...]
    characteristics: tuple[str, ...] = ()
    rated_a: Span = Span()
    residual_a: Span = Span()
    residual_delay: Literal["general", "S"] | None = None
    residual_waveforms: tuple[str, ...] = ()

    def include(self, plate: Nameplate) -> bool:
        """Whether a device is one of them. A residual current device that says nothing of a delay is general."""
        return (
            any(entry.covers(plate) for entry in self.applies_to)
            and (not self.characteristics or plate.characteristic in self.characteristics)
            and self.rated_a.holds(plate.rated_current_a)
            and self.residual_a.holds(plate.rated_residual_current_a)
            and self.residual_delay in (None, plate.residual_delay or "general")
            and (not self.residual_waveforms or plate.residual_waveform in self.residual_waveforms)
        )


@dataclass(frozen=True, kw_only=True, slots=True)
class Asked:
    """How the device is asked for a rule.

    ``meaning`` is what is to end; ``edge`` the line the limit is for where it is not the fast edge of a hold and the
    slow edge of a trip; ``waveform`` a residual current no curve can be drawn for yet, so that the rule waits.
    """

    start: Literal["cold", "hot"] | None = None
    supply: Literal["ac", "dc"] | None = None
    path: Literal["line_to_neutral", "residual"] | None = None
    meaning: Literal["pre_arcing", "operating"] | None = None
    edge: Edge | None = None
    waveform: str | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Rule:
    """One requirement: at ``current`` of ``base`` hold for, or trip within, ``limit_s``.

    ``current_from`` is less than ``current`` where the standard implies the current within a rounding only.
    ``times_settings`` names the settings of which the first the device has multiplies ``limit_s``.
    ``let_through_a2s`` is the limit where the standard states an energy: current^2 x ``limit_s``.
    An ``advisory`` rule is shown, never a verdict.
    """

    id: str
    group: str
    standard: str
    clause: str
    devices: Devices
    asked: Asked
    current: float
    current_from: float
    base: str
    requirement: Literal["hold", "trip"]
    limit_s: float
    strict: bool
    times_settings: tuple[str, ...]
    let_through_a2s: float | None
    source: str
    confidence: Literal["published", "memory", "practice"]
    advisory: bool
    note: str

    @property
    def edge(self) -> Edge:
        """The line the limit is for."""
        return self.asked.edge or ("fast" if self.requirement == "hold" else "slow")

    def is_for(self, plate: Nameplate) -> bool:
        """Whether a device comes under the rule."""
        return self.devices.include(plate)
