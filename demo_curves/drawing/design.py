"""What a sheet looks like, in values and page points, before anything is drawn."""

from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

SCALES = {"mA": 1e-3, "A": 1.0, "kA": 1e3, "ms": 1e-3, "s": 1.0, "min": 60.0, "h": 3600.0, "A2s": 1.0, "kA2s": 1e6}
"""Canonical units in one printed unit: amperes, seconds, A2s. A multiple such as xIn counts as 1."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Page:
    """A page of whole pixels, so that every renderer makes the same image; 72 points to the inch."""

    width_px: int
    height_px: int
    dpi: float
    paper: str = "#ffffff"

    @property
    def width_pt(self) -> float:
        """Width in points."""
        return self.width_px * 72.0 / self.dpi

    @property
    def height_pt(self) -> float:
        """Height in points."""
        return self.height_px * 72.0 / self.dpi


@dataclass(frozen=True, kw_only=True, slots=True)
class AxisDesign:
    """One logarithmic axis. `low` and `high` are printed numbers; a printed number times `scale` is canonical."""

    quantity: str  # current | time | let_through
    unit: str
    low: float
    high: float
    label: str
    factor: float = 1.0
    ticks: str = "plain"  # plain | power | thousands
    labelled: tuple[int, ...] = (1,)  # which digits of a decade carry a number

    @property
    def scale(self) -> float:
        """Canonical units in one printed number."""
        return self.factor * SCALES.get(self.unit, 1.0)


@dataclass(frozen=True, kw_only=True, slots=True)
class GridStyle:
    """Grid lines: decades are major, the digits `minor` of each decade are minor."""

    major_width_pt: float = 0.8
    minor_width_pt: float = 0.4
    major_colour: str = "#808080"
    minor_colour: str = "#c0c0c0"
    minor: tuple[int, ...] = (2, 3, 4, 5, 6, 7, 8, 9)
    frame_width_pt: float = 1.2
    frame_colour: str = "#000000"


@dataclass(frozen=True, kw_only=True, slots=True)
class CurveLabel:
    """Words near a line: at the share `along` of its printed length, moved by (dx, dy) points; `boxed` hides it."""

    text: str
    along: float = 0.5
    offset_pt: tuple[float, float] = (4.0, 0.0)
    boxed: bool = False
    leader: bool = False
    size_pt: float = 7.0


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class CurveDesign:
    """One line in canonical values, straight in log-log between its vertices. Width 0: only a band's boundary."""

    name: str
    current: NDArray[np.float64]
    value: NDArray[np.float64]  # seconds, or A2s on a let-through sheet
    edge: str
    meaning: str
    element: str
    devices: tuple[str, ...] = ()
    colour: str = "#000000"
    width_pt: float = 1.2
    dash_pt: tuple[float, ...] = ()
    at: Mapping[str, float] = field(default_factory=dict)
    extra: Mapping[str, object] = field(default_factory=dict)  # further worksheet keys, e.g. start = "cold"
    labels: tuple[CurveLabel, ...] = ()


@dataclass(frozen=True, kw_only=True, slots=True)
class BandFill:
    """The area between two named curves, tinted or hatched (spacing in points, 0 for a plain tint)."""

    between: tuple[str, str]
    colour: str
    hatch_pt: float = 0.0
    hatch_width_pt: float = 0.4


@dataclass(frozen=True, kw_only=True, slots=True)
class Note:
    """Free words on the page, anchored at their first baseline; more lines follow beneath."""

    text: str
    at_pt: tuple[float, float]
    size_pt: float = 8.0
    bold: bool = False
    anchor: str = "start"  # start | middle | end
    rotation: float = 0.0  # degrees, anticlockwise
    boxed: bool = False  # on a white ground with a thin border, hiding what lies beneath
    colour: str = "#000000"


@dataclass(frozen=True, kw_only=True, slots=True)
class TitleBlock:
    """A ruled table of (caption, entry) cells in rows, top left corner at `at_pt`."""

    at_pt: tuple[float, float]
    width_pt: float
    rows: tuple[tuple[tuple[str, str], ...], ...]
    row_height_pt: float = 22.0


@dataclass(frozen=True, kw_only=True, slots=True)
class PlotDesign:
    """One pair of axes: its frame (left, top, right, bottom) in points, grid, lines, bands and legend."""

    frame_pt: tuple[float, float, float, float]
    current: AxisDesign
    value: AxisDesign
    curves: tuple[CurveDesign, ...]
    grid: GridStyle = GridStyle()
    bands: tuple[BandFill, ...] = ()
    legend_at_pt: tuple[float, float] | None = None
    legend: tuple[tuple[str, str], ...] = ()  # (curve name, words)
    tick_size_pt: float = 8.0
    label_size_pt: float = 9.0
    current_direction: str = "x"


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetDesign:
    """A whole page: plots and what is printed around them."""

    page: Page
    plots: tuple[PlotDesign, ...]
    font: str = "sans"  # sans | serif | mono | stix
    notes: tuple[Note, ...] = ()
    title_block: TitleBlock | None = None
    border_pt: float = 0.0  # distance of a drawn page border from the paper's edge; 0 for none
