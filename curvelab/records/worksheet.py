"""A worksheet: everything a person says about one reading. Its text form is TOML, see the room ``worksheets``."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from curvelab.records.axes import Direction, Mark, Scale
from curvelab.records.curve import NO_SETTINGS, Conditions, Edge
from curvelab.records.device import Nameplate, Tolerance
from curvelab.records.trace import Place
from curvelab.records.warning import Acceptance

Box = tuple[float, float, float, float]


@dataclass(frozen=True, kw_only=True, slots=True)
class Document:
    """Where the sheet comes from; free text, kept with the device."""

    title: str = ""
    issue: str = ""
    date: str = ""
    maker: str = ""
    note: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetEntry:
    """Which plot of which page; ``file`` is relative to the worksheet.

    ``plot`` is None where it is not said: the largest of the page.
    """

    file: str
    page: int = 1
    plot: int | None = None
    sha256: str | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class AxisEntry:
    """What is said of one axis; None, or no marks, where it is left to be read."""

    quantity: Literal["current", "time", "let_through", "peak"]
    scale: Scale | None = None
    unit: str | None = None
    factor: float | None = None
    direction: Direction | None = None
    marks: tuple[Mark, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class CurveEntry:
    """What is said of one curve: guide places on the sheet, or points typed from a table.

    ``points`` are (current in ``base``, value in the base unit) pairs; ``base`` is for typed points, traced curves take
    the axis's.
    """

    edge: Edge | None = None
    meaning: str | None = None
    element: str | None = None
    devices: tuple[str, ...] = ()
    through: tuple[Place, ...] = ()
    colour: str | None = None
    avoid: tuple[Box, ...] = ()
    at: Mapping[str, float] = field(default_factory=lambda: NO_SETTINGS)
    conditions: Conditions = Conditions()
    tolerance: Tolerance | None = None
    points: tuple[tuple[float, float], ...] = ()
    base: str | None = None
    source: str = ""


@dataclass(frozen=True, kw_only=True, slots=True)
class DeviceEntry:
    """One device, or with ``ratings`` a series: then ``nameplate.key`` carries ``{rating}``."""

    nameplate: Nameplate
    ratings: tuple[float, ...] = ()
    tolerance: Tolerance | None = None


@dataclass(frozen=True, kw_only=True, slots=True)
class Worksheet:
    """One reading's worksheet, format 1. ``sheet`` is None for typed points and devices without curves."""

    document: Document = Document()
    sheet: SheetEntry | None = None
    current: AxisEntry | None = None
    value: AxisEntry | None = None
    curves: tuple[CurveEntry, ...] = ()
    devices: tuple[DeviceEntry, ...] = ()
    accepted: tuple[Acceptance, ...] = ()
    text: str = ""
    """The worksheet as it was written, kept as evidence."""
