"""The points of one curve made ready for fitting: turned, put in order, strays marked, gaps found."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view
from numpy.typing import NDArray

from curvelab.errors import FitError
from curvelab.fit.islands import SCATTER, on_the_line
from curvelab.fit.noise import Noise, stated_noise
from curvelab.fit.rotate import rotated
from curvelab.records.arrays import Floats
from curvelab.records.points import FitPoints

NEIGHBOURS = 5
"""Pairs of neighbours whose interpolation a point is compared with before anything is fitted."""

MOST_LONE = 2
"""Neighbours that stray together."""

STRAY_SCALES = 8.0
"""Robust standard deviations beyond which a lone point is a stray before anything is fitted."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Strand:
    """Points in rotated coordinates in the order of u.

    ``order`` is the index of each point in what was given; ``gaps`` holds k where a gap lies between points k - 1
    and k; ``kept`` is False for lone strays.
    """

    u: Floats
    v: Floats
    sd: Floats
    edge: Floats
    common: Floats
    shared: Floats
    order: NDArray[np.intp]
    gaps: tuple[int, ...]
    kept: NDArray[np.bool_]
    rising: bool
    blur: float
    correlation_length: float
    warp: tuple[float, float]

    @property
    def spacing(self) -> float:
        """Median step of u between points, in decades."""
        return float(np.median(np.diff(self.u)))

    @property
    def stated(self) -> Noise:
        """The noise as the trace states it."""
        return stated_noise(self.spacing, self.correlation_length)

    def cut(self, first: int, last: int) -> "Strand":
        """Points first to last - 1 on their own."""
        return replace(
            self,
            u=self.u[first:last],
            v=self.v[first:last],
            sd=self.sd[first:last],
            edge=self.edge[first:last],
            common=self.common[first:last],
            shared=self.shared[first:last],
            order=self.order[first:last],
            kept=self.kept[first:last],
            gaps=tuple(k - first for k in self.gaps if first < k < last),
        )


def strand_of(points: FitPoints, *, rising: bool) -> Strand:
    """Order the points along the curve.

    Raises
    ------
    FitError
        Fewer than two distinct points, or numbers that are not finite.
    """
    _check(points)
    u, v = rotated(points.log_current, points.log_value, rising)
    _check_direction(points, u, v, rising)
    backwards = bool(u[0] > u[-1])
    along = np.arange(len(u))[::-1] if backwards else np.arange(len(u))
    order = along[np.argsort(u[along], kind="stable")]
    kept = np.zeros(len(u), dtype=bool)
    tolerance = SCATTER * float(np.median(points.sd)) + 0.25 * points.blur
    kept[along] = on_the_line(u[along], v[along], tolerance)
    first_after_gap = [k - 1 if backwards else k for k in points.breaks]
    place = np.empty(len(u), dtype=np.intp)
    place[order] = np.arange(len(u))
    gaps = tuple(sorted({int(place[k]) for k in first_after_gap if 0 <= k < len(u)} - {0}))
    u, v, sd, kept = u[order], v[order], points.sd[order], kept[order]
    kept[kept] = _not_stray(u[kept], v[kept], sd[kept])
    return Strand(
        u=u,
        v=v,
        sd=sd,
        edge=(np.zeros(len(order)) if points.edge is None else points.edge)[order],
        common=points.common[order],
        shared=_shared(points)[order],
        order=order,
        gaps=gaps,
        kept=kept,
        rising=rising,
        blur=points.blur,
        correlation_length=points.correlation_length,
        warp=points.warp,
    )


def _shared(points: FitPoints) -> Floats:
    return np.zeros((len(points.sd), 2, 0)) if points.shared is None else points.shared


def _check(points: FitPoints) -> None:
    count = len(points.log_current)
    if count < 2:
        raise FitError(f"The curve has {count} point(s)", "At least two are needed", "Trace more of the line")
    finite = np.isfinite(points.log_current) & np.isfinite(points.log_value) & np.isfinite(points.sd)
    if not np.all(finite & (points.sd >= 0.0)):
        k = int(np.argmin(finite & (points.sd >= 0.0)))
        raise FitError(
            f"Point {k + 1} of {count} is not a place with an uncertainty: log current {points.log_current[k]:g}, "
            f"log value {points.log_value[k]:g}, sd {points.sd[k]:g}",
            "Finite numbers are needed",
            "Check the axes there",
        )
    if np.ptp(points.log_current) == 0.0 and np.ptp(points.log_value) == 0.0:
        raise FitError(
            f"All {count} points lie at {10 ** points.log_current[0]:.6g}, {10 ** points.log_value[0]:.6g}",
            "At least two places are needed",
            "Trace more of the line",
        )


def _check_direction(points: FitPoints, u: Floats, v: Floats, rising: bool) -> None:
    """Refuse a curve that as a whole runs the other way: from its first to its last points v changes more than u."""
    tenth = max(len(u) // 10, 1)
    along, across = (abs(np.median(column[-tenth:]) - np.median(column[:tenth])) for column in (u, v))
    if across > along + points.blur + STRAY_SCALES * np.median(points.sd):
        wrong, right = ("falls", "rises") if rising else ("rises", "falls")
        raise FitError(
            f"The curve {wrong} with the current, from {10 ** points.log_value[0]:.4g} at "
            f"{10 ** points.log_current[0]:.4g} to {10 ** points.log_value[-1]:.4g} at "
            f"{10 ** points.log_current[-1]:.4g}",
            f"A curve whose value {right}, or stays, as the current grows",
            "Check the axes and which curve the guides follow",
        )


def _not_stray(u: Floats, v: Floats, sd: Floats) -> NDArray[np.bool_]:
    """False where a lone point lies off the lines through its neighbours.

    The reference is the median over pairs of neighbours at growing distance, so that one stray among them does not
    matter; the scale is robust and local, so that the corner of two straight stretches stays.
    """
    if len(u) < 4 * NEIGHBOURS + 1:
        return np.ones(len(u), dtype=bool)
    deviation = np.abs(v - np.median([_from_pair(u, v, d) for d in range(1, NEIGHBOURS + 1)], axis=0))
    window = 4 * NEIGHBOURS + 1
    local = np.pad(np.median(sliding_window_view(deviation, window), axis=1), window // 2, mode="edge")
    scale = np.maximum(1.4826 * np.maximum(local, np.median(deviation)), sd)
    return ~_lone(deviation > STRAY_SCALES * scale)


def _lone(off: NDArray[np.bool_]) -> NDArray[np.bool_]:
    """The runs of points that are few enough to be strays: beside a corner many lie off their neighbours together."""
    edges = np.flatnonzero(np.diff(np.concatenate([[False], off, [False]]).astype(int)))
    result = np.zeros_like(off)
    for start, end in zip(edges[::2], edges[1::2], strict=True):
        result[start:end] = end - start <= MOST_LONE
    return result


def _from_pair(u: Floats, v: Floats, distance: int) -> Floats:
    """V at every u on the line through the points at that distance on both sides, at the ends on the inner side."""
    k = np.arange(len(u))
    first, second = k - distance, k + distance
    at_start, at_end = first < 0, second >= len(u)
    first[at_start], second[at_start] = k[at_start] + distance, k[at_start] + 2 * distance
    first[at_end], second[at_end] = k[at_end] - 2 * distance, k[at_end] - distance
    width = u[second] - u[first]
    share = np.where(width > 0.0, (u - u[first]) / np.where(width > 0.0, width, 1.0), 0.5)
    line: Floats = v[first] + np.clip(share, -1.0, 2.0) * (v[second] - v[first])
    return line
