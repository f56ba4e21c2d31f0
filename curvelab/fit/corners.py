"""Kinks of a model: where they lie and how well that is known."""

import math

import numpy as np

from curvelab.fit.rotate import unrotated
from curvelab.fit.segments import Segments
from curvelab.fit.stretch import Stretch
from curvelab.fit.tabulate import Samples
from curvelab.records.fit import Kink
from curvelab.records.propagation import propagated

LEAST_TURN = 0.02
"""Radians below which two strokes in line are no corner."""


def kinks_of(segments: Segments, rising: bool) -> list[Kink]:
    """The crossings of neighbouring stretches with the uncertainty both give them."""
    pairs = zip(segments.stretches[:-1], segments.stretches[1:], segments.vertices, strict=True)
    return [_kink(left, right, place, rising) for left, right, place in pairs]


def _kink(left: Stretch, right: Stretch, place: float, rising: bool) -> Kink:
    u = np.array([place])
    variances = np.array([left.variance(u)[0], right.variance(u)[0]])
    slopes = np.array([left.slope(u)[0], right.slope(u)[0]])
    # v_left + p_left du = v_right + p_right du gives du; v follows on either line.
    by_v = np.array([1.0, -1.0]) / (slopes[1] - slopes[0])
    sensitivity = np.stack([by_v, np.array([1.0, 0.0]) + slopes[0] * by_v])
    turned = np.array([[1.0, 1.0], [-1.0, 1.0]]) / math.sqrt(2.0) @ sensitivity
    sd = np.sqrt(np.diag(propagated(turned, np.diag(variances))))
    log_current, log_value = unrotated(u, left.value(u), rising)
    return Kink(
        log_current=float(log_current[0]),
        log_value=float(log_value[0]),
        sd_log_current=float(sd[0]),
        sd_log_value=float(sd[1]),
        turn=float(np.diff(np.arctan(slopes))[0]),
    )


def corner_kinks(samples: Samples, rising: bool) -> list[Kink]:
    """The corners of exact strokes."""
    turn = np.arctan(samples.slope[2::2]) - np.arctan(samples.slope[1:-1:2])
    log_current, log_value = unrotated(samples.u[1:-1:2], samples.v[1:-1:2], rising)
    sd = np.sqrt(samples.scatter[1:-1:2])
    return [
        Kink(
            log_current=float(log_current[k]),
            log_value=float(log_value[k]),
            sd_log_current=float(sd[k]),
            sd_log_value=float(sd[k]),
            turn=float(turn[k]),
        )
        for k in np.flatnonzero(np.abs(turn) >= LEAST_TURN)
    ]
