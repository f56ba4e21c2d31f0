"""Whether what was read of an axis is sure enough: taken, taken with a warning, or refused."""

from dataclasses import dataclass, replace

from curvelab.axes.consensus import Ruling
from curvelab.axes.entries import mark_text, table_name
from curvelab.axes.naming import Naming
from curvelab.errors import AxesError
from curvelab.records.axes import Axes, Axis
from curvelab.records.warning import ReadingWarning
from curvelab.units import CURRENT_UNITS, VALUE_UNITS

LEAST_MARGIN, SURE_MARGIN = 5.0, 8.0
"""Nats by which a ruling must beat the best that differs, to be taken at all and without a warning."""

LEAST_VALUES = 2
"""Values labelled that must agree."""

MOST_CONTRARY, FEW_CONTRARY = 0.5, 0.25
"""Share of the labels that may disagree, at most and without a warning."""

EXPLAINED = 0.6
"""Share of the lines seen that the pattern has, below which the grid is doubtful."""

LEAST_TITLE, SURE_TITLE = 0.3, 0.55
"""Confidence in a title, to be taken at all and without a warning."""

FURTHEST = 3.0
"""Pixels by which a mark that was read may lie off the map: it stood on a line that was seen."""

LEAST_FITTING = 0.7
"""Share of an axis's marks that lie so, and"""

MOST_RMS = 0.12
"""pixels that the grid's lines lie off the map by at most (root mean square), where some marks do not."""

MARKS_FIX = "marks = [{ at = [x, y], value = ... }, ...]"


@dataclass(frozen=True, kw_only=True, slots=True)
class Unit:
    """An axis's printed unit and factor, and what is doubtful about them."""

    unit: str
    factor: float
    doubts: tuple[ReadingWarning, ...] = ()


def decided_unit(quantity: str, given: str | None, factor: float | None, naming: Naming | None) -> Unit:
    """The unit that is given, else the one of the title.

    Raises
    ------
    AxesError
        Nothing says the unit, or not surely enough.
    """
    title = naming.title if naming else None
    if given is not None:
        return Unit(unit=given, factor=factor or (title.factor if title and title.unit == given else 1.0))
    if naming is None or naming.confidence < LEAST_TITLE:
        known = CURRENT_UNITS if quantity == "current" else VALUE_UNITS[quantity]
        raise AxesError(
            f"The unit of {table_name(quantity)} could not be read beside the plot",
            "A title that names quantity and unit, or numbers with a unit",
            f"Give unit in {table_name(quantity)}, one of {', '.join(known)}",
        )
    doubts = () if naming.confidence >= SURE_TITLE else (_doubtful_unit(quantity, naming),)
    return Unit(unit=naming.title.unit, factor=factor or naming.title.factor, doubts=doubts)


def units_like(quantity: str, unit: str) -> frozenset[str]:
    """Units that numbers along an axis may be in: those of its quantity, of a current's base."""
    if quantity != "current":
        return frozenset(VALUE_UNITS[quantity])
    return frozenset(one for one, (base, _) in CURRENT_UNITS.items() if base == CURRENT_UNITS[unit][0])


def decided_ruling(quantity: str, direction: str, best: Ruling | None) -> tuple[Ruling, tuple[ReadingWarning, ...]]:
    """The ruling and what is doubtful about it.

    Raises
    ------
    AxesError
        Labels and lines do not say surely which value is where.
    """
    name = table_name(quantity)
    values = {agreed.scaled for agreed in best.agreeing} if best else set()
    if best is None or len(values) < LEAST_VALUES:
        raise AxesError(
            f"The numbers along {direction} of {name} could not be read",
            f"At least {LEAST_VALUES} numbers at lines that follow one scale",
            f"Give two places whose value is printed, as {MARKS_FIX} in {name}",
        )
    contrary = len(best.contrary) / (len(best.contrary) + len(best.agreeing))
    if best.margin < LEAST_MARGIN or contrary > MOST_CONTRARY:
        raise AxesError(
            f"Which value each line of {name} has is not sure: {len(best.agreeing)} numbers agree, "
            f"{len(best.contrary)} do not, odds e^{best.margin:.1f} against the next reading",
            f"Odds of e^{LEAST_MARGIN:g} at least, and most numbers in agreement",
            f"Give two places whose value is printed, as {MARKS_FIX} in {name}",
        )
    doubts = []
    if best.margin < SURE_MARGIN or contrary > FEW_CONTRARY:
        doubts.append(_doubtful_values(quantity, best))
    if len(best.laid.lines) >= LEAST_VALUES and best.laid.explained < EXPLAINED:
        doubts.append(_doubtful_grid(quantity, best))
    return best, tuple(doubts)


