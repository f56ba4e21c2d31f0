"""Small pages of exactly anti-aliased lines: each pixel's ink is the mean over 24 x 24 places inside it."""

from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from curvelab.records.axes import Axes, Axis, PlaneMap
from curvelab.records.sheet import Pixels, Sheet
from demo_curves.drawing.geometry import densified

Points = NDArray[np.float64]
SUB = 24


def ink_of(line: Points, width: float, shape: tuple[int, int]) -> NDArray[np.float64]:
    """Share of each pixel covered by a polyline with round ends."""
    height, breadth = shape
    offsets = (np.arange(SUB) + 0.5) / SUB - 0.5
    ink = np.zeros(shape)
    reach = width / 2 + 1.5
    short = densified(line, 30.0)
    for start, end in pairwise(short):
        low = np.floor(np.minimum(start, end) - reach).astype(int).clip(0)
        high = (np.ceil(np.maximum(start, end) + reach).astype(int) + 1).clip(0, [breadth, height])
        x = np.arange(low[0], high[0])[None, :, None, None] + offsets[None, None, :, None]
        y = np.arange(low[1], high[1])[:, None, None, None] + offsets[None, None, None, :]
        step = end - start
        share = ((x - start[0]) * step[0] + (y - start[1]) * step[1]) / (step @ step)
        share = np.clip(share, 0.0, 1.0)
        near = np.hypot(x - start[0] - share * step[0], y - start[1] - share * step[1]) <= width / 2
        part = near.mean(axis=(2, 3))
        window = ink[low[1] : high[1], low[0] : high[0]]
        np.maximum(window, part, out=window)
    return ink


def page(ink: NDArray[np.float64], noise: float = 0.0, seed: int = 0) -> Sheet:
    """A grey sheet with that ink, contrast 200 of 255 levels, and noise in shares of the contrast."""
    rng = np.random.default_rng(seed)
    level = 235.0 - 200.0 * ink + rng.normal(0.0, 200.0 * noise, ink.shape)
    grey = np.clip(np.round(level), 0, 255).astype(np.uint8)
    pixels = Pixels(grey=grey, colour=None, to_place=np.array([[1.0, 0.0, 0.0], [0.0, 1.0, 0.0]]))
    height, width = grey.shape
    return Sheet(file="p.png", sha256="0" * 64, page=1, pages=1, width=width, height=height, unit="px", pixels=pixels)


def axes_without_grid(sheet: Sheet) -> Axes:
    """Two decades each way over the sheet less 20 px."""
    x0, y0, x1, y1 = 20.0, 20.0, sheet.width - 21.0, sheet.height - 21.0
    centre = np.array([(x0 + x1) / 2, (y0 + y1) / 2])
    reach = max(x1 - x0, y1 - y0) / 2
    across, down = 2.0 / (x1 - x0), -2.0 / (y1 - y0)
    projective = np.array([1.0, across * reach, 0.0, 1.0, 0.0, down * reach, 0.0, 0.0])
    return Axes(
        current=Axis(quantity="current", scale="log", unit="A", factor=1.0, direction="x", marks=()),
        value=Axis(quantity="time", scale="log", unit="s", factor=1.0, direction="y", marks=()),
        map=PlaneMap(
            centre=centre,
            reach=reach,
            projective=projective,
            powers=(),
            warp=np.zeros((2, 0)),
            covariance=np.zeros((8, 8)),
        ),
        frame=(x0, y0, x1, y1),
        mark_residual_rms=0.0,
    )


def away_from(places: Points, line: Points) -> Points:
    """Distance of places to a polyline."""
    best = np.full(len(places), np.inf)
    for start, end in pairwise(line):
        step = end - start
        share = np.clip(((places - start) @ step) / (step @ step), 0.0, 1.0)
        best = np.minimum(best, np.hypot(*(places - start - share[:, None] * step).T))
    return best
