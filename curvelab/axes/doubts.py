"""What is doubtful about calibrated axes, said so that a person can settle it."""

from curvelab.axes.entries import mark_text, table_name
from curvelab.axes.grid import Grid
from curvelab.axes.marks import AGREEING, CLICK_SD, pixel_size
from curvelab.records.axes import Axis, Mark
from curvelab.records.sheet import Sheet
from curvelab.records.warning import ReadingWarning


def doubts_of(
    sheet: Sheet, axes: tuple[Axis, Axis], grid: Grid, by_grid: tuple[bool, bool], *, snapped: bool
) -> list[ReadingWarning]:
    """Warnings about both axes.

    Parameters
    ----------
    sheet : Sheet
    axes : (Axis, Axis)
        With the residuals of their marks.
    grid : Grid
    by_grid : (bool, bool)
        Whether an axis's grid lines decided.
    snapped : bool
        Whether the lines stand on whole pixels.
    """
    pixel = pixel_size(sheet)
    doubts = [_snapped()] if snapped else []
    for k, axis in enumerate(axes):
        if grid.disagrees[k]:
            doubts.append(_astray(axis))
        if not by_grid[k]:
            doubts.append(_by_marks(axis, f"{CLICK_SD * pixel:.2g} {sheet.unit}"))
        doubts += [
            _outlying(axis, mark, f"{abs(mark.residual):.3g} {sheet.unit}", by_grid=by_grid[k])
            for mark in axis.marks
            if mark.residual is not None and abs(mark.residual) > AGREEING * pixel
        ]
    return doubts


def _snapped() -> ReadingWarning:
    text = (
        "The grid lines were drawn on whole pixels, each up to half a pixel off: the interval says so; "
        "give a vector page or a scan of a print for more."
    )
    return ReadingWarning(code="grid-snapped", text=text)


def _astray(axis: Axis) -> ReadingWarning:
    marks = " and ".join(mark_text(mark) for mark in axis.marks)
    text = f"The grid lines seen along {table_name(axis.quantity)} are not where its marks have them: check {marks}."
    return ReadingWarning(code="grid-disagrees", text=text, at=axis.marks[0].at)


def _by_marks(axis: Axis, off: str) -> ReadingWarning:
    text = (
        f"{table_name(axis.quantity)} rests on its {len(axis.marks)} marks alone, as no grid lines confirm them; "
        f"a mark is taken to be off by {off} as a rule: give more marks, or exact ones."
    )
    return ReadingWarning(code="axes-from-marks", text=text)


def _outlying(axis: Axis, mark: Mark, off: str, *, by_grid: bool) -> ReadingWarning:
    what = "its grid line" if by_grid else "where the other marks have its value"
    text = f"The {mark_text(mark)} of {table_name(axis.quantity)} lies {off} from {what}: correct its place or value."
    return ReadingWarning(code="mark-outlying", text=text, at=mark.at)