def fitting_axes(axes: Axes, pixel: float) -> tuple[Axis, Axis]:
    """Both axes with the marks that were read and lie on the map; a few lines may have been taken for others.

    Raises
    ------
    AxesError
        Too many lie off, too few are left, or some do where the grid's lines do not fit the map well either.
    """
    kept = tuple(_fitting(axis, pixel) for axis in (axes.current, axes.value))
    all_fit = kept == (axes.current, axes.value)
    well = axes.grid_residual_rms is not None and axes.grid_residual_rms <= MOST_RMS * pixel
    if not all_fit and not well:
        raise _not_smooth(axes, pixel)
    for whole, part in zip((axes.current, axes.value), kept, strict=True):
        if len(part.marks) < max(LEAST_VALUES, LEAST_FITTING * len(whole.marks)):
            raise _not_smooth(axes, pixel)
    return kept[0], kept[1]


def _fitting(axis: Axis, pixel: float) -> Axis:
    return replace(axis, marks=tuple(mark for mark in axis.marks if abs(mark.residual or 0.0) <= FURTHEST * pixel))


def _not_smooth(axes: Axes, pixel: float) -> AxesError:
    off, axis, mark = max(
        ((abs(mark.residual or 0.0), axis, mark) for axis in (axes.current, axes.value) for mark in axis.marks),
        key=lambda each: each[0],
    )
    return AxesError(
        f"The lines read along {table_name(axis.quantity)} do not fit one smooth map: "
        f"{mark_text(mark)} lies {off:.3g} off",
        f"Every line within {FURTHEST * pixel:.3g}",
        f"Give a flat scan, or marks in {table_name('current')} and {table_name(axes.value.quantity)}",
    )


def _doubtful_unit(quantity: str, naming: Naming) -> ReadingWarning:
    text = (
        f"The unit of {table_name(quantity)} is read as {naming.title.unit} from '{naming.text}': "
        "give unit in the worksheet."
    )
    x0, y0, x1, y1 = naming.box
    return ReadingWarning(code="unit-doubtful", text=text, at=(0.5 * (x0 + x1), 0.5 * (y0 + y1)))


def _doubtful_values(quantity: str, ruling: Ruling) -> ReadingWarning:
    agreeing, contrary = len(ruling.agreeing), len(ruling.contrary)
    text = (
        f"The values along {table_name(quantity)} rest on {agreeing} numbers that agree with the lines, {contrary} do "
        f"not; odds against the next reading e^{ruling.margin:.1f}: check the marks in the worksheet."
    )
    label = (ruling.contrary or (ruling.agreeing[0].label,))[0]
    x0, y0, x1, y1 = label.box
    return ReadingWarning(code="values-doubtful", text=text, at=(0.5 * (x0 + x1), 0.5 * (y0 + y1)))


def _doubtful_grid(quantity: str, ruling: Ruling) -> ReadingWarning:
    text = (
        f"Only {ruling.laid.explained:.0%} of the lines seen across {table_name(quantity)} follow the scale that its "
        "numbers have: check the marks in the worksheet."
    )
    x0, y0, x1, y1 = ruling.agreeing[0].label.box
    return ReadingWarning(code="grid-doubtful", text=text, at=(0.5 * (x0 + x1), 0.5 * (y0 + y1)))
