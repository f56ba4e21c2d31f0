"""Marks at the labels of an axis, each on its line."""

import numpy as np

from curvelab.axes.consensus import Ruling
from curvelab.axes.labels import slope_at
from curvelab.axes.page import Page
from curvelab.axes.plots import Plot
from curvelab.axes.seen import Seen
from curvelab.records.axes import Mark, MarkOrigin

ON_LINE = 4.0
"""Standard deviations from the ruler within which a line is the label's own."""

DECIMALS = 3
"""Decimals of a mark's place: a thousandth of a pixel or point, as it stands in the worksheet."""


def marks_of(page: Page, plot: Plot, seen: Seen, ruling: Ruling, across: int) -> tuple[Mark, ...]:
    """A mark for each value labelled, where its line meets the frame at the label's side.

    A value labelled twice, at both ends of its line, is marked once.
    """
    found: dict[float, Mark] = {}
    for agreed in sorted(ruling.agreeing, key=lambda each: each.scaled):
        predicted = float(ruling.ruler.across(np.array([agreed.scaled]))[0])
        at = _line_at(seen, predicted)
        low, high = plot.span(1 - across)
        along = low if agreed.label.side in ("above", "left") else high
        at += slope_at(seen, at) * (along - seen.middle)
        point = np.array([[at, along] if across == 0 else [along, at]])
        x, y = page.places(point)[0]
        place = (round(float(x), DECIMALS), round(float(y), DECIMALS))
        origin: MarkOrigin = "label" if page.pixels else "vector"
        found.setdefault(agreed.scaled, Mark(at=place, value=agreed.value, unit=agreed.unit, origin=origin))
    return tuple(found.values())


def _line_at(seen: Seen, place: float) -> float:
    """The line seen at a place across, or the place itself where there is none."""
    if not len(seen.at):
        return place
    nearest = float(seen.at[int(np.argmin(np.abs(seen.at - place)))])
    return nearest if abs(nearest - place) <= ON_LINE * seen.sd else place
