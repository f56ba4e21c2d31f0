"""Small pages with a printed grid, drawn by exact area coverage, and the axis entries a person would give for them."""

from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from curvelab.records.axes import Mark
from curvelab.records.sheet import Pixels, Sheet, Stroke
from curvelab.records.worksheet import AxisEntry

Floats = NDArray[np.float64]
PAPER = 250.0
MAIN = tuple(range(1, 10))


@dataclass(frozen=True, kw_only=True)
class Page:
    """A page of 640 x 520 pixels: current 1 to 100 from x = 80.3 on, time 0.1 s to 100 s from y = 470.6 up.

    Line places are straight in the logarithm; `skew` leans both directions about the page's middle as a turn does.
    """

    left: float = 80.3
    x_decade: float = 241.7
    bottom: float = 470.6
    y_decade: float = 143.9
    decades: tuple[int, int] = (2, 3)
    mantissas: tuple[float, ...] = MAIN
    width: float = 1.3
    ink: float = 110.0
    snap: bool = False
    skew: float = 0.0
    blur: float = 0.0
    noise: float = 0.0
    seed: int = 0
    extras: tuple[tuple[float, float, float, float, float], ...] = field(default=())

    @property
    def values(self) -> tuple[Floats, Floats]:
        """Currents and times of the lines."""
        each = [
            np.append((10.0 ** np.arange(n)[:, None] * np.array(self.mantissas)).ravel(), 10.0**n) for n in self.decades
        ]
        return each[0], 0.1 * each[1]

    def places(self, current: Floats | float, time: Floats | float) -> Floats:
        """True places, shape (n, 2)."""
        x = self.left + self.x_decade * np.log10(np.atleast_1d(current))
        y = self.bottom - self.y_decade * (np.log10(np.atleast_1d(time)) + 1)
        x, y = np.broadcast_arrays(x, y)
        turn = np.array([[np.cos(self.skew), -np.sin(self.skew)], [np.sin(self.skew), np.cos(self.skew)]])
        return (np.stack([x, y], axis=1) - MIDDLE) @ turn.T + MIDDLE

    def image(self) -> NDArray[np.uint8]:
        """The page as grey levels."""
        currents, times = self.values
        dark = np.zeros((520, 640))
        for current in currents:
            dark = np.maximum(
                dark, self.ink * self._stroke(*self.places(current, np.array([0.1, 0.1 * 10 ** self.decades[1]])))
            )
        for time in times:
            dark = np.maximum(
                dark, self.ink * self._stroke(*self.places(np.array([1.0, 10.0 ** self.decades[0]]), time))
            )
        for x0, y0, x1, y1, width in self.extras:
            line = replace(self, width=width, snap=False)
            dark = np.maximum(dark, 220.0 * line._stroke(np.array([x0, y0]), np.array([x1, y1])))
        grey = PAPER - dark + self.noise * np.random.default_rng(self.seed).standard_normal(dark.shape)
        return np.clip(np.rint(grey), 0, 255).astype(np.uint8)

    def _stroke(self, start: Floats, end: Floats) -> Floats:
        """Coverage of pixels by a stroke: exact for upright and level ones, by 1/4 pixel sampling for others."""
        along = int(np.argmax(np.abs(end - start)))
        across = 1 - along
        sizes = (640, 520)
        other = np.arange(sizes[along], dtype=float)
        slope = (end[across] - start[across]) / (end[along] - start[along])
        middle = start[across] + slope * (other - start[along])
        if self.snap:
            middle = np.floor(middle + 0.5)
        columns = np.rint(middle)[:, None].astype(int) + np.arange(-9, 10)
        sub = (np.arange(4) - 1.5) / 4 if slope else np.zeros(1)
        offset = columns[None] - middle[None, :, None] - slope * sub[:, None, None]
        bars = _bar(offset, self.width, self.blur).mean(axis=0)
        low, high = sorted((start[along], end[along]))
        bars[(other < low - 0.5) | (other > high + 0.5)] = 0.0
        page = np.zeros((sizes[along], sizes[across]))
        inside = (columns >= 0) & (columns < sizes[across])
        rows = np.broadcast_to(np.arange(len(other))[:, None], columns.shape)
        page[rows[inside], columns[inside]] = bars[inside]
        return page if across == 0 else page.T

    def sheet(self) -> Sheet:
        """The page as a sheet of pixels."""
        return image_sheet(self.image())

    def vector_sheet(self, digits: int = 3) -> Sheet:
        """The page as strokes with coordinates rounded to some digits."""
        currents, times = self.values
        runs = [self.places(current, np.array([0.1, 0.1 * 10.0 ** self.decades[1]])) for current in currents]
        runs += [self.places(np.array([1.0, 10.0 ** self.decades[0]]), time) for time in times]
        runs += [np.array([[x0, y0], [x1, y1]]) for x0, y0, x1, y1, _ in self.extras]
        strokes = tuple(
            Stroke(
                points=np.round(run, digits), colour=(0, 0, 0), width=0.5, filled=False, closed=False, dash=(), path=k
            )
            for k, run in enumerate(runs)
        )
        return Sheet(
            file="page.pdf",
            sha256="0" * 64,
            page=1,
            pages=1,
            width=640,
            height=520,
            unit="pt",
            pixels=None,
            strokes=strokes,
        )

    def marks(
        self, currents: tuple[float, ...], times: tuple[float, ...], scatter: float = 0.7
    ) -> tuple[AxisEntry, AxisEntry]:
        """Entries clicked on the axes with an imperfect hand."""
        rng = np.random.default_rng(self.seed + 1000)

        def clicked(place: Floats) -> tuple[float, float]:
            x, y = place + scatter * rng.standard_normal(2)
            return float(x), float(y)

        current = tuple(Mark(at=clicked(self.places(value, 0.1)[0]), value=value) for value in currents)
        time = tuple(Mark(at=clicked(self.places(1.0, value)[0]), value=value) for value in times)
        return (
            AxisEntry(quantity="current", scale="log", unit="A", marks=current),
            AxisEntry(quantity="time", scale="log", unit="s", marks=time),
        )


MIDDLE = np.array([319.5, 259.5])


def image_sheet(grey: NDArray[np.uint8]) -> Sheet:
    """An image as a sheet."""
    pixels = Pixels(grey=grey, colour=None, to_place=np.array([[1.0, 0.0, 0.0], [0.0, 1.0, 0.0]]))
    height, width = grey.shape
    return Sheet(
        file="page.png", sha256="0" * 64, page=1, pages=1, width=width, height=height, unit="px", pixels=pixels
    )


def _bar(offset: Floats, width: float, blur: float) -> Floats:
    """Share of a pixel at ``offset`` that a bar covers, blurred by a Gaussian sampled on a fine grid."""
    if blur == 0:
        return np.clip(np.minimum(offset + 0.5, width / 2) - np.maximum(offset - 0.5, -width / 2), 0.0, 1.0)
    shifts = np.linspace(-3.5 * blur, 3.5 * blur, 15)
    weights = np.exp(-0.5 * (shifts / blur) ** 2)
    weights /= weights.sum()
    return sum(w * _bar(offset - s, width, 0.0) for w, s in zip(weights, shifts, strict=True))
