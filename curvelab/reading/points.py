"""A trace's places as points in values: the hand-over from the sheet's geometry to the fit."""

import numpy as np

from curvelab.reading.warp import warp_sd
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axes, Axis
from curvelab.records.normal import along_axes
from curvelab.records.points import FitPoints
from curvelab.records.trace import Trace

LN10 = float(np.log(10.0))

MIDDLE_OF_STROKE = 0.002
"""Of a stroke's width: standard deviation of its middle, as scans and renderers leave it."""

EDGE_OF_AREA = 0.1 / 3.0**0.5
"""Of what an area's step is spread over: the edge lies anywhere in a tenth of it to either side."""

ALIGNED_PX = 0.03
"""Pixels by which renderers of few sub-pixels move strokes along rows or columns."""

AVERAGED_PX = 100.0
"""Length of line in pixels over which a fit averages."""


def _log_of(axis: Axis, scaled: Floats) -> tuple[Floats, Floats]:
    """log10 of the values, and its derivative by the scaled coordinate."""
    if axis.scale == "log":
        return scaled, np.ones_like(scaled)
    return np.log10(scaled), 1.0 / (LN10 * scaled)


def tangents(places: Floats) -> Floats:
    """Unit directions along a polyline, shape (n, 2): central differences, one-sided at the ends."""
    steps = np.gradient(places, axis=0)
    lengths = np.hypot(steps[:, 0], steps[:, 1])
    return steps / np.where(lengths > 0, lengths, 1.0)[:, None]


def _turned(directions: Floats) -> Floats:
    """Directions turned by a right angle."""
    return np.stack([-directions[:, 1], directions[:, 0]], axis=1)


def _breaks(trace: Trace) -> tuple[int, ...]:
    """Index of the first place behind each gap."""
    found = []
    for gap in trace.gaps:
        to_start = np.hypot(*(trace.places - np.asarray(gap.start)).T)
        to_end = np.hypot(*(trace.places - np.asarray(gap.end)).T)
        found.append(int(max(to_start.argmin(), to_end.argmin())))
    return tuple(sorted(set(found) - {0}))


def fit_points(trace: Trace, axes: Axes, pixel: float = 0.0) -> FitPoints:
    """Points of a trace in log10 coordinates, in the order of the trace.

    The own standard deviation, measured along the line's normal on the sheet, is carried to the normal in log-log: the
    two differ where the decades of the axes differ in length.

    Parameters
    ----------
    trace : Trace
    axes : Axes
    pixel : float
        Size of a pixel in the sheet's unit; 0 where exact strokes were traced.
    """
    scaled = axes.map.scaled(trace.places)
    log_current, by_current = _log_of(axes.current, scaled[:, 0])
    log_value, by_value = _log_of(axes.value, scaled[:, 1])
    to_log = np.stack([by_current, by_value], axis=1)
    jacobian = axes.map.jacobian(trace.places) * to_log[:, :, None]

    along = tangents(trace.places)
    direction = np.einsum("kij,kj->ki", jacobian, along)
    stretch = np.hypot(direction[:, 0], direction[:, 1])
    normal = _turned(direction) / stretch[:, None]
    across = np.abs(np.einsum("ki,kij,kj->k", normal, jacobian, _turned(along)))
    common = axes.map.covariance_at(trace.places) * to_log[:, :, None] * to_log[:, None, :]
    bends = warp_sd(axes)
    return FitPoints(
        log_current=log_current,
        log_value=log_value,
        sd=trace.sd * across,
        common=common,
        correlation_length=trace.correlation_length * float(np.median(stretch)),
        breaks=_breaks(trace),
        blur=trace.width * float(np.median(across)),
        warp=(bends[0] * float(np.median(np.abs(by_current))), bends[1] * float(np.median(np.abs(by_value)))),
        edge=edge_sd(trace, along, pixel) * across,
        shared=axes.map.errors_at(trace.places) * to_log[:, :, None],
    )


def edge_sd(trace: Trace, along: Floats, pixel: float) -> Floats:
    """How far a whole stroke may lie from the curve it stands for, along its normal, in the sheet's unit.

    Its middle is known to a share of its width. A stroke along a row or column of pixels is moved as a whole by a
    renderer that counts few sub-pixels; one that crosses many is moved to and fro, which averages out.
    """
    if trace.origin == "vector":
        return np.zeros(len(along))
    lean = np.min(np.abs(along), axis=1) / np.maximum(np.max(np.abs(along), axis=1), 1e-12)
    crossed = 2.0 * AVERAGED_PX * lean
    width = EDGE_OF_AREA if trace.boundary else MIDDLE_OF_STROKE
    moved = ALIGNED_PX * pixel / np.sqrt(1.0 + crossed**2)
    return np.asarray(np.hypot(width * trace.width, moved))


def point_uncertainty(points: FitPoints) -> tuple[Floats, Floats]:
    """Relative standard uncertainties (of the current, of the value) of each point itself: trace and calibration."""
    direction = tangents(np.stack([points.log_current, points.log_value], axis=1))
    normal = _turned(direction)
    common = np.einsum("ki,kij,kj->k", normal, points.common, normal)
    return along_axes(LN10 * np.sqrt(points.sd**2 + common), direction)
