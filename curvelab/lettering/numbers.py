"""The numbers printed along axes: every way they are written, with what is ambiguous kept as alternatives."""

import re
from dataclasses import dataclass

from curvelab.lettering.exact import plain_text

SUPERSCRIPTS = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", "0123456789-+")
THOUSANDS = {"": 1.0, "k": 1e3, "K": 1e3, "M": 1e6}

LEAST_EXPONENT, MOST_EXPONENT = -9, 12

FLATTENED = 0.15
"""Weight of 102 or 10-2 being 10² or 10⁻² whose exponent lost its height."""

LOOK_ALIKE = 0.6
"""Weight of ``IO`` being 10: in faces whose digits look like letters, where nothing else makes it a number."""

GROUPED, DECIMAL = 0.75, 0.25
"""Weights of 1,000 and 1.000 being a thousand or one."""

_UNITS = {
    "a": "A", "amp": "A", "amps": "A", "amperes": "A", "ka": "kA", "ma": "mA", "s": "s", "sec": "s", "secs":
    "s", "sek": "s",
    "second": "s", "seconds": "s", "sekunden": "s", "secondes": "s", "ms": "ms", "msec": "ms", "min": "min",
    "mins": "min",
    "minute": "min", "minutes": "min", "minuten": "min", "h": "h", "hr": "h", "hrs": "h", "hour": "h", "hours": "h",
    "std": "h", "a2s": "A2s", "ka2s": "kA2s", "in": "xIn", "ir": "xIr", "isd": "xIsd", "ii": "xIi", "ig": "xIg",
    "iδn": "xIdn", "idn": "xIdn", "iδ": "xIdn",
}  # fmt: skip

_SPACED = r"\d{1,3}(?: \d{3})+(?!\d)"
_POINTED = r"\d{1,3}(?:\.\d{3})+(?!\d)"
_COMMAED = r"\d{1,3}(?:,\d{3})+(?!\d)"
_PLAIN = r"\d+(?:[.,]\d+)?|[.,]\d+"
_MANTISSA = rf"{_SPACED}|{_POINTED}|{_COMMAED}|{_PLAIN}"
_RAISED = "[⁻⁺]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+"
_NUMBER = re.compile(
    rf"(?:(?P<lead>{_PLAIN})\s*[x×·*]\s*)?10(?:(?P<raised>{_RAISED})|\^\s*[({{]?(?P<caret>[+-]?\d+)[)}}]?)"
    rf"|(?P<mantissa>{_MANTISSA})(?:[eE](?P<exponent>[+-]?\d+)|\s?(?P<thousands>[kKM])(?![a-zA-Z]))?"
)
_LETTERED = re.compile(r"(?=.*[OoIlZz])[\dOoIlZzSs]+(?:[.,][\dOoIlZzSs]+)?(?= ?(?:k|[kmM]?A|m?s|min|h)?$)")
_DIGITS = str.maketrans("OoIlZzSs", "00112255")
_FLAT = re.compile(r"10 ?(?P<exponent>-\d{1,2}|\d)")


@dataclass(frozen=True, kw_only=True, slots=True)
class ParsedNumber:
    """A value as printed, the unit printed with it in the worksheet's spelling (or None), and a weight of 0 to 1."""

    value: float
    unit: str | None
    weight: float


def number_of(text: str) -> tuple[ParsedNumber, ...]:
    """What number a text may stand for, likeliest first; empty where it is none.

    ``0.01``, ``.01``, ``0,01``, ``1 000``, ``1,000``, ``10²``, ``10^-2``, ``2 x 10³``, ``1k``, ``2M``, ``2 min``,
    ``500 ms``, ``5 x In``, ``5xIr``. The weights of all readings add up to at most 1; what is missing is doubt
    about the form.
    """
    plain = plain_text(text).strip("()[] ").rstrip(".,:; ")
    found: dict[tuple[float, str | None], float] = {}
    for value, unit, weight in (*_regular(plain), *_flattened(plain)):
        if value > 0:
            found[value, unit] = found.get((value, unit), 0.0) + weight
    if not found:
        for value, unit, weight in _regular(_LETTERED.sub(lambda match: match[0].translate(_DIGITS), plain)):
            if value > 0:
                found[value, unit] = found.get((value, unit), 0.0) + LOOK_ALIKE * weight
    total = max(1.0, sum(found.values()))
    numbers = [ParsedNumber(value=value, unit=unit, weight=weight / total) for (value, unit), weight in found.items()]
    return tuple(sorted(numbers, key=lambda number: -number.weight))


def unit_of(text: str) -> str | None:
    """The worksheet's spelling of a printed unit or base: ``seconds`` is ``s``, ``× In`` is ``xIn``."""
    bare = plain_text(text).translate(SUPERSCRIPTS).replace("I_", "I").strip(" .()[]").lower().replace(" ", "")
    times = bare.removeprefix("x").removeprefix("×").removeprefix("*")
    unit = _UNITS.get(times.replace("·", ""))
    if unit is None or (times != bare and not unit.startswith("x")):
        return None
    return unit


def _regular(plain: str) -> list[tuple[float, str | None, float]]:
    match = _NUMBER.match(plain)
    if match is None:
        return []
    rest = plain[match.end() :].strip()
    unit = unit_of(rest) if rest else None
    if rest and unit is None:
        return []
    return [(value, unit, weight) for value, weight in _values(match)]


def _values(match: re.Match[str]) -> list[tuple[float, float]]:
    raised = match["raised"] or match["caret"]
    if raised is not None:
        exponent = int(raised.translate(SUPERSCRIPTS))
        if not LEAST_EXPONENT <= exponent <= MOST_EXPONENT:
            return []
        leads = _mantissas(match["lead"]) if match["lead"] else [(1.0, 1.0)]
        return [(_scaled(lead, exponent), weight) for lead, weight in leads]
    if match["exponent"] is not None:
        exponent = int(match["exponent"])
        if not LEAST_EXPONENT <= exponent <= MOST_EXPONENT:
            return []
        return [(_scaled(value, exponent), weight) for value, weight in _mantissas(match["mantissa"])]
    factor = THOUSANDS[match["thousands"] or ""]
    return [(value * factor, weight) for value, weight in _mantissas(match["mantissa"])]


def _scaled(value: float, exponent: int) -> float:
    """Value times a power of ten, rounded once."""
    return float(f"{value!r}e{exponent}")


def _mantissas(text: str) -> list[tuple[float, float]]:
    """Values of digits with separators, each with its weight."""
    if re.fullmatch(_SPACED, text):
        return [(float(text.replace(" ", "")), 1.0)]
    if re.fullmatch(rf"{_POINTED}|{_COMMAED}", text) and not text.startswith("0"):
        grouped = float(re.sub("[.,]", "", text))
        if text.count(".") + text.count(",") > 1:
            return [(grouped, 1.0)]
        return [(grouped, GROUPED), (float(text.replace(",", ".")), DECIMAL)]
    doubt = 0.5 if re.fullmatch(r"0\d+", text) else 1.0
    return [(float(text.replace(",", ".")), doubt)]


def _flattened(plain: str) -> list[tuple[float, str | None, float]]:
    match = _FLAT.fullmatch(plain)
    return [(_scaled(1.0, int(match["exponent"])), None, FLATTENED)] if match else []
