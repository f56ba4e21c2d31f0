"""``python -m tests.benchmark.smoothers [SEEDS]``: the fit beside SciPy's smoothers on the same points.

All are given the turned coordinates, in which upright lines are possible at all. Errors are along the normal, in px at
400 px a decade, corners left out; time is a processor's, for 2,000 points. Only the fit gives corners, covariance and
published forms, all of which its time includes.
"""

import sys
import time
from collections.abc import Callable, Mapping

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import PchipInterpolator, make_smoothing_spline
from scipy.optimize import isotonic_regression

from curvelab.fit.curve import fit_curve
from curvelab.records.points import FitPoints
from tests.fit.drawn_points import FORMS, Truth, along, correlated, drawn

Floats = NDArray[np.float64]

COUNT = 2000
PX = 400.0
CORNER_PX = 4.0
FIRST_SEED = 62_000
ROOT_2 = np.sqrt(2.0)

Smoother = Callable[[Floats, Floats, Floats], Floats]


def smoothing_spline(u: Floats, v: Floats, at: Floats) -> Floats:
    return np.asarray(make_smoothing_spline(u, v)(at))


def pchip(u: Floats, v: Floats, at: Floats) -> Floats:
    return np.asarray(PchipInterpolator(u, v)(at))


def isotonic(u: Floats, v: Floats, at: Floats) -> Floats:
    """Times never rise: v + u never falls."""
    return np.asarray(np.interp(at, u, isotonic_regression(v + u).x - u))


SMOOTHERS: Mapping[str, Smoother] = {
    "smoothing spline": smoothing_spline,
    "PCHIP": pchip,
    "isotonic": isotonic,
}


def errors(truth: Truth, u: Floats, v: Floats) -> tuple[float, float]:
    """Root mean square and largest error in px, away from corners."""
    off = truth.normal_error((u + v) / ROOT_2, (v - u) / ROOT_2) * PX
    away = np.ones(len(u), dtype=bool)
    for x, y in truth.kinks:
        away &= np.abs(u - (x - y) / ROOT_2) * PX > CORNER_PX
    return float(np.sqrt(np.mean(off[away] ** 2))), float(np.abs(off[away]).max())


def measured(truth: Truth, points: FitPoints) -> dict[str, tuple[float, float, float]]:
    """Method -> root mean square and largest error in px, and seconds."""
    u, v = (points.log_current - points.log_value) / ROOT_2, (points.log_current + points.log_value) / ROOT_2
    u, first = np.unique(u, return_index=True)
    at = np.linspace(u[5], u[-5], 4000)
    start = time.process_time()
    (part,) = fit_curve(points).parts
    spent = time.process_time() - start
    x, y = np.log10(part.current), np.log10(part.value)
    found = {"the fit": (*errors(truth, at, np.interp(at, (x - y) / ROOT_2, (x + y) / ROOT_2)), spent)}
    for name, smoother in SMOOTHERS.items():
        start = time.process_time()
        smooth = smoother(u, v[first], at)
        found[name] = (*errors(truth, at, smooth), time.process_time() - start)
    return found


def main(seeds: int) -> None:
    """Print one row a form and method: medians over seeds."""
    print(f"{'form':<24}{'method':<20}{'rms px':>9}{'largest px':>12}{'ms':>8}")
    for form, make in FORMS.items():
        truth = make()
        px = COUNT / float(along(truth, 1.0 / PX)[0][-1])
        results = [
            measured(
                truth,
                drawn(
                    truth,
                    np.random.default_rng(seed),
                    px=px,
                    sd_px=0.1,
                    noise=lambda rng, n: correlated(rng, n, 1.2),
                ),
            )
            for seed in range(FIRST_SEED, FIRST_SEED + seeds)
        ]
        for name in results[0]:
            rms, largest, spent = np.median([result[name] for result in results], axis=0)
            print(f"{form:<24}{name:<20}{rms:9.4f}{largest:12.3f}{1e3 * spent:8.1f}", flush=True)


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 5)
