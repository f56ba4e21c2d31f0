"""Accuracy, coverage, corners and time of the fit over many seeds: ``python -m tests.fit [SEEDS]``."""

import sys
import time

import numpy as np

from curvelab.errors import FitError
from curvelab.fit.curve import fit_curve
from curvelab.records.curve import COVERAGE_FACTOR
from tests.fit.drawn_points import FORMS, autoregressive, correlated, drawn
from tests.fit.measured import LN10, corner_errors, errors_along

PX = 400.0
FIRST_SEED = 10_000
NOISES = {
    "white 0.05 px": {"sd_px": 0.05},
    "clean 0.03 px": {"sd_px": 0.03, "noise": lambda rng, n: correlated(rng, n, 1.2)},
    "scan 0.15 px": {"sd_px": 0.15, "strays": 0.005, "noise": lambda rng, n: autoregressive(rng, n, 0.7)},
}
HEADING = "noise            form                    rms px  p99 px  coverage  sd %    corner rms/p95 px  lost/extra  ms"


def main(seeds):
    """Print one row a noise and form."""
    print(HEADING)
    for noise, options in NOISES.items():
        for form, make in FORMS.items():
            print(f"{noise:16s} {form:22s} {row(make(), options, range(FIRST_SEED, FIRST_SEED + seeds))}", flush=True)


def row(truth, options, seeds):
    """Measures of one class over seeds."""
    errors, sds, corners, times, lost, extra, refused = [], [], [], [], 0, 0, 0
    for seed in seeds:
        points = drawn(truth, np.random.default_rng(seed), **options)
        start = time.process_time()
        try:
            fit = fit_curve(points)
        except FitError:
            refused += 1
            continue
        times.append(time.process_time() - start)
        error, sd = errors_along(truth, fit, px=PX)
        errors.append(error)
        sds.append(sd)
        corners.extend(corner_errors(truth, fit))
        lost += len(fit.kinks) < len(truth.kinks)
        extra += len(fit.kinks) > len(truth.kinks)
    error, sd = np.concatenate(errors), np.concatenate(sds)
    corner = np.array(corners or [0.0]) * PX
    inside = 100.0 * np.mean(np.abs(error) <= COVERAGE_FACTOR * sd)
    return (
        f"{np.sqrt(np.mean(error**2)) * PX:8.4f}{np.quantile(np.abs(error), 0.99) * PX:8.3f}{inside:9.1f}"
        f"{100.0 * LN10 * np.median(sd):9.4f}{np.sqrt(np.mean(corner**2)):11.3f}{np.quantile(corner, 0.95):8.3f}"
        f"{lost:10d}/{extra}  refused {refused}{1e3 * np.median(times):8.1f}"
    )


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 200)
