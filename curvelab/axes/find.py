"""Both axes of a plot read from the sheet itself: lines, labels and titles become marks, or it says that it cannot."""

from collections.abc import Callable
from dataclasses import dataclass, replace

from curvelab.axes.choose import chosen_plot, plots_of
from curvelab.axes.consensus import rule
from curvelab.axes.decide import SURE_TITLE, decided_ruling, decided_unit, units_like
from curvelab.axes.labels import Label, labels_beside, labels_in
from curvelab.axes.marking import marks_of
from curvelab.axes.naming import Naming, best_pair, namings, with_units
from curvelab.axes.page import Page, page_of
from curvelab.axes.plots import Box, Plot
from curvelab.axes.seen import Seen, seen_lines, with_ticks
from curvelab.records.axes import Direction, Scale
from curvelab.records.sheet import Sheet, Word
from curvelab.records.warning import ReadingWarning
from curvelab.records.worksheet import AxisEntry
from curvelab.units import unit_factor

Words = Callable[[Sheet, tuple[Box, ...]], tuple[Word, ...]]
"""Reads the words of a sheet in rectangles (places)."""

FEWEST_MARKS = 2
"""Marks that an axis needs; with fewer it is read from the sheet."""

BAND = 0.11
"""Share of the page's larger side about a plot in which its numbers and titles are looked for."""

SHORTEST_BAND = 80.0
"""px or pt: the least of it, as letters do not shrink with a small page."""

INTO = 0.012
"""The same into the plot: numbers touch the frame."""

USUAL_BANDS = 2
"""Rectangles about a plot, of those in which lettering is looked for, where it stands as a rule."""

ENOUGH_NUMBERS = 3
"""Numbers along an axis with which others need not be looked for."""

SCALES: tuple[Scale, ...] = ("log", "linear")


@dataclass(frozen=True, kw_only=True, slots=True)
class FoundAxes:
    """Both axes as a worksheet would say them, the plot they are of (from 1), and what is doubtful."""

    current: AxisEntry
    value: AxisEntry
    plot: int
    warnings: tuple[ReadingWarning, ...]


def is_open(entry: AxisEntry) -> bool:
    """Whether an axis has too few marks to be calibrated from them."""
    return len(entry.marks) < FEWEST_MARKS


