"""Marks at the labels of an axis, each on its line; on a page seen at an angle, marks all over the plot."""

import numpy as np

from curvelab.axes.consensus import Ruling
from curvelab.axes.page import Page
from curvelab.axes.plots import Plot
from curvelab.axes.seen import Seen
from curvelab.records.axes import Mark, MarkOrigin

ON_LINE = 4.0
"""Standard deviations from the ruler within which a line is the label's own."""

STRAIGHT_AT = 0.577
"""Share of its half length from its middle at which a line bent to a parabola meets its straight line: 1 / sqrt(3)."""

APART = 0.01
"""Share of the plot's other side by which marks all over it lie apart along their axis."""

DECIMALS = 3
"""Decimals of a mark's place: a thousandth of a pixel or point, as it stands in the worksheet."""


def marks_of(page: Page, plot: Plot, seen: Seen, ruling: Ruling, across: int) -> tuple[Mark, ...]:
    """A mark for each value labelled, where its line meets the frame at the label's side.

    A value labelled twice, at both ends of its line, is marked once. Where lines fan out, every line is marked, by
    turns near one end and near the other, so that the marks alone tell how the page was seen.
    """
    if not page.flattening.is_straight:
        return _marks_all_over(page, plot, seen, ruling, across)
    found: dict[float, Mark] = {}
    for agreed in sorted(ruling.agreeing, key=lambda each: each.scaled):
        predicted = float(ruling.ruler.across(np.array([agreed.scaled]))[0])
        at = _line_at(seen, predicted)
        low, high = plot.span(1 - across)
        along = low if agreed.label.side in ("above", "left") else high
        at += seen.slope_at(at) * (along - seen.middle)
        point = np.array([[at, along] if across == 0 else [along, at]])
        x, y = page.places(point)[0]
        place = (round(float(x), DECIMALS), round(float(y), DECIMALS))
        origin: MarkOrigin = "label" if page.pixels else "vector"
        found.setdefault(agreed.scaled, Mark(at=place, value=agreed.value, unit=agreed.unit, origin=origin))
    return tuple(found.values())


def _marks_all_over(page: Page, plot: Plot, seen: Seen, ruling: Ruling, across: int) -> tuple[Mark, ...]:
    labelled = {agreed.scaled: agreed for agreed in ruling.agreeing}
    scaled = np.unique(np.round([*labelled, *ruling.laid.lines], 9))
    places = [_line_at(seen, float(place)) for place in ruling.ruler.across(scaled)]
    low, high = plot.span(1 - across)
    marks: list[Mark] = []
    for value, at in zip(scaled, places, strict=True):
        agreed = labelled.get(float(value))
        if agreed is None and at not in seen.at:
            continue
        along = 0.5 * (low + high) + (STRAIGHT_AT if len(marks) % 2 else -STRAIGHT_AT) * 0.5 * (high - low)
        leaning = at + seen.slope_at(at) * (along - seen.middle)
        x, y = page.places(np.array([[leaning, along] if across == 0 else [along, leaning]]))[0]
        place = (round(float(x), DECIMALS), round(float(y), DECIMALS))
        column = across if not page.swapped else 1 - across
        if any(abs(place[column] - other.at[column]) < APART * (high - low) for other in marks):
            continue
        if agreed is not None:
            marks.append(Mark(at=place, value=agreed.value, unit=agreed.unit, origin="label"))
        else:
            printed = float(f"{10.0**value if ruling.scale == 'log' else value:.6g}")
            marks.append(Mark(at=place, value=printed, origin="grid"))
    return tuple(marks)


def _line_at(seen: Seen, place: float) -> float:
    """The line seen at a place across, or the place itself where there is none."""
    if not len(seen.at):
        return place
    nearest = float(seen.at[int(np.argmin(np.abs(seen.at - place)))])
    return nearest if abs(nearest - place) <= ON_LINE * seen.sd else place
