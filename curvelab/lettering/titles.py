"""What an axis title says: its quantity, unit, base and factor; a title that leaves the unit open says nothing."""

import re
from dataclasses import dataclass
from typing import Literal

from curvelab.lettering.exact import plain_text
from curvelab.lettering.numbers import SUPERSCRIPTS, number_of, unit_of
from curvelab.lettering.spelling import respelt
from curvelab.units import CURRENT_UNITS, VALUE_UNITS

Quantity = Literal["current", "time", "let_through", "peak"]

_WORDS: dict[Quantity, str] = {
    "let_through": r"let-?\s?through|i2t|joule|durchlass\w*|energ\w+|i²t|a2s|ka2s",
    "peak": r"peak|cut-?\s?off|crest|crête|stoßstrom|scheitelwert|ip(?=\s*[/(\[])|îd?",
    "time": r"time|\w*zeit|temps|tiempo|tempo|duration|durée|dauer"
    r"|seconds?|minutes?|hours?|sekunden|secondes|minuten|stunden|t(?=\s*(?:in\b|[/(\[,]|$))",
    "current": r"currents?|\w*stroms?|courant|corriente|corrente|amp[eè]res?|amps?|i(?=\s*(?:in\b|[/(\[,]|$))|ip",
}
"""Printed words of each quantity in English, German, French, Spanish and Italian. Let-through and peak stand first:
their titles say "current" or "time" too."""

_BASES = (
    (r"rated residual|residual operating|i\s?δ\s?n|idn", "xIdn"),
    (r"(?:instantaneous|magnetic).*(?:setting|pick-?up)|\bii\b", "xIi"),
    (r"(?:short[- ]time|short[- ]delay).*(?:setting|pick-?up)|\bisd\b", "xIsd"),
    (r"(?:ground|earth)[- ]?(?:fault)?.*(?:setting|pick-?up)|\big\b", "xIg"),
    (
        r"(?:rated|nominal) current|nennstrom\w*|bemessungsstrom\w*|courant (?:nominal|assigné|assigne)"
        r"|\bin\b(?!\s+[amk])",
        "xIn",
    ),
    (r"(?:long[- ]time|overload|thermal).*(?:setting|pick-?up)|setting current|\bir\b", "xIr"),
)
"""Printed words of each base, the special before the general."""

_MULTIPLE = re.compile(
    r"multiples?\b|vielfach\w*|times (?:the )?rated|i\s*/\s*i|^\s*[x×]\s*i|\([x×]\s*i|\[[x×]\s*i|per unit of"
)
_UNIT = re.compile(
    r"(?<![a-zäöü])(?P<unit>ka2s|a2s|ka|ma|kiloamp(?:ere)?s?|milliamp(?:ere)?s?|amp[eè]res?|amps?|a|milliseconds?|ms|"
    r"seconds?|sekunden|secondes?|sec|s|minutes?|minuten|min|hours?|stunden|heures?|h)(?![a-zäöü0-9²])"
)
_FACTOR = re.compile(r"[x×]\s*(?P<number>10(?:\^?[+-]?\d|[⁻]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+)|1\s?0{1,4}|10{1,4}|1\s000)(?=$|[\s)\]a-z])")
_SPELT = {
    "amp": "A", "amps": "A", "ampere": "A", "amperes": "A", "ampère": "A", "ampères": "A", "kiloamp": "kA",
    "kiloamps": "kA",
    "kiloampere": "kA", "kiloamperes": "kA", "milliamp": "mA", "milliamps": "mA", "milliampere": "mA",
    "milliamperes": "mA",
    "millisecond": "ms", "milliseconds": "ms", "seconde": "s", "stunden": "h", "heure": "h", "heures": "h",
    "a²s": "A2s", "ka²s": "kA2s",
}  # fmt: skip

BY_UNIT: tuple[Quantity, ...] = ("current", "time", "let_through")
"""What an axis shows where a unit stands beside it and nothing else."""

SURE, SEVERAL_UNITS, BY_UNIT_ALONE = 0.95, 0.5, 0.6
"""Confidence where words and unit agree, where several units are named, and where the unit alone tells the quantity."""


@dataclass(frozen=True, kw_only=True, slots=True)
class AxisTitle:
    """What a title says of its axis.

    ``unit`` is the worksheet's spelling; ``base`` what a current counts in (``A``, ``xIn``, ...), None for other
    quantities; ``factor`` what printed numbers are multiplied by; ``confidence`` that the words were understood.
    """

    quantity: Quantity
    unit: str
    base: str | None
    factor: float
    confidence: float


