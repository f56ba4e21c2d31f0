"""Which of a page's plots is read."""

from collections.abc import Sequence

from curvelab.axes.page import Page, page_of
from curvelab.axes.plots import Plot, find_plots
from curvelab.errors import AxesError
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning


def plots_of(page: Page) -> tuple[Plot, ...]:
    """The plots of a page, in reading order."""
    return find_plots(page.upright, page.level, page.near, page.size)


def checked_plot(sheet: Sheet, number: int | None) -> int:
    """The number of a plot whose marks are given, once it is known that the page has as many.

    Raises
    ------
    AxesError
        The page has fewer plots.
    """
    if number is None or number == 1:
        return 1
    return chosen_plot(plots_of(page_of(sheet)), number)[0] + 1


def chosen_plot(plots: Sequence[Plot], number: int | None) -> tuple[int, tuple[ReadingWarning, ...]]:
    """Index of the plot to read: the one asked for, else the largest, with a warning where there are others.

    Raises
    ------
    AxesError
        There is no plot of that number, or none at all.
    """
    if number is not None and not 1 <= number <= max(len(plots), 1):
        raise AxesError(
            f"Plot {number} is not on this page, which has {len(plots)} plot{'s' if len(plots) != 1 else ''}",
            f"A plot from 1 to {len(plots)}" if len(plots) > 1 else "Plot 1",
            "Give plot in [sheet], or --plot",
        )
    if not plots:
        raise AxesError(
            "No plot was found on this page: no grid and no frame",
            "",
            "Give two marks on each axis in the worksheet, as marks = [{ at = [x, y], value = ... }, ...]",
        )
    if number is not None:
        return number - 1, ()
    largest = max(range(len(plots)), key=lambda k: plots[k].area)
    return largest, (_several(plots, largest),) if len(plots) > 1 else ()


def _several(plots: Sequence[Plot], chosen: int) -> ReadingWarning:
    x0, y0, x1, y1 = plots[chosen].box
    text = (
        f"The page has {len(plots)} plots; the largest, plot {chosen + 1}, is read: "
        "give plot in [sheet] to read another or to confirm it."
    )
    return ReadingWarning(code="several-plots", text=text, at=(0.5 * (x0 + x1), 0.5 * (y0 + y1)))
