"""The limits of a rule as its table states them, one current and time each.

A table may state a multiple and a time; a current, an energy or a loop impedance for each rating; or a time for each
multiple.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal, InvalidOperation
from math import isfinite, sqrt

from curvelab.errors import StandardError
from curvelab.standards.fields import Entry, choice, number, pairs, positive
from curvelab.units import BASES

LIMIT_KEYS = {
    *("multiple", "base", "limit_s", "points", "factor"),
    *("currents_a", "let_through_a2s", "impedances_ohm", "voltage_v"),
}
_FORMS = ("multiple", "currents_a", "let_through_a2s", "impedances_ohm", "points")


@dataclass(frozen=True, kw_only=True, slots=True)
class StatedLimit:
    """One limit: the rating it is for (None: all), the current it is at, and the time."""

    suffix: str = ""
    rated_a: float | None = None
    current: float
    current_from: float
    base: str = "A"
    limit_s: float
    let_through_a2s: float | None = None


def stated_limits(entry: Entry, place: str) -> tuple[StatedLimit, ...]:
    """The limits of one rule's entry.

    Raises
    ------
    StandardError
        They are not stated in exactly one of the forms, or a number is not positive.
    """
    forms = [form for form in _FORMS if form in entry]
    if len(forms) != 1:
        raise StandardError(
            f"{place}: {' and '.join(forms) or 'no limit'} given", f"Exactly one of: {', '.join(_FORMS)}"
        )
    if forms[0] == "multiple":
        multiple, base = number(entry, "multiple", place), choice(entry, "base", BASES, place)
        limit_s = _finite(number(entry, "limit_s", place), "limit_s", place)
        return (StatedLimit(current=multiple, current_from=multiple, base=base, limit_s=limit_s),)
    if forms[0] == "points":
        return tuple(_points(entry, place))
    return tuple(_by_rating(forms[0], entry, place))


def _points(entry: Entry, place: str) -> Iterator[StatedLimit]:
    base, factor = choice(entry, "base", BASES, place), number(entry, "factor", place, 1.0)
    for multiple, time_s in pairs(entry, "points", place):
        limit_s = factor * _finite(positive(time_s, "points", place), "points", place)
        yield StatedLimit(suffix=f"-{multiple:g}", current=multiple, current_from=multiple, base=base, limit_s=limit_s)


def _by_rating(form: str, entry: Entry, place: str) -> Iterator[StatedLimit]:
    limit_s = _finite(number(entry, "limit_s", place), "limit_s", place)
    for rating, stated in pairs(entry, form, place):
        let_through = None
        if form == "impedances_ohm":
            current_from, current = _implied_current(stated, entry, place)
        elif form == "let_through_a2s":
            let_through = positive(stated, form, place)
            current = current_from = sqrt(let_through / limit_s)
        else:
            current = current_from = positive(stated, form, place)
        yield StatedLimit(
            suffix=f"-{rating:g}",
            rated_a=rating,
            current=current,
            current_from=current_from,
            limit_s=limit_s,
            let_through_a2s=let_through,
        )


def _implied_current(printed: object, entry: Entry, place: str) -> tuple[float, float]:
    """The least and greatest current that a printed impedance may stand for: voltage x factor / Zs before rounding."""
    voltage = number(entry, "voltage_v", place) * number(entry, "factor", place)
    try:
        impedance = Decimal(printed) if isinstance(printed, str) else Decimal(0)
    except InvalidOperation:
        impedance = Decimal(0)
    if not impedance > 0:
        raise StandardError(f"{place}: impedance {printed!r}", 'The printed digits as text, such as "0.44"')
    half = Decimal(1).scaleb(int(impedance.as_tuple().exponent)) / 2
    return voltage / float(impedance + half), voltage / float(impedance - half)


def _finite(value: float, key: str, place: str) -> float:
    if not isfinite(value):
        raise StandardError(f"{place}: {key} = {value!r}", "A positive number")
    return value
