"""The design of a page: where its frame is, what is drawn as lines, in which face and colours."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from tests.axes.foreign.wording import Along, current_axis, time_axis

Floats = NDArray[np.float64]

GRIDS = ("all", "all", "all", "decades", "ticks")
COLOURS = ("#000000", "#303030", "#909090", "#b8b8b8", "#8fb58f", "#d9a58f", "#88a0c8")


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ForeignPage:
    """A page of pixels (before any scan) with one plot; lengths in pixels, y downwards from the top left corner.

    ``grid`` is ``all``, ``decades`` (ticks for the rest) or ``ticks``; ``curves`` are polylines in shares of the frame.
    """

    size: tuple[int, int]
    frame: tuple[float, float, float, float]
    current: Along
    time: Along
    grid: str
    colours: tuple[str, str]
    widths: tuple[float, float, float]
    ticks_inwards: bool
    numbers_px: float
    titles_px: float
    title_at_end: bool
    curves: tuple[Floats, ...]
    face: int

    def matrix(self) -> Floats:
        """(2, 3): corner-based place = matrix @ (log10 A or multiple, log10 s, 1)."""
        left, top, right, bottom = self.frame
        result = np.zeros((2, 3))
        for row, (axis, start, stop) in enumerate(((self.current, left, right), (self.time, bottom, top))):
            low, high = np.log10(np.array([axis.low, axis.high]) * axis.factor * SIZES[axis.unit])
            result[row, row] = (stop - start) / (high - low)
            result[row, 2] = start - low * result[row, row]
        return result

    def place(self, axis: Along, value: float) -> float:
        """Where a printed value lies along its axis."""
        left, top, right, bottom = self.frame
        start, stop = (left, right) if axis is self.current else (bottom, top)
        return float(start + (stop - start) * np.log10(value / axis.low) / np.log10(axis.high / axis.low))


SIZES = {"A": 1.0, "kA": 1e3, "mA": 1e-3, "xIn": 1.0, "xIr": 1.0, "s": 1.0, "ms": 1e-3, "min": 60.0}


def random_page(rng: np.random.Generator) -> ForeignPage:
    """A page for 150 to 300 dpi."""
    current, time = current_axis(rng), time_axis(rng)
    dpi = float(rng.choice([150, 200, 300]))
    decades = [np.log10(axis.high / axis.low) for axis in (current, time)]
    lengths = [
        each * rng.uniform(min(160.0, most / each - 10), min(480.0, most / each))
        for each, most in zip(decades, (1700, 2300), strict=True)
    ]
    numbers = rng.uniform(7.0, 10.0) * dpi / 72
    titles = numbers * rng.uniform(1.0, 1.3)
    left, top = rng.uniform(8, 10) * numbers, rng.uniform(3, 6) * numbers
    frame = (left, top, left + lengths[0], top + lengths[1])
    size = (round(frame[2] + rng.uniform(3, 6) * numbers), round(frame[3] + rng.uniform(6, 9) * numbers))
    thin = rng.uniform(0.8, 1.6) * dpi / 150
    return ForeignPage(
        size=size,
        frame=frame,
        current=current,
        time=time,
        grid=str(rng.choice(GRIDS)),
        colours=(str(rng.choice(COLOURS[:4])), str(rng.choice(COLOURS))),
        widths=(thin * rng.uniform(1.0, 1.8), thin, thin * rng.uniform(1.0, 2.2)),
        ticks_inwards=bool(rng.integers(2)),
        numbers_px=numbers,
        titles_px=titles,
        title_at_end=rng.random() < 0.15,
        curves=tuple(_curve(rng) for _ in range(rng.integers(1, 5))),
        face=int(rng.integers(1000)),
    )


def _curve(rng: np.random.Generator) -> Floats:
    """A falling line, in shares of the frame (x to the right, y downwards)."""
    x = np.linspace(rng.uniform(0.1, 0.5), rng.uniform(0.7, 1.0), 40)
    y = 1.0 - rng.uniform(0.6, 1.0) * ((x[-1] - x) / (x[-1] - x[0])) ** rng.uniform(1.0, 3.0)
    return np.column_stack([x, np.clip(y, 0.0, 1.0)])
