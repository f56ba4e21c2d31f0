"""What printed words say of a curve or a device: edge, meaning, element, rating, characteristic, settings, kind."""

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, fields, replace
from typing import Any, Literal

from curvelab.reading.respell import respelt
from curvelab.records.curve import NO_SETTINGS, Edge

_EDGES: Mapping[Edge, str] = {
    "fast": r"min(?:imum|imal\w*)?|shortest|fastest|fast|lowest|lower|t ?min|mindest\w*|kürzeste\w*",
    "slow": r"max(?:imum|imal\w*)?|longest|slowest|slow|highest|upper|t ?max|höchst\w*|längste\w*",
    "mean": r"mean|average|typical|nominal time|mittlere\w*|mittel\w*|moyen\w*",
}
_MEANINGS = {
    "pre_arcing": r"pre-?\s?arcing|melting|schmelz\w*|préarc|prearc|fusion",
    "operating": r"operating|total|ausschalt\w*|fonctionnement",
    "clearing": r"clearing|break(?:ing)? times?|opening times?|disconnection times?|disconnecting times?",
    "tripping": r"tripping|trip|auslöse\w*|déclenchement",
    "unlatching": r"unlatching|release time",
    "relay_output": r"relay output|output contact",
}
"""What ends, by its words; ``tripping`` means what the kind of device makes of it."""
_ELEMENTS = {
    "instantaneous": r"instantaneous|magnetic|kurzschlussauslöse\w*",
    "delayed": r"short[- ]?time|short[- ]?delay",
    "overload": r"overload|thermal|long[- ]?time|long[- ]?delay|überlast\w*",
    "earth": r"earth[- ]?fault|ground[- ]?fault",
    "neutral": r"neutral",
    "residual": r"residual|earth[- ]?leakage",
}
_KINDS = (
    ("rcbo", r"rcbos?|residual[- ]current (?:operated )?circuit[- ]?breakers? with|fi/ls\w*"),
    ("rcd", r"rcds?|rccbs?|residual[- ]current|fi-schutzschalter|fehlerstrom\w*"),
    ("mccb", r"mccbs?|mou?lded[- ]?case|leistungsschalter"),
    ("acb", r"acbs?|air[- ]circuit[- ]?breakers?|open circuit[- ]?breakers?"),
    ("relay", r"relays?|relais"),
    ("fuse", r"fuses?|fuse[- ]?links?|sicherung\w*|fusibles?"),
    ("mcb", r"mcbs?|miniature circuit[- ]?breakers?|leitungsschutzschalter|disjoncteurs? modulaires?"),
)
"""Kinds by their words, the special before the general."""

