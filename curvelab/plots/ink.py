"""The inks and line styles of every figure: never colour alone."""

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Any

from curvelab.records.curve import Edge

INK = "#00707a"
"""Deep blue-green: what was read. Contrast on white 5.8:1 (WCAG 2.2, relative luminance)."""
WARM = "#b5521b"
"""What is open, or where a person pointed. Contrast on white 5.2:1."""
GRAPHITE = "#2b2f33"
QUIET = "#6a7178"
MAJOR = "#a9b0b6"
MINOR = "#dde1e4"
PAPER = "#ffffff"

LINE_WIDTH: Mapping[Edge, float] = MappingProxyType({"fast": 0.7, "slow": 1.7, "mean": 1.1})
"""In points, on a page."""
LINE_STYLE: Mapping[Edge, Any] = MappingProxyType({"fast": "-", "slow": "-", "mean": (0.0, (6.0, 2.5))})

FILL = 0.10
HATCH = 0.45
HALO = 0.28
"""Opacities of the area between the edges, of its hatching, and of the 95 % interval."""


@dataclass(frozen=True, kw_only=True, slots=True)
class DeviceInk:
    """What tells one device from the others, in colour and without."""

    colour: str
    hatch: str


DEVICE_INKS = (
    DeviceInk(colour=INK, hatch=""),
    DeviceInk(colour=WARM, hatch="/////"),
    DeviceInk(colour="#54398a", hatch="\\\\\\\\\\"),
    DeviceInk(colour="#3d4246", hatch="....."),
    DeviceInk(colour="#8f2a61", hatch="|||||"),
    DeviceInk(colour="#5f6300", hatch="-----"),
    DeviceInk(colour="#1f4e9c", hatch="xxxxx"),
    DeviceInk(colour="#7a3b12", hatch="ooo"),
)


def device_ink(index: int) -> DeviceInk:
    """The ink of the device at a position; after eight they repeat, told apart by their letters."""
    return DEVICE_INKS[index % len(DEVICE_INKS)]


STYLE: dict[Any, Any] = {
    "font.family": "DejaVu Sans",
    "font.size": 8.0,
    "text.color": GRAPHITE,
    "axes.edgecolor": GRAPHITE,
    "axes.labelcolor": GRAPHITE,
    "axes.linewidth": 0.7,
    "xtick.color": GRAPHITE,
    "ytick.color": GRAPHITE,
    "hatch.linewidth": 0.35,
    "mathtext.fontset": "dejavusans",
    "svg.hashsalt": "curvelab",
    "svg.fonttype": "none",
    "pdf.fonttype": 42,
    "path.simplify": False,
}
"""Settings of the drawing library that every figure is made and saved under."""
