"""The worksheet a person would write for a drawn sheet: marks clicked on grid crossings, guides clicked on lines."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np

from demo_curves.drawing.design import AxisDesign
from demo_curves.drawing.guides import guide_places
from demo_curves.drawing.scales import GridLine
from demo_curves.drawing.toml import Entry, tables
from demo_curves.drawing.truth import PlotTruth, SheetTruth


@dataclass(frozen=True, kw_only=True, slots=True)
class Clicks:
    """How well places are clicked: standard deviations of each coordinate in px of the sheet."""

    seed: int
    marks_px: float = 0.7
    guides_px: float = 1.5
    marks: int = 3  # an axis
    guides: int = 2  # a curve, at most


@dataclass(frozen=True, kw_only=True, slots=True)
class WorksheetHead:
    """What the worksheet says besides the places: file, document and devices."""

    file: str
    document: Mapping[str, object]
    devices: Sequence[Mapping[str, object]]
    page: int = 1
    colours: bool = False  # name each line's colour
    skip: frozenset[str] = field(default_factory=frozenset)  # curves left out


def worksheet_text(truth: SheetTruth, head: WorksheetHead, clicks: Clicks, plot_number: int = 1) -> str:
    """The whole file."""
    plot = truth.plots[plot_number - 1]
    rng = np.random.default_rng(clicks.seed)
    per_px = 1.0 if truth.unit == "px" else 72.0 / truth.dpi
    sheet: dict[str, object] = {"file": head.file}
    if truth.unit == "pt" or head.page > 1:
        sheet["page"] = head.page
    if len(truth.plots) > 1:
        sheet["plot"] = plot_number
    entries: list[Entry] = [
        Entry("", {"format": 1}),
        Entry("[document]", head.document),
        Entry("[sheet]", sheet),
        Entry("[axes.current]", _axis(plot, rng, clicks, per_px, of_current=True)),
        Entry(f"[axes.{plot.value.quantity}]", _axis(plot, rng, clicks, per_px, of_current=False)),
    ]
    entries += _curves(plot, head, clicks, rng, per_px)
    entries += tables_of_devices(head.devices)
    return tables(entries)


def tables_of_devices(devices: Sequence[Mapping[str, object]]) -> list[Entry]:
    """[[devices]] entries; their `breaking` and `derating` lists become tables of their own."""
    entries = []
    for device in devices:
        plain = {key: value for key, value in device.items() if key not in {"breaking", "derating", "settings"}}
        entries.append(Entry("[[devices]]", plain))
        if "settings" in device:
            entries.append(Entry("[devices.settings]", device["settings"]))  # type: ignore[arg-type]
        for name in ("breaking", "derating"):
            entries += [Entry(f"[[devices.{name}]]", row) for row in device.get(name, ())]  # type: ignore[attr-defined]
    return entries


def _axis(
    plot: PlotTruth, rng: np.random.Generator, clicks: Clicks, per_px: float, *, of_current: bool
) -> dict[str, object]:
    axis: AxisDesign = plot.current if of_current else plot.value
    lines = plot.current_lines if of_current else plot.value_lines
    entry: dict[str, object] = {"scale": "log", "unit": axis.unit}
    if axis.factor != 1:
        entry["factor"] = axis.factor
    entry["direction"] = "x" if (plot.current_direction == "x") == of_current else "y"
    entry["marks"] = [
        {"at": _clicked(_crossing(plot, line, of_current), rng, clicks.marks_px * per_px, per_px), "value": line.value}
        for line in _marked(lines, axis, clicks.marks)
    ]
    return entry


def _marked(lines: Sequence[GridLine], axis: AxisDesign, count: int) -> list[GridLine]:
    """Lines that carry a number, the outermost first of all, the others spread between."""
    numbered = [line for line in lines if int(f"{line.value:e}"[0]) in axis.labelled]
    picks = np.unique(np.rint(np.linspace(0, len(numbered) - 1, count)).astype(int))
    return [numbered[pick] for pick in picks]


def _crossing(plot: PlotTruth, line: GridLine, of_current: bool) -> np.ndarray:
    """Where a grid line meets the first line of the other axis."""
    other = (plot.value_lines if of_current else plot.current_lines)[0].value
    current, value = (line.value, other) if of_current else (other, line.value)
    return plot.places(np.array([current * plot.current.scale]), np.array([value * plot.value.scale]))[0]


def _clicked(place: np.ndarray, rng: np.random.Generator, spread: float, per_px: float) -> list[float]:
    digits = 1 if per_px == 1.0 else 2
    return [round(float(at), digits) for at in place + rng.normal(0.0, spread, size=2)]


def _curves(
    plot: PlotTruth, head: WorksheetHead, clicks: Clicks, rng: np.random.Generator, per_px: float
) -> list[Entry]:
    entries = []
    for curve in plot.curves:
        design = curve.design
        if design.name in head.skip:
            continue
        entry: dict[str, object] = {"edge": design.edge, "meaning": design.meaning, "element": design.element}
        if len(design.devices) > 1:
            entry["devices"] = list(design.devices)
        elif design.devices and len(head.devices) > 1:
            entry["device"] = design.devices[0]
        chosen = guide_places(curve, plot, clicks.guides, rng, per_px)
        entry["through"] = [_clicked(place, rng, clicks.guides_px * per_px, per_px) for place in chosen]
        if head.colours:
            entry["colour"] = design.colour
        if design.at:
            entry["at"] = dict(design.at)
        entry.update(design.extra)
        entries.append(Entry("[[curves]]", entry))
    return entries