def find_axes(sheet: Sheet, current: AxisEntry, value: AxisEntry | None, plot: int | None, words: Words) -> FoundAxes:
    """Read what the entries leave open.

    Parameters
    ----------
    sheet : Sheet
    current : AxisEntry
        What is known of the current axis.
    value : AxisEntry or None
        What is known of the second axis; None where not even its quantity is.
    plot : int or None
        Which plot of the page, from 1; None for the largest.
    words : callable
        Reads the words of the sheet in rectangles.

    Raises
    ------
    AxesError
        There is no such plot, or an axis cannot be read surely; the message says what to give.
    """
    page = page_of(sheet)
    plots = plots_of(page)
    index, doubts = chosen_plot(plots, plot)
    chosen = plots[index]
    view = _View.of(page, chosen, sheet, words)
    along, names = view.named(current, value)
    quantity = value.quantity if value else (names[1].title.quantity if names[1] else "time")
    entries = (current, value or AxisEntry(quantity=quantity))
    read = [
        view.axis(entry, across, naming)
        for entry, across, naming in zip(entries, (along, 1 - along), names, strict=True)
    ]
    placed = [_in_places(page, doubt) for _, more in read for doubt in more]
    return FoundAxes(current=read[0][0], value=read[1][0], plot=index + 1, warnings=(*doubts, *placed))


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _View:
    """A plot with its lines of both directions, the words beside it and the numbers at its sides."""

    page: Page
    plot: Plot
    words: list[Word]
    seen: tuple[Seen, Seen]
    labels: tuple[list[Label], list[Label]]

    @classmethod
    def of(cls, page: Page, plot: Plot, sheet: Sheet, read: Words) -> "_View":
        """With the words below and at the left; those above and at the right are read where these do not tell all."""
        seen = (
            with_ticks(seen_lines(plot, 0, page.sd), page.upright, plot, 0, page.near),
            with_ticks(seen_lines(plot, 1, page.sd), page.level, plot, 1, page.near),
        )
        lean = max(abs(lines.slope) for lines in seen)
        areas = tuple(page.area(box) for box in _bands(plot, page.size, lean))

        def view(words: list[Word]) -> _View:
            labels = (labels_beside(words, plot, seen, 0), labels_beside(words, plot, seen, 1))
            return cls(page=page, plot=plot, words=words, seen=seen, labels=labels)

        usual = view([page.word(word) for word in read(sheet, areas[:USUAL_BANDS])])
        if usual.is_complete:
            return usual
        return view([*usual.words, *(page.word(word) for word in read(sheet, areas[USUAL_BANDS:]))])

    @property
    def is_complete(self) -> bool:
        """Whether both axes have numbers enough and titles that are sure."""
        sure = [naming for naming in namings(self.words, self.plot) if naming.confidence >= SURE_TITLE]
        quantities = {naming.title.quantity == "current" for naming in sure}
        return len(quantities) == 2 and all(len(beside) >= ENOUGH_NUMBERS for beside in self.labels)

    def named(self, current: AxisEntry, value: AxisEntry | None) -> tuple[int, tuple[Naming | None, Naming | None]]:
        """The direction of the current axis on the page and the titles of both axes."""
        found = [*namings(self.words, self.plot), *with_units(self.labels)]
        along, first, second = best_pair(found, self._known(current, value), value.quantity if value else None)
        return along, (first, second)

    def _known(self, current: AxisEntry, value: AxisEntry | None) -> int | None:
        """The direction of the current axis on the page where an entry says it."""
        if current.direction is not None:
            direction = current.direction
        elif value is not None and value.direction is not None:
            direction = "y" if value.direction == "x" else "x"
        else:
            return None
        return int((direction == "y") != self.page.swapped)

    def axis(
        self, entry: AxisEntry, across: int, naming: Naming | None
    ) -> tuple[AxisEntry, tuple[ReadingWarning, ...]]:
        """One axis; as it was given where it has marks enough."""
        direction: Direction = "x" if (across == 0) != self.page.swapped else "y"
        if not is_open(entry):
            return replace(entry, direction=direction), ()
        unit = decided_unit(entry.quantity, entry.unit, entry.factor, naming)
        scales = SCALES if entry.scale is None else (entry.scale,)
        labels = labels_in(self.labels[across], units_like(entry.quantity, unit.unit))

        def factor(own: str | None) -> float:
            return unit_factor(entry.quantity, own or unit.unit) / unit_factor(entry.quantity, unit.unit)

        ruling, doubts = decided_ruling(entry.quantity, direction, rule(self.seen[across], labels, factor, scales))
        marks = marks_of(self.page, self.plot, self.seen[across], ruling, across)
        complete = replace(
            entry, scale=ruling.scale, unit=unit.unit, factor=unit.factor, direction=direction, marks=marks
        )
        return complete, (*unit.doubts, *doubts)


def _bands(plot: Plot, size: tuple[float, float], lean: float) -> tuple[Box, ...]:
    """Rectangles about a plot, whose lines lean, that hold its numbers and titles: below, left, above and right."""
    x0, y0, x1, y1 = plot.box
    reach = max(BAND * max(size), SHORTEST_BAND)
    into = INTO * max(size) + 0.5 * lean * max(x1 - x0, y1 - y0)
    left, top, right, bottom = (
        max(x0 - reach, 0.0),
        max(y0 - reach, 0.0),
        min(x1 + reach, size[0]),
        min(y1 + reach, size[1]),
    )
    return (
        (left, y1 - into, right, bottom),
        (left, y0 - into, x0 + into, y1 - into),
        (left, top, right, y0 - into),
        (x1 - into, y0 - into, right, y1 - into),
    )


def _in_places(page: Page, doubt: ReadingWarning) -> ReadingWarning:
    if doubt.at is None or page.pixels is None:
        return doubt
    x, y = page.area((*doubt.at, *doubt.at))[:2]
    return replace(doubt, at=(x, y))