_UTILISATION = re.compile(r"(?<![A-Za-z])(gG|gL|gM|aM|gR|gS|gU|aR|gD|gN|gPV|gTr)(?![A-Za-z])")
_LETTER = r"(?P<letter>[BCDKZ])"
_TYPE = (
    re.compile(
        rf"\b(?:[Tt]ypes?|[Cc]haracteristics?|[Cc]urves?|[Kk]ennlinien?|[Cc]ourbes?|[Cc]harakteristik|TYPE|TYPES)"
        rf"\s+{_LETTER}(?![A-Za-z])"
    ),
    re.compile(
        rf"(?<![A-Za-z]){_LETTER}[- ]+(?:[Cc]haracteristic|[Cc]urve|[Tt]ype|[Bb]and|[Ss]eries"
        r"|[Kk]ennlinie|[Cc]harakteristik)"
    ),
    re.compile(rf"(?<![A-Za-z]){_LETTER} ?\d{{1,3}}(?![\d.])"),
    re.compile(rf"^{_LETTER}$"),
)
_SEVERAL_TYPES = re.compile(
    r"\b(?i:types?|curves?|characteristics?|kennlinien?)\s+([BCDKZ](?:\s*(?:,|and|und|et|&|/)\s*[BCDKZ])+)\b"
)
_RELAY = re.compile(
    r"\b(IEC|IEEE)\b[^.;]*?\b(?:(very|extremely|long[- ]time|short[- ]time|moderately|normal|standard)\s+)?inverse",
    re.I,
)
_AMPERES = re.compile(r"(?<!\d)(?<!\d[.,])(\d{1,4}(?:[.,]\d)?)\s?(?:A|amps?|amperes?)(?![A-Za-z²\d])")
_RANGE = re.compile(r"(\d{1,4}(?:[.,]\d)?)\s?A?\s*(?:to|[-–…]|up to|bis|à)\s*(\d{1,4}(?:[.,]\d)?)\s?A(?![A-Za-z²\d])")
_LIST = re.compile(
    r"((?:\d{1,4}(?:\.\d)?\s?A?(?:,\s+|\s*(?:[/;]|and|und|et|&)\s*))+\d{1,4}(?:\.\d)?)\s?A(?![A-Za-z²\d])"
)
_TYPED = re.compile(r"(?<![A-Za-z])[BCDKZ] ?(\d{1,3})(?![\d.])")
_MILLI = re.compile(r"(?<!\d)(?<!\d[.,])(\d{1,4})\s?mA(?![A-Za-z²\d])")
_SETTING = re.compile(
    r"(?<![A-Za-z])(?P<name>tms|TMS|td|TD|time dial|tr|tsd|tg|ir|Ir|IR|isd|Isd|ii|Ii|ig|Ig)"
    r"\s*(?:[=:]|at)?\s*(?P<value>\d+(?:[.,]\d+)?)"
)
_BARE = re.compile(r"^\(?(\d{1,4}(?:[.,]\d)?)\)?$")
_PERCENT = re.compile(
    r"(?:±|\+/-|\+-|\+ ?/ ?-|t)\s?(\d{1,2}(?:[.,]\d)?)\s?%\s*(?:in|of|on)?\s*(current|time|i\b|t\b)?", re.I
)
_STANDARD = re.compile(r"\b((?:IEC|EN|BS|BS EN|DIN|VDE|UL|IEEE)\s?(?:C)?\d{2,5}(?:[-.]\d{1,4})*)\b")


@dataclass(frozen=True, kw_only=True, slots=True)
class Said:
    """What some words say; None, or empty, where they say nothing of it. Currents in A."""

    edge: Edge | None = None
    meaning: str | None = None
    element: str | None = None
    kind: str | None = None
    characteristic: str | None = None
    characteristics: tuple[str, ...] = ()
    ratings: tuple[float, ...] = ()
    rating_range: tuple[float, float] | None = None
    number: float | None = None
    residual_current_a: float | None = None
    residual_delay: str | None = None
    start: Literal["cold", "hot"] | None = None
    settings: Mapping[str, float] = field(default_factory=lambda: NO_SETTINGS)
    standard: str | None = None

    @property
    def rating(self) -> float | None:
        """The one rated current that is named, in A."""
        return self.ratings[0] if len(self.ratings) == 1 else None

    @property
    def says_nothing(self) -> bool:
        """Whether nothing was understood."""
        return self == Said()

    def over(self, other: "Said") -> "Said":
        """Both together; where both say something of a thing, the first goes before the other."""
        kept: dict[str, Any] = {}
        for each in fields(self):
            own = getattr(self, each.name)
            kept[each.name] = own if own not in (None, ()) and own != {} else getattr(other, each.name)
        return Said(**kept)


