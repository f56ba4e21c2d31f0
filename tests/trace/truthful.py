"""Axes straight from a drawn sheet's truth, so that tracing is measured alone; a trace's distance from that truth."""

import tomllib
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from curvelab.records.axes import Axes, Axis, GridLine, PlaneMap
from curvelab.records.sheet import Sheet
from curvelab.records.trace import Trace
from curvelab.sheets.open import sheet_from_bytes
from curvelab.trace.guide import Guide
from demo_curves.drawing.geometry import densified
from demo_curves.drawing.truth import CurveTruth, PlotTruth
from tests.drawn import DrawnSheet

Points = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True, slots=True)
class TraceScore:
    rms: float
    p99: float
    largest: float
    completeness: float
    inside: float
    """Share of the errors within 1.96 stated standard deviations."""


def sheet_of(drawn: DrawnSheet) -> Sheet:
    return sheet_from_bytes(drawn.name, drawn.data)


def axes_of(sheet: Sheet, plot: PlotTruth) -> Axes:
    """The exact map, and grid lines where they are printed: a snapped one is found in the pixels beside its value."""
    current, value = _span(plot.current), _span(plot.value)
    lines = [*_lines(plot, "current"), *_lines(plot, "value")]
    unit = sheet.pixels.size_in_places if not sheet.is_vector else 1.0
    grid = tuple(_line(sheet, plot, axis, at, major, unit) for axis, at, major in lines)
    corners = plot.place_map.forward(_corners(plot.frame))
    return Axes(
        current=Axis(quantity="current", scale="log", unit="A", factor=1.0, direction="x", marks=()),
        value=Axis(quantity="time", scale="log", unit="s", factor=1.0, direction="y", marks=()),
        map=_map(plot, current, value),
        frame=(*corners.min(axis=0).tolist(), *corners.max(axis=0).tolist()),
        mark_residual_rms=0.0,
        grid=grid,
    )


def guides_of(drawn: DrawnSheet) -> dict[str, Guide]:
    """The guide places of the worksheet by the name of the line."""
    entries = tomllib.loads(drawn.worksheet)["curves"]
    names = [curve.design.name for curve in drawn.truth.plots[0].curves]
    assert len(entries) == len(names)
    return {
        name: Guide(
            through=tuple((float(x), float(y)) for x, y in entry["through"]),
            colour=entry.get("colour"),
            avoid=tuple(tuple(box) for box in entry.get("avoid", [])),
        )
        for name, entry in zip(names, entries, strict=True)
    }


def score_trace(trace: Trace, curve: CurveTruth) -> TraceScore:
    truth = densified(curve.places, 0.25)
    away = _distance(trace.places, truth)
    seen = np.vstack([densified(run, 0.5) for run in curve.visible_runs()])
    near = cKDTree(_drawn(trace)).query(seen)[0] <= 2.0
    return TraceScore(
        rms=float(np.sqrt(np.mean(away**2))),
        p99=float(np.quantile(away, 0.99)),
        largest=float(away.max()),
        completeness=float(near.mean()),
        inside=float(np.mean(away < 1.96 * trace.sd)),
    )


def _drawn(trace: Trace) -> Points:
    """The trace's polyline, sampled, open at its gaps."""
    starts = {gap.start for gap in trace.gaps}
    cuts = [k + 1 for k, place in enumerate(trace.places.tolist()) if tuple(place) in starts]
    return np.vstack([densified(part, 0.5) if len(part) > 1 else part for part in np.split(trace.places, cuts)])


def _distance(points: Points, line: Points) -> Points:
    """Distance to the segments beside the nearest vertex; up to 2 units past an end only the normal part counts."""
    nearest = np.clip(cKDTree(line).query(points)[1], 1, len(line) - 2)
    best = np.full(len(points), np.inf)
    for start, end in ((line[nearest - 1], line[nearest]), (line[nearest], line[nearest + 1])):
        step = end - start
        length = np.maximum(np.hypot(*step.T), 1e-12)
        along = ((points - start) * step).sum(axis=1) / length
        low = np.where(nearest <= 1, -2.0, 0.0)
        high = length + np.where(nearest >= len(line) - 2, 2.0, 0.0)
        foot = start + (np.clip(along, low, high) / length)[:, None] * step
        best = np.minimum(best, np.hypot(*(points - foot).T))
    return best


def _span(axis) -> tuple[float, float]:
    return axis.low * axis.scale, axis.high * axis.scale


def _lines(plot: PlotTruth, axis: str) -> list[tuple[str, float, bool]]:
    design = getattr(plot, axis)
    return [(axis, line.value * design.scale, line.major) for line in getattr(plot, f"{axis}_lines")]


def _corners(frame: tuple[float, float, float, float]) -> Points:
    left, top, right, bottom = frame
    return np.array([[left, top], [right, top], [right, bottom], [left, bottom]], dtype=float)


def _map(plot: PlotTruth, current: tuple[float, float], value: tuple[float, float]) -> PlaneMap:
    """The truth's affine map as a plane map (its place maps are affine)."""
    a, b = np.meshgrid(np.linspace(*np.log10(current), 5), np.linspace(*np.log10(value), 5))
    scaled = np.stack([a.ravel(), b.ravel()], axis=1)
    places = plot.places(10.0 ** scaled[:, 0], 10.0 ** scaled[:, 1])
    centre = places.mean(axis=0)
    reach = float(np.ptp(places, axis=0).max() / 2)
    design = np.column_stack([np.ones(len(places)), (places - centre) / reach])
    coefficients, *_ = np.linalg.lstsq(design, scaled, rcond=None)
    assert np.abs(design @ coefficients - scaled).max() < 1e-9
    return PlaneMap(
        centre=centre,
        reach=reach,
        projective=np.r_[coefficients[:, 0], coefficients[:, 1], 0.0, 0.0],
        powers=(),
        warp=np.zeros((2, 0)),
        covariance=np.zeros((8, 8)),
    )


def _line(sheet: Sheet, plot: PlotTruth, axis: str, at: float, major: bool, unit: float) -> GridLine:
    other = _span(plot.value if axis == "current" else plot.current)
    along = np.geomspace(*other, 60)
    fixed = np.full(60, at)
    places = plot.places(fixed, along) if axis == "current" else plot.places(along, fixed)
    if not sheet.is_vector:
        places = _printed(sheet, places)
    width = (2.0 if major else 1.2) * unit
    return GridLine(axis=axis, value=at, points=places, sd=0.02 * unit, width=width, darkness=0.5)


def _printed(sheet: Sheet, places: Points) -> Points:
    """The line moved across by the median centroid of the ink within 1.6 px of it."""
    grey = sheet.pixels.grey
    vertical = np.ptp(places[:, 1]) > np.ptp(places[:, 0])
    k = 0 if vertical else 1
    shifts = []
    for place in np.linspace(places[0], places[-1], 300):
        centre = round(place[k])
        line = round(place[1 - k])
        low, high = centre - 3, centre + 4
        if low < 0 or high > grey.shape[1 - k] or not 0 <= line < grey.shape[k]:
            continue
        ink = (grey[line, low:high] if vertical else grey[low:high, line]).astype(float)
        ink = np.clip(ink.max() - ink - 12.0, 0.0, None)
        away = np.arange(low, high) - place[k]
        ink[np.abs(away) > 2.2] = 0.0
        if ink.sum() > 0:
            shifts.append(float((ink * away).sum() / ink.sum()))
    moved = places.copy()
    if shifts:
        moved[:, k] += float(np.median(shifts))
    return moved
