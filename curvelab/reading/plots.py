"""How many plots a page has."""

from pathlib import Path

from curvelab.axes.choose import plots_of
from curvelab.axes.page import page_of
from curvelab.sheets.open import open_sheet


def plot_count(path: Path, page: int) -> int:
    """Plots found on one page of a sheet's file, 0 where there is none.

    Raises
    ------
    SheetError
        The page cannot be opened.
    """
    return len(plots_of(page_of(open_sheet(path, page))))
