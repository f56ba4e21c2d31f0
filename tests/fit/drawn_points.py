"""Synthetic points with known truth: published curve forms as dense polylines, and noise as tracers make it."""

from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from curvelab.records.points import FitPoints

ROOT_2 = np.sqrt(2.0)


@dataclass(frozen=True)
class Truth:
    """A dense polyline of log10 points along the true curve, and its kinks."""

    x: np.ndarray
    y: np.ndarray
    kinks: tuple[tuple[float, float], ...] = ()

    @property
    def u(self):
        return (self.x - self.y) / ROOT_2

    @property
    def v(self):
        return (self.x + self.y) / ROOT_2

    def normal_error(self, x, y):
        """Signed distance in decades along the normal of log10 points from the truth."""
        u, v = (x - y) / ROOT_2, (x + y) / ROOT_2
        slope = np.interp(u, 0.5 * (self.u[1:] + self.u[:-1]), np.diff(self.v) / np.diff(self.u))
        return (v - np.interp(u, self.u, self.v)) / np.sqrt(1.0 + slope**2)


def truth_of(*pieces, kinks=()):
    """Join pieces of (x, y)."""
    x = np.concatenate([np.asarray(piece[0], float) for piece in pieces])
    y = np.concatenate([np.asarray(piece[1], float) for piece in pieces])
    u = (x - y) / ROOT_2
    keep = np.diff(u, prepend=-np.inf) > 1e-9
    return Truth(x[keep], y[keep], tuple(kinks))


def inverse_time(k=0.14, a=0.02, *, low=1.08, high=20.0, tms=0.5, n=20001):
    """IEC 60255-151: t = TMS k / (M^a - 1)."""
    x = np.log10(1.0 + np.geomspace(low - 1.0, high - 1.0, n))
    return truth_of((x, np.log10(tms * k / np.expm1(a * np.log(10) * x))))


def thermal_x_y(tau_s, pick_up, low, high, n=20001):
    """IEC 60255-149, cold: t = tau ln(I^2 / (I^2 - (k Ib)^2))."""
    current = pick_up * (1.0 + np.geomspace(low - 1.0, high / pick_up - 1.0, n))
    return np.log10(current), np.log10(-tau_s * np.log1p(-((pick_up / current) ** 2)))


def thermal_drop_floor(tau_s=60.0, pick_up=1.13, *, low=1.02, trip=5.0, floor_s=0.012, high=60.0):
    """Thermal replica, instantaneous drop, floor."""
    x, y = thermal_x_y(tau_s, pick_up, low, trip)
    xt, yf = np.log10(trip), np.log10(floor_s)
    drop = (np.full(2001, xt), np.linspace(y[-1], yf, 2001))
    floor = (np.linspace(xt, np.log10(high), 2001), np.full(2001, yf))
    return truth_of((x, y), drop, floor, kinks=((xt, y[-1]), (xt, yf)))


def breaker(tr_s=12.0, isd=6.0, *, tsd_s=0.3, ii=11.0, low=1.2, high=40.0):
    """I2t slope, short-time drop, I2t ramp into definite time, instantaneous drop, floor."""
    x0, xs, xi = np.log10([low, isd, ii])
    long_time = np.linspace(x0, xs, 3001)
    y_long = np.log10(tr_s * 36.0) - 2 * long_time
    ramp_end = xs + 0.15
    y_delay = np.log10(tsd_s)
    points = [
        (x0, y_long[0]),
        (xs, y_long[-1]),
        (xs, y_delay + 0.3),
        (ramp_end, y_delay),
        (xi, y_delay),
        (xi, np.log10(0.02)),
        (np.log10(high), np.log10(0.015)),
    ]
    pieces = [(np.linspace(a[0], b[0], 2001), np.linspace(a[1], b[1], 2001)) for a, b in pairwise(points)]
    return truth_of(*pieces, kinks=tuple(points[1:-1]))


