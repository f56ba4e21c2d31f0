"""Logarithmic axes: where a value lies in the frame, which lines the grid has and what they are called."""

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from demo_curves.drawing.design import AxisDesign, PlotDesign


@dataclass(frozen=True, kw_only=True, slots=True)
class GridLine:
    """One grid line: its printed number, and whether it is a decade."""

    value: float
    major: bool


def grid_lines(axis: AxisDesign, minor: tuple[int, ...]) -> list[GridLine]:
    """Every line of the axis from low to high; `minor` are the digits drawn between the decades."""
    first = math.floor(math.log10(axis.low) + 1e-9)
    last = math.ceil(math.log10(axis.high) - 1e-9)
    lines = [
        GridLine(value=digit * 10.0**decade if decade >= 0 else digit / 10.0**-decade, major=digit == 1)
        for decade in range(first, last + 1)
        for digit in (1, *minor)
    ]
    return [line for line in lines if axis.low * (1 - 1e-9) <= line.value <= axis.high * (1 + 1e-9)]


def leading_digit(value: float) -> int:
    """The first significant digit of a printed number."""
    return int(f"{value:e}"[0])


def place_matrix(plot: PlotDesign) -> NDArray[np.float64]:
    """The map of a plot, (2, 3): place in points = matrix @ (log10 current, log10 value, 1), canonical units."""
    left, top, right, bottom = plot.frame_pt
    spans = [
        (math.log10(axis.low * axis.scale), math.log10(axis.high * axis.scale)) for axis in (plot.current, plot.value)
    ]
    across, upwards = (0, 1) if plot.current_direction == "x" else (1, 0)
    matrix = np.zeros((2, 3))
    low, high = spans[across]
    matrix[0, across] = (right - left) / (high - low)
    matrix[0, 2] = left - low * matrix[0, across]
    low, high = spans[upwards]
    matrix[1, upwards] = (top - bottom) / (high - low)
    matrix[1, 2] = bottom - low * matrix[1, upwards]
    return matrix


def places(
    matrix: NDArray[np.float64], current: NDArray[np.float64], value: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Places (n, 2) of canonical values by a plot's map."""
    logs = np.column_stack([np.log10(current), np.log10(value), np.ones(len(current))])
    return logs @ matrix.T


def tick_text(value: float, style: str) -> tuple[str, str]:
    """A printed number as (text, raised exponent)."""
    exponent = round(math.log10(value)) if leading_digit(value) == 1 else None
    if style == "power" and exponent is not None:
        return "10", f"{exponent}".replace("-", "−")
    if style == "thousands" and value >= 1000:
        return f"{value / 1000:g}k", ""
    if style == "spaced" and value >= 10000:
        return f"{value:,.0f}".replace(",", " "), ""
    return f"{value:.10g}", ""