def title_of(text: str) -> AxisTitle | None:
    """What an axis title says; None where quantity or unit stay open: ``Multiple of the setting`` names no base.

    Parameters
    ----------
    text : str
        The words as printed; single misread letters in known words are put right first.
    """
    plain, mended = respelt(plain_text(text))
    words = plain.lower()
    factor, rest = _without_factor(words)
    if factor is None:
        return None
    base = _base(rest, plain)
    if base is not None:
        title = AxisTitle(quantity="current", unit=base, base=base, factor=factor, confidence=SURE)
    else:
        found = _measured(rest, factor)
        if found is None:
            return None
        title = found
    share = 0.9**mended
    return AxisTitle(
        quantity=title.quantity,
        unit=title.unit,
        base=title.base,
        factor=title.factor,
        confidence=title.confidence * share,
    )


def _without_factor(words: str) -> tuple[float | None, str]:
    """The printed factor (1 where there is none, None where it cannot be read) and the title without it."""
    matches = list(_FACTOR.finditer(words))
    if not matches:
        return 1.0, words
    numbers = number_of(_raised(matches[0]["number"]))
    if len(matches) > 1 or not numbers:
        return None, words
    match = matches[0]
    return numbers[0].value, f"{words[: match.start()]} {words[match.end() :]}"


def _raised(number: str) -> str:
    return re.sub(r"^10\^?([+-]?\d)$", r"10^\1", number) if not re.fullmatch("10+", number) else number


def _base(words: str, plain: str) -> str | None:
    """The base of an axis counted in multiples; None where it counts in amperes or names none."""
    if not _MULTIPLE.search(words) and not (unit_of(words) in CURRENT_UNITS and "I" in plain):
        return None
    named = re.sub(r"^.*?i\s*/\s*(?=i)", "", words)
    found = [base for pattern, base in _BASES if re.search(pattern, named)]
    return found[0] if found else None


def _measured(words: str, factor: float) -> AxisTitle | None:
    """Quantity and unit of an axis that counts in a unit."""
    if _MULTIPLE.search(words):
        return None
    units = _units(words)
    named = next((quantity for quantity in _WORDS if _has_word(words, quantity)), None)
    quantity = named or next((one for one in BY_UNIT if units and units[0] in _units_of(one)), None)
    fitting = [unit for unit in units if quantity is not None and unit in _units_of(quantity)]
    if quantity is None or not fitting or (named is None and len(set(units)) != 1):
        return None
    sure = SURE if len(set(fitting)) == 1 else SEVERAL_UNITS
    return AxisTitle(
        quantity=quantity,
        unit=fitting[0],
        base="A" if quantity == "current" else None,
        factor=factor,
        confidence=sure if named else BY_UNIT_ALONE,
    )


def _has_word(words: str, quantity: Quantity) -> bool:
    return (
        re.search(rf"(?<![a-zäöüéèß])(?:{_WORDS[quantity]})(?![a-zäöüéèß])", words.translate(SUPERSCRIPTS)) is not None
    )


def _units_of(quantity: Quantity) -> frozenset[str]:
    if quantity == "current":
        return frozenset({"mA", "A", "kA"})
    return frozenset(VALUE_UNITS[quantity])


def _units(words: str) -> list[str]:
    """Units in a title: one in brackets or after "in" or "/" before others, a later before an earlier."""
    found = []
    text = words.translate(SUPERSCRIPTS)
    for match in _UNIT.finditer(text):
        unit = _SPELT.get(match["unit"]) or unit_of(match["unit"])
        if unit is None:
            continue
        if re.search(r"\d\s*$", text[: match.start()]):  # 100 A is a value, not what the axis counts in
            continue
        before, after = text[: match.start()].rstrip(), text[match.end() :].lstrip()
        marked = before.endswith(("/", "(", "[", " in", ",")) or after.startswith((")", "]")) or before in ("", "in")
        found.append((not (marked or len(match["unit"]) > 2), not marked, -match.start(), unit))
    marked_first = sorted(found)
    best = [unit for bad, _, _, unit in marked_first if not bad]
    return best or [unit for *_, unit in marked_first if _ends_with(text, unit)]


def _ends_with(text: str, unit: str) -> bool:
    """Whether a title ends with a bare unit: ``Prospective current kA``."""
    return text.rstrip(" .)]").endswith(unit.lower())
