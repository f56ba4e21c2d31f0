"""The points of one curve made ready for fitting: turned, put in order, strays marked, gaps found."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view
from numpy.typing import NDArray

from curvelab.errors import FitError
from curvelab.fit.noise import Noise, stated_noise
from curvelab.fit.rotate import rotated
from curvelab.records.arrays import Floats
from curvelab.records.points import FitPoints

NEIGHBOURS = 5
"""Pairs of neighbours whose interpolation a point is compared with before anything is fitted."""

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
    common: Floats
    order: NDArray[np.intp]
    gaps: tuple[int, ...]
    kept: NDArray[np.bool_]
    rising: bool
    blur: float
    correlation_length: float

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
            common=self.common[first:last],
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
    order = np.argsort(u, kind="stable")
    backwards = u[0] > u[-1]
    if backwards:
        order = np.argsort(u[::-1], kind="stable")
        order = len(u) - 1 - order
    first_after_gap = [k - 1 if backwards else k for k in points.breaks]
    place = np.empty(len(u), dtype=np.intp)
    place[order] = np.arange(len(u))
    gaps = tuple(sorted({int(place[k]) for k in first_after_gap if 0 <= k < len(u)} - {0}))
    u, v = u[order], v[order]
    return Strand(
        u=u,
        v=v,
        sd=points.sd[order],
        common=points.common[order],
        order=order,
        gaps=gaps,
        kept=_not_stray(u, v, points.sd[order]),
        rising=rising,
        blur=points.blur,
        correlation_length=points.correlation_length,
    )


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


def _not_stray(u: Floats, v: Floats, sd: Floats) -> NDArray[np.bool_]:
    """False where a lone point lies off the lines between its neighbours on both sides.

    The reference is the median over pairs of neighbours at growing distance, so that one stray among them does not
    matter; the scale is robust and local, so that the corner of two straight stretches stays.
    """
    kept = np.ones(len(u), dtype=bool)
    if len(u) < 4 * NEIGHBOURS:
        return kept
    inner = slice(NEIGHBOURS, len(u) - NEIGHBOURS)
    estimates = []
    for d in range(1, NEIGHBOURS + 1):
        before, after = slice(NEIGHBOURS - d, len(u) - NEIGHBOURS - d), slice(NEIGHBOURS + d, len(u) - NEIGHBOURS + d)
        width = np.maximum(u[after] - u[before], np.finfo(float).tiny)
        share = np.clip((u[inner] - u[before]) / width, 0.0, 1.0)
        estimates.append(v[before] + share * (v[after] - v[before]))
    deviation = np.abs(v[inner] - np.median(estimates, axis=0))
    window = 4 * NEIGHBOURS + 1
    local = deviation
    if len(deviation) > window:
        medians = np.median(sliding_window_view(deviation, window), axis=1)
        local = np.pad(medians, window // 2, mode="edge")
    scale = np.maximum(1.4826 * local, np.maximum(sd[inner], 1.4826 * np.median(deviation)))
    kept[inner] = deviation <= STRAY_SCALES * scale
    return kept