def fuse(low=2.0, high=60.0, n=20001):
    """A melting curve: vertical at its minimum current, adiabatic at the top."""
    x = np.log10(low * (1.02 + np.geomspace(1e-3, high / low - 1.02, n)))
    m = 10.0**x / low
    return truth_of((x, np.log10(40.0 / (m**2.4 - 1.0) + 25.0 / m**2 * 0.02)))


FORMS = {
    "iec inverse": inverse_time,
    "iec very inverse": lambda: inverse_time(13.5, 1.0),
    "iec extremely inverse": lambda: inverse_time(80.0, 2.0),
    "thermal, drop, floor": thermal_drop_floor,
    "breaker": breaker,
    "fuse": fuse,
}


def along(truth, step):
    """Evenly spaced places of the truth along its length: x, y, unit normal."""
    length = np.concatenate([[0.0], np.cumsum(np.hypot(np.diff(truth.x), np.diff(truth.y)))])
    s = np.arange(0.0, length[-1], step)
    x, y = np.interp(s, length, truth.x), np.interp(s, length, truth.y)
    middle = 0.5 * (length[1:] + length[:-1])
    tx = np.interp(s, middle, np.diff(truth.x) / np.diff(length))
    ty = np.interp(s, middle, np.diff(truth.y) / np.diff(length))
    norm = np.hypot(tx, ty)
    return s, x, y, -ty / norm, tx / norm


def correlated(rng, n, reach):
    """Unit-variance noise smoothed over ``reach`` points, as a ridge filter leaves it; 0 for white."""
    if reach <= 0:
        return rng.standard_normal(n)
    d = np.arange(-int(5 * reach) - 1, int(5 * reach) + 2)
    kernel = np.exp(-0.5 * (d / reach) ** 2)
    kernel /= np.sqrt(np.sum(kernel**2))
    return np.convolve(rng.standard_normal(n + len(d) - 1), kernel, mode="valid")


def autoregressive(rng, n, rho):
    """AR(1) noise of unit variance."""
    noise = rng.standard_normal(n)
    for k in range(1, n):
        noise[k] = rho * noise[k - 1] + np.sqrt(1 - rho**2) * noise[k]
    return noise


def drawn(
    truth, rng, *, px=400.0, sd_px=0.05, noise=None, blur_px=3.0, strays=0.0, missing=(), stated=1.0, rounding=True
):
    """Points one pixel apart with normal noise, corners rounded by the stroke, strays, and stretches left out."""
    s, x, y, nx, ny = along(truth, 1.0 / px)
    error = sd_px / px * (rng.standard_normal(len(s)) if noise is None else noise(rng, len(s)))
    x, y = x + error * nx, y + error * ny
    keep = np.ones(len(s), bool)
    for kx, ky in truth.kinks if rounding else ():
        near = np.hypot(x - kx, y - ky) * px
        weight = 0.4 * np.clip(1.0 - near / blur_px, 0.0, 1.0)
        before, after = np.roll(np.c_[x, y], 4, axis=0), np.roll(np.c_[x, y], -4, axis=0)
        middle = 0.5 * (before + after)
        x, y = x + weight * (middle[:, 0] - x), y + weight * (middle[:, 1] - y)
        keep &= ~((near < blur_px) & (rng.random(len(s)) < 0.3))
    stray = rng.random(len(s)) < strays
    off = rng.uniform(0.01, 0.05, len(s)) * rng.choice([-1, 1], len(s)) * stray
    x, y = x + off * nx, y + off * ny
    breaks = []
    for start, end in missing:
        gone = (s >= start) & (s <= end)
        keep &= ~gone
        breaks.append(start)
    s, x, y = s[keep], x[keep], y[keep]
    return FitPoints(
        log_current=x,
        log_value=y,
        sd=np.full(len(x), stated * sd_px / px),
        common=np.zeros((len(x), 2, 2)),
        correlation_length=0.5 / px,
        breaks=tuple(int(np.searchsorted(s, start)) for start in breaks),
        blur=blur_px / px,
    )
