"""Vector pages with printed axes of any kind, and the sheet record they make."""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from curvelab.records.sheet import Sheet, Stroke, Word

Floats = NDArray[np.float64]
DECADE_LINES = tuple(range(1, 10))


@dataclass(frozen=True, kw_only=True)
class PrintedAxis:
    """One axis: printed ends from place ``start`` to ``stop``, values with a line, and labels (value -> text)."""

    low: float
    high: float
    start: float
    stop: float
    lines: tuple[float, ...]
    labels: dict[float, str]
    title: str
    linear: bool = False

    def place(self, value: float) -> float:
        """Where a printed value lies."""
        low, high, at = (each if self.linear else float(np.log10(each)) for each in (self.low, self.high, value))
        return self.start + (self.stop - self.start) * (at - low) / (high - low)


def decades(low: float, high: float, mantissas: tuple[float, ...] = DECADE_LINES) -> tuple[float, ...]:
    """Values of log lines between two ends."""
    exponents = range(int(np.floor(np.log10(low))), int(np.ceil(np.log10(high))) + 1)
    values = (float(f"{mantissa}e{exponent}") for exponent in exponents for mantissa in mantissas)
    return tuple(value for value in values if low * (1 - 1e-9) <= value <= high * (1 + 1e-9))


def log_axis(low: float, high: float, start: float, stop: float, title: str, **keys: object) -> PrintedAxis:
    """A log axis with all lines and a label at each decade."""
    labels = {value: f"{value:g}" for value in decades(low, high, (1,))}
    axis = PrintedAxis(low=low, high=high, start=start, stop=stop, lines=decades(low, high), labels=labels, title=title)
    return replace(axis, **keys)  # type: ignore[arg-type]


CURRENT = log_axis(10, 10000, 80.0, 380.0, "Current in A")
TIME = log_axis(0.01, 1000, 500.0, 60.0, "Time in s")


@dataclass(frozen=True, kw_only=True)
class PrintedPlot:
    """A frame with an axis along x and one along y; ``ticks`` draws short strokes at the frame instead of a grid."""

    across: PrintedAxis = CURRENT
    upwards: PrintedAxis = TIME
    ticks: bool = False

    def strokes(self) -> list[tuple[float, float, float, float]]:
        """Straight strokes (x0, y0, x1, y1)."""
        left, right = sorted((self.across.start, self.across.stop))
        top, bottom = sorted((self.upwards.start, self.upwards.stop))
        frame = [(left, top, right, top), (left, bottom, right, bottom), (left, top, left, bottom)]
        frame.append((right, top, right, bottom))
        reach = 5.0 if self.ticks else np.inf
        xs, ys = ([axis.place(value) for value in axis.lines] for axis in (self.across, self.upwards))
        upright = [(x, max(bottom - reach, top), x, bottom) for x in xs]
        level = [(left, y, min(left + reach, right), y) for y in ys]
        return frame + upright + level

    def words(self) -> list[Word]:
        """Labels and titles, 8 and 9 units high."""
        left, bottom = min(self.across.start, self.across.stop), max(self.upwards.start, self.upwards.stop)
        middle_x = 0.5 * (self.across.start + self.across.stop)
        middle_y = 0.5 * (self.upwards.start + self.upwards.stop)
        below = [word(text, self.across.place(value), bottom + 9.0) for value, text in self.across.labels.items()]
        beside = [
            word(text, left - 4.0 - 2.25 * len(text), self.upwards.place(value))
            for value, text in self.upwards.labels.items()
        ]
        titles = []
        if self.across.title:
            titles.append(word(self.across.title, middle_x, bottom + 25.0))
        if self.upwards.title:
            half = 2.25 * len(self.upwards.title)
            box = (left - 46.0, middle_y - half, left - 39.0, middle_y + half)
            titles.append(Word(text=self.upwards.title, box=box, height=9.0, turned_deg=90.0))
        return below + beside + titles


def word(text: str, x: float, y: float) -> Word:
    """A level word about its middle."""
    half = 2.25 * len(text)
    return Word(text=text, box=(x - half, y - 2.9, x + half, y + 2.9), height=8.0)


def printed(*plots: PrintedPlot, more: tuple[Word, ...] = (), width: float = 440.0, height: float = 580.0) -> Sheet:
    """The sheet of some plots."""
    lines = [line for plot in plots for line in plot.strokes()]
    return Sheet(
        file="page.pdf",
        sha256="0" * 64,
        page=1,
        pages=1,
        width=width,
        height=height,
        unit="pt",
        pixels=None,
        strokes=tuple(
            Stroke(
                points=np.array([[x0, y0], [x1, y1]]),
                colour=(0, 0, 0),
                width=0.5,
                filled=False,
                closed=False,
                dash=(),
                path=k,
            )
            for k, (x0, y0, x1, y1) in enumerate(lines)
        ),
        words=(*(each for plot in plots for each in plot.words()), *more),
    )