def said_by(text: str) -> Said:
    """What a phrase says."""
    text = respelt(text)
    lower = text.lower()
    settings = _settings(text)
    plain = _SETTING.sub(" ", text) if settings else text
    ranges = _RANGE.search(plain)
    letters = _letters(plain)
    utilisation = _UTILISATION.findall(plain)
    relay = _relay(plain)
    characteristics = tuple(dict.fromkeys([*utilisation, *letters, *([relay] if relay else [])]))
    bare = _BARE.match(plain.strip())
    milli = [float(number) for number in _MILLI.findall(plain)]
    standard = _STANDARD.search(text)
    return Said(
        edge=_only(_EDGES, lower),
        meaning=_first(_MEANINGS, lower),
        element=_only(_ELEMENTS, lower),
        kind=_kind(lower, utilisation, relay),
        characteristic=characteristics[0] if len(characteristics) == 1 else None,
        characteristics=characteristics,
        ratings=() if ranges else _ratings(plain),
        rating_range=(_number(ranges[1]), _number(ranges[2])) if ranges else None,
        number=_number(bare[1]) if bare else None,
        residual_current_a=milli[0] / 1000.0 if len(milli) == 1 and milli[0] > 0 else None,
        residual_delay=_delay(text),
        start=_start(lower),
        settings=settings,
        standard=standard[1] if standard else None,
    )


def _number(text: str) -> float:
    return float(text.replace(",", "."))


def _has(pattern: str, lower: str) -> bool:
    return re.search(rf"(?<![a-zäöüéèß])(?:{pattern})(?![a-zäöüéèß])", lower) is not None


def _only(patterns: Mapping[Any, str], lower: str) -> Any:
    found = [name for name, pattern in patterns.items() if _has(pattern, lower)]
    return found[0] if len(found) == 1 else None


def _first(patterns: Mapping[str, str], lower: str) -> str | None:
    found = [name for name, pattern in patterns.items() if _has(pattern, lower)]
    if "pre_arcing" in found and len(found) > 1:
        return None  # words about both lines
    return found[0] if found else None


def _kind(lower: str, utilisation: list[str], relay: str | None) -> str | None:
    found = next((kind for kind, pattern in _KINDS if _has(pattern, lower)), None)
    return found or ("fuse" if utilisation else "relay" if relay else None)


def _letters(text: str) -> list[str]:
    found = [match["letter"] for pattern in _TYPE for match in pattern.finditer(text)]
    return [*found, *(letter for match in _SEVERAL_TYPES.finditer(text) for letter in re.findall("[BCDKZ]", match[1]))]


def _relay(text: str) -> str | None:
    match = _RELAY.search(text)
    if match is None:
        return None
    kind = (match[2] or "").lower().replace(" ", "-")
    name = f"{kind} inverse" if kind and kind not in ("normal", "standard") else "inverse"
    return f"{match[1].upper()} {name}"


def _ratings(text: str) -> tuple[float, ...]:
    listed = _LIST.search(text)
    if listed:
        return _positive(re.findall(r"\d+(?:\.\d+)?", listed[1]))
    return tuple(dict.fromkeys(_positive([*_AMPERES.findall(text), *_TYPED.findall(text)])))


def _positive(numbers: Iterable[str]) -> tuple[float, ...]:
    """A rating of nought is a misread one."""
    return tuple(rating for rating in map(_number, numbers) if rating > 0)


def _settings(text: str) -> Mapping[str, float]:
    found = {
        match["name"].lower().replace("time dial", "td"): _number(match["value"]) for match in _SETTING.finditer(text)
    }
    return found or NO_SETTINGS


def _delay(text: str) -> str | None:
    if re.search(r"\b[Tt]ype S\b|\bselective\b|\btime[- ]delayed\b", text):
        return "S"
    return "general" if re.search(r"\b[Gg]eneral(?: type)?\b|\bundelayed\b", text) else None


def _start(lower: str) -> Literal["cold", "hot"] | None:
    cold, hot = _has(r"cold|kalt\w*|froid", lower), _has(r"hot|warm|chaud", lower)
    return None if cold == hot else "cold" if cold else "hot"


def without(said: Said, *names: str) -> Said:
    """What was said, but for some of it."""
    empty = Said()
    return replace(said, **{name: getattr(empty, name) for name in names})
