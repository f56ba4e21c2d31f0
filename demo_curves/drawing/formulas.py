"""Curves from formulas: inverse-time pieces with steps, fuse lines through gates, relay characteristics."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline

Line = tuple[NDArray[np.float64], NDArray[np.float64]]
"""Currents and times (or let-through values) of a polyline's vertices."""

VERTICES = 240


def inverse_time(pick_up: float, constant: float, exponent: float, times: NDArray[np.float64]) -> NDArray[np.float64]:
    """Currents at which t = constant / ((I / pick_up)^exponent - 1)."""
    return np.asarray(pick_up * (1.0 + constant / times) ** (1.0 / exponent))


def inverse_piece(pick_up: float, constant: float, exponent: float, top_s: float, to_current: float) -> Line:
    """The inverse-time line from the time `top_s` down to a current."""
    end = constant / ((to_current / pick_up) ** exponent - 1.0)
    times = np.geomspace(top_s, end, VERTICES)
    return inverse_time(pick_up, constant, exponent, times), times


def with_vertices(line: Line, further: Sequence[tuple[float, float]]) -> Line:
    """The line continued straight (in log-log) through further (current, time) vertices: steps and floors."""
    more = np.array(further, dtype=float)
    return np.concatenate([line[0], more[:, 0]]), np.concatenate([line[1], more[:, 1]])


def straight(vertices: Sequence[tuple[float, float]]) -> Line:
    """A line straight in log-log between vertices."""
    both = np.array(vertices, dtype=float)
    return both[:, 0], both[:, 1]


def smooth_through(vertices: Sequence[tuple[float, float]]) -> Line:
    """A smooth falling line through (current, time) vertices: cubic spline of log current over log time."""
    both = np.log10(np.array(sorted(vertices, key=lambda vertex: vertex[1])))
    spline = CubicSpline(both[:, 1], both[:, 0], bc_type="natural")
    log_times = np.linspace(both[-1, 1], both[0, 1], VERTICES)
    log_currents = spline(log_times)
    if np.any(np.diff(log_currents) <= 0):
        raise ValueError("the vertices do not give a falling line: space them more evenly")
    return 10.0**log_currents, 10.0**log_times


IEC_CURVES = {"IEC inverse": (0.14, 0.02), "IEC very inverse": (13.5, 1.0), "IEC extremely inverse": (80.0, 2.0)}
"""IEC 60255-151 (k, alpha) of t = tms k / (M^alpha - 1)."""


def relay_line(curve: str, tms: float, multiples: tuple[float, float]) -> Line:
    """An IEC 60255-151 characteristic between two multiples of the setting."""
    constant, exponent = IEC_CURVES[curve]
    times = tms * constant / (np.array(multiples) ** exponent - 1.0)
    spread = np.geomspace(times[0], times[1], VERTICES)
    return inverse_time(1.0, tms * constant, exponent, spread), spread
