"""Limits of a standard on a picture: a short bracket whose open side is permitted, its multiple beside it."""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace

from matplotlib.axes import Axes
from matplotlib.path import Path

from curvelab.plots.ink import GRAPHITE, PAPER, QUIET, WARM
from curvelab.plots.subject import Subject, units_per_unit
from curvelab.records.finding import Finding
from curvelab.units import written, written_current

LEG = 0.55
CLOSE, LINE = 0.25, 9.0
"""Limits closer than this in log current and log time write their words on lines of their own, so many points apart."""
SIZE = 13.0
"""Of the bracket, in points."""
SETTLED = ("meets", "not covered")
"""Outcomes that need no second look; the others are named beside the limit."""
RESIDUAL = "xIdn"
MULTIPLE_OF = {
    "xIn": r"$I_\mathrm{n}$",
    "xIr": r"$I_\mathrm{r}$",
    "xIsd": r"$I_\mathrm{sd}$",
    "xIi": r"$I_\mathrm{i}$",
    "xIg": r"$I_\mathrm{g}$",
    "xIdn": r"$I_\mathrm{\Delta n}$",
}

_DOWN = ((-1.0, -LEG), (-1.0, 0.0), (1.0, 0.0), (1.0, -LEG))
OPENINGS = {
    (False, "at_most"): (_DOWN, (0, 4), "center", "bottom"),
    (False, "at_least"): (tuple((x, -y) for x, y in _DOWN), (0, -4), "center", "top"),
    (True, "at_most"): (tuple((y, x) for x, y in _DOWN), (4, 0), "left", "center"),
    (True, "at_least"): (tuple((-y, x) for x, y in _DOWN), (-4, 0), "right", "center"),
}
"""(limit of a current, permitted side) -> bracket, place of its words in points, and how they are set there."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Limit:
    """A limit as it is drawn: its place on the plot, and what is written beside it, ``lines`` away from it."""

    finding: Finding
    of_current: bool
    current: float
    time_s: float
    words: str
    lines: int = 0

    @property
    def opening(self) -> tuple[bool, str]:
        """Which bracket it is."""
        return self.of_current, self.finding.permitted or "at_most"


def placed_limits(findings: Iterable[Finding], subjects: Sequence[Subject], base: str) -> tuple[Limit, ...]:
    """The findings of the devices drawn that have a place on a time-current plot counted in ``base``."""
    by_key = {subject.plate.key: subject for subject in subjects}
    limits = (_limit(each, by_key[each.device], base) for each in findings if each.device in by_key)
    return _spread(sorted((each for each in limits if each is not None), key=lambda each: each.current))


def _spread(limits: Sequence[Limit]) -> tuple[Limit, ...]:
    """The words of limits that stand close together, a line further out each; the same words stand there once."""
    placed: list[Limit] = []
    for limit in limits:
        beside = [each for each in placed if _are_close(each, limit)]
        if any(each.words == limit.words for each in beside):
            placed.append(replace(limit, words=""))
            continue
        taken = {each.lines for each in beside if each.words}
        placed.append(replace(limit, lines=next(line for line in range(len(taken) + 1) if line not in taken)))
    return tuple(placed)


def _are_close(one: Limit, other: Limit) -> bool:
    apart = abs(math.log(one.time_s / other.time_s)), abs(math.log(one.current / other.current))
    return one.opening == other.opening and max(apart) < CLOSE


def _limit(finding: Finding, subject: Subject, base: str) -> Limit | None:
    place = finding.on_plot
    if place is None:
        return None
    current, own_base = place.current, place.base
    if RESIDUAL in (own_base, base) and own_base not in (base, "A"):
        # A residual current and a load current are no two places on one axis.
        return None
    scale = units_per_unit(subject, own_base, base)
    if scale is None:
        return None
    words = written_current(current, "A") if own_base == "A" else f"{current:g} {MULTIPLE_OF[own_base]}"
    if finding.unit == "A2s":
        words = written(finding.limit, "A2s").replace("A2s", r"$\mathrm{A^2s}$")
    if finding.outcome not in SETTLED:
        words = f"{words}, {finding.outcome}{' (advisory)' if finding.advisory else ''}"
    return Limit(
        finding=finding, of_current=place.of_current, current=current * scale, time_s=place.time_s, words=words
    )


def draw_limit(axes: Axes, limit: Limit) -> None:
    """One bracket, with its words on its closed side."""
    corners, (right, up), across, along = OPENINGS[limit.opening]
    away = (1 if up >= 0 else -1) * limit.lines * LINE
    colour = GRAPHITE if limit.finding.outcome in SETTLED else QUIET if limit.finding.advisory else WARM
    axes.plot(
        [limit.current],
        [limit.time_s],
        marker=Path(corners),
        markersize=SIZE,
        markerfacecolor="none",
        markeredgecolor=colour,
        markeredgewidth=1.2,
        linestyle="none",
        clip_on=False,
        zorder=5,
    )
    if not limit.words:
        return
    axes.annotate(
        limit.words,
        (limit.current, limit.time_s),
        xytext=(right, up + away),
        textcoords="offset points",
        ha=across,
        va=along,
        fontsize=6.5,
        color=colour,
        zorder=6,
        bbox={"boxstyle": "square,pad=0.15", "facecolor": PAPER, "edgecolor": "none", "alpha": 0.85},
    )
