"""Letters on the curves of several devices, as they stand in the list above."""

from collections.abc import Sequence

import numpy as np
from matplotlib.axes import Axes

from curvelab.plots.ink import PAPER
from curvelab.plots.subject import Subject
from curvelab.records.curve import Curve, Edge

FIRST, STEP, LAST = 0.93, 0.055, 0.25
"""Heights of the letters as fractions of the axes: each device's lies lower than the one before."""
SIDES: tuple[Edge, ...] = ("slow", "mean", "fast")


def draw_tags(axes: Axes, subjects: Sequence[Subject]) -> None:
    """One letter for each device that has one, on its slowest line."""
    for index, subject in enumerate(subjects):
        curve = next((band.edges[edge] for edge in SIDES for band in subject.bands if edge in band.edges), None)
        if subject.letter and curve is not None:
            height = FIRST - (index * STEP) % (FIRST - LAST)
            axes.annotate(
                subject.letter,
                _place_at(axes, curve, height),
                ha="center",
                va="center",
                fontsize=6.5,
                fontweight="bold",
                color=subject.ink.colour,
                zorder=7,
                bbox={
                    "boxstyle": "circle,pad=0.22",
                    "facecolor": PAPER,
                    "edgecolor": subject.ink.colour,
                    "linewidth": 0.7,
                },
            )


def _place_at(axes: Axes, curve: Curve, height: float) -> tuple[float, float]:
    """The point of the curve nearest to a height of the axes."""
    current = np.concatenate([part.current for part in curve.parts])
    value = np.concatenate([part.value for part in curve.parts])
    bottom, top = np.log10(axes.get_ylim())
    wanted = bottom + height * (top - bottom)
    order = np.argsort(value, kind="stable")
    log_value = np.clip(wanted, np.log10(value.min()), np.log10(value.max()))
    log_current = np.interp(log_value, np.log10(value)[order], np.log10(current)[order])
    return float(10**log_current), float(10**log_value)
