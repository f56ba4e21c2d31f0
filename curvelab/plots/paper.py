"""Log-log paper: decade grid, engineering labels, and second scales where they help."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import partial

import numpy as np
from matplotlib.axes import Axes
from matplotlib.axis import Axis
from matplotlib.figure import Figure
from matplotlib.ticker import FixedFormatter, FixedLocator, NullLocator
from matplotlib.transforms import blended_transform_factory

from curvelab.plots.ink import GRAPHITE, MAJOR, MINOR, QUIET
from curvelab.plots.ticks import (
    between,
    current_label,
    decades,
    human_times,
    is_two_or_five,
    rounded_range,
    value_label,
)

BASE_WORDS = {
    "A": "Current",
    "xIn": r"Multiple of rated current $I_\mathrm{n}$",
    "xIr": r"Multiple of set current $I_\mathrm{r}$",
    "xIsd": r"Multiple of short-time setting $I_\mathrm{sd}$",
    "xIi": r"Multiple of instantaneous setting $I_\mathrm{i}$",
    "xIg": r"Multiple of earth-fault setting $I_\mathrm{g}$",
    "xIdn": r"Multiple of rated residual current $I_\mathrm{\Delta n}$",
}
QUANTITY_WORDS = {
    "time": "Time",
    "let_through": r"Let-through energy $I^2t$ in $\mathrm{A^2s}$",
    "peak": "Cut-off current (peak)",
}
ROOMY_DECADES = 3.2
"""Up to this many decades an axis has room for labels at 2 and 5."""
LABEL_AT = 0.046
"""Where the second axis's name stands across the page, however long its numbers are."""
MINOR_PAD = 5.5
"""In points: sets the small labels on the line of the large ones."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Paper:
    """What the axes count and how far they go: (lowest, highest) each."""

    base: str
    quantity: str
    currents: tuple[float, float]
    values: tuple[float, float]
    amperes_per_unit: float | None = None
    """Where given, a second current scale in amperes stands on top."""


def draw_paper(figure: Figure, place: tuple[float, float, float, float], paper: Paper) -> Axes:
    """Empty log-log axes at a place of the figure (left, bottom, width, height as fractions of it)."""
    axes = figure.add_axes(place)
    axes.set_xscale("log")
    axes.set_yscale("log")
    lowest, highest = rounded_range(*paper.currents)
    bottom, top = rounded_range(*paper.values)
    axes.set_xlim(lowest, highest)
    axes.set_ylim(bottom, top)
    _ticks(axes.xaxis, lowest, highest, lambda value: current_label(value, paper.base))
    _ticks(axes.yaxis, bottom, top, lambda value: value_label(value, paper.quantity))
    axes.grid(which="major", color=MAJOR, linewidth=0.5, zorder=0)
    axes.grid(which="minor", color=MINOR, linewidth=0.35, zorder=0)
    axes.set_axisbelow(True)
    axes.set_xlabel(BASE_WORDS[paper.base], labelpad=5)
    axes.set_ylabel(QUANTITY_WORDS[paper.quantity])
    axes.yaxis.set_label_coords(LABEL_AT, 0.5, blended_transform_factory(figure.transFigure, axes.transAxes))
    if paper.amperes_per_unit is not None:
        _ampere_scale(axes, paper.amperes_per_unit, lowest, highest)
    if paper.quantity == "time":
        _human_scale(axes, bottom, top)
    return axes


def _ticks(axis: Axis, lowest: float, highest: float, label: Callable[[float], str]) -> None:
    major, minor = decades(lowest, highest), between(lowest, highest)
    roomy = len(major) <= ROOMY_DECADES + 1
    axis.set_major_locator(FixedLocator(major))
    axis.set_major_formatter(FixedFormatter([label(value) for value in major]))
    axis.set_minor_locator(FixedLocator(minor))
    axis.set_minor_formatter(
        FixedFormatter([label(value) if roomy and is_two_or_five(value) else "" for value in minor])
    )
    axis.set_tick_params(which="major", length=4, width=0.6, labelsize=8)
    axis.set_tick_params(which="minor", length=2, width=0.4, pad=MINOR_PAD, labelsize=6.5, labelcolor=QUIET)


def _ampere_scale(axes: Axes, amperes: float, lowest: float, highest: float) -> None:
    scale = axes.secondary_xaxis("top", functions=(partial(np.multiply, amperes), partial(np.multiply, 1.0 / amperes)))
    _ticks(scale.xaxis, lowest * amperes, highest * amperes, lambda value: current_label(value, "A"))


def _human_scale(axes: Axes, bottom: float, top: float) -> None:
    named = human_times(bottom, top)
    if not named:
        return
    scale = axes.secondary_yaxis("right")
    scale.yaxis.set_major_locator(FixedLocator(list(named)))
    scale.yaxis.set_major_formatter(FixedFormatter(list(named.values())))
    scale.yaxis.set_minor_locator(NullLocator())
    scale.tick_params(length=4, width=0.6, labelsize=7, labelcolor=GRAPHITE)
