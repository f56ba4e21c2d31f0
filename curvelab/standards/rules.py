"""Rule tables: one file a standard, validated when loaded."""

import math
import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import Any, Literal

from curvelab.errors import StandardError
from curvelab.paths import shipped
from curvelab.records.device import KINDS, Nameplate
from curvelab.units import BASES

FORMAT = 1
REQUIREMENTS = ("hold", "trip")
CONFIDENCES = ("published", "memory", "practice")
STARTS = ("cold", "hot")

_RULE_KEYS = {
    *("id", "clause", "characteristics", "multiple", "base", "requirement", "limit_s", "strict", "start"),
    *("above_a", "up_to_a", "source", "confidence", "advisory", "note"),
}
_TABLE_KEYS = {"format", "standard", "applies_to", "sources", "rules"}
_STANDARD_NUMBER = re.compile(r"[A-Z]?\d[\d.]*(?:-\d+)*")


@dataclass(frozen=True, kw_only=True, slots=True)
class Applicability:
    """A kind of device, and the numbers of the standards that bring it under the table."""

    kind: str
    standards: tuple[str, ...]


@dataclass(frozen=True, kw_only=True, slots=True)
class Rule:
    """One requirement: at ``multiple`` of ``base`` hold for, or trip within, ``limit_s``.

    ``above_a`` < rated current <= ``up_to_a``. An ``advisory`` rule is shown, never a verdict.
    """

    id: str
    standard: str
    clause: str
    applies_to: tuple[Applicability, ...]
    characteristics: tuple[str, ...]
    multiple: float
    base: str
    requirement: Literal["hold", "trip"]
    limit_s: float
    strict: bool
    start: Literal["cold", "hot"] | None
    above_a: float
    up_to_a: float
    source: str
    confidence: Literal["published", "memory", "practice"]
    advisory: bool
    note: str

    def is_for(self, plate: Nameplate) -> bool:
        """Whether a device comes under the rule by kind, standard, characteristic and rating."""
        if plate.rated_current_a is None or plate.characteristic not in self.characteristics:
            return False
        if not self.above_a < plate.rated_current_a <= self.up_to_a:
            return False
        return any(entry.kind == plate.kind and _under(plate.standard, entry.standards) for entry in self.applies_to)


def load_rules(folder: Path | None = None) -> tuple[Rule, ...]:
    """All rules of the tables in a folder; without one, those shipped with the program.

    Raises
    ------
    StandardError
        A table is not valid; the message says which rule and field.
    """
    return _load(folder or shipped("database") / "standards")


@lru_cache(maxsize=8)
def _load(folder: Path) -> tuple[Rule, ...]:
    return tuple(rule for file in sorted(folder.glob("*.toml")) for rule in read_table(file))


def read_table(file: Path) -> tuple[Rule, ...]:
    """The rules of one table.

    Raises
    ------
    StandardError
        The table is not valid.
    """
    try:
        table = tomllib.loads(file.read_text(encoding="utf-8"))
    except (OSError, UnicodeDecodeError, tomllib.TOMLDecodeError) as error:
        raise StandardError(f"Rule table '{file.name}' cannot be read: {error}", "A TOML file") from None
    place = f"Rule table '{file.name}'"
    _refuse_unknown(table, _TABLE_KEYS, place)
    if table.get("format") != FORMAT:
        raise StandardError(f"{place}: format = {table.get('format')!r}", f"Expected format = {FORMAT}")
    standard = _text(table, "standard", place)
    applies = tuple(_applicability(entry, f"{place}, applies_to") for entry in _tables(table, "applies_to", place))
    sources = table.get("sources")
    if not isinstance(sources, dict) or not all(isinstance(text, str) for text in sources.values()):
        raise StandardError(f"{place}: [sources] is missing or not text", "A source key and its text a line")
    rules = tuple(_rule(entry, standard, applies, sources, place) for entry in _tables(table, "rules", place))
    ids = [rule.id for rule in rules]
    twice = next((name for name in ids if ids.count(name) > 1), None)
    if twice is not None:
        raise StandardError(f"{place}: two rules are called '{twice}'", "One id a rule")
    return rules


def _rule(
    entry: Mapping[str, Any], standard: str, applies: tuple[Applicability, ...], sources: Mapping[str, str], place: str
) -> Rule:
    identity = _text(entry, "id", place)
    place = f"{place}, rule '{identity}'"
    _refuse_unknown(entry, _RULE_KEYS, place)
    source = _choice(entry, "source", tuple(sources), place)
    confidence: Any = _choice(entry, "confidence", CONFIDENCES, place)
    requirement: Any = _choice(entry, "requirement", REQUIREMENTS, place)
    start: Any = _choice(entry, "start", STARTS, place) if "start" in entry else None
    above = _number(entry, "above_a", place) if "above_a" in entry else 0.0
    up_to = _number(entry, "up_to_a", place) if "up_to_a" in entry else math.inf
    if not above < up_to:
        raise StandardError(f"{place}: above_a = {above:g} is not below up_to_a = {up_to:g}", "A range of ratings")
    return Rule(
        id=identity,
        standard=standard,
        clause=_text(entry, "clause", place),
        applies_to=applies,
        characteristics=_texts(entry, "characteristics", place),
        multiple=_number(entry, "multiple", place),
        base=_choice(entry, "base", BASES, place),
        requirement=requirement,
        limit_s=_number(entry, "limit_s", place),
        strict=_flag(entry, "strict", place),
        start=start,
        above_a=above,
        up_to_a=up_to,
        source=sources[source],
        confidence=confidence,
        advisory=confidence != "published" or ("advisory" in entry and _flag(entry, "advisory", place)),
        note=_text(entry, "note", place) if "note" in entry else "",
    )


def _applicability(entry: Mapping[str, Any], place: str) -> Applicability:
    _refuse_unknown(entry, {"kind", "standards"}, place)
    return Applicability(kind=_choice(entry, "kind", KINDS, place), standards=_texts(entry, "standards", place))


def _under(standard: str | None, numbers: tuple[str, ...]) -> bool:
    """Whether a standard as written names one of these; a device that names none is taken by its kind."""
    if standard is None:
        return True
    return any(number in numbers for number in _STANDARD_NUMBER.findall(standard.upper()))


def _refuse_unknown(table: Mapping[str, Any], known: set[str], place: str) -> None:
    unknown = next((key for key in table if key not in known), None)
    if unknown is not None:
        raise StandardError(f"{place}: unknown key '{unknown}'", f"Known keys: {', '.join(sorted(known))}")


def _tables(table: Mapping[str, Any], key: str, place: str) -> list[dict[str, Any]]:
    entries = table.get(key)
    if not isinstance(entries, list) or not entries or not all(isinstance(entry, dict) for entry in entries):
        raise StandardError(f"{place}: [[{key}]] is missing", f"At least one [[{key}]]")
    return entries


def _text(table: Mapping[str, Any], key: str, place: str) -> str:
    value = table.get(key)
    if not isinstance(value, str) or not value:
        raise StandardError(f"{place}: {key} = {value!r}", "A text")
    return value


def _texts(table: Mapping[str, Any], key: str, place: str) -> tuple[str, ...]:
    values = table.get(key)
    if not isinstance(values, list) or not values or not all(isinstance(value, str) and value for value in values):
        raise StandardError(f"{place}: {key} = {values!r}", "A list of texts")
    return tuple(values)


def _choice(table: Mapping[str, Any], key: str, known: tuple[str, ...], place: str) -> str:
    value = table.get(key)
    if value not in known:
        raise StandardError(f"{place}: {key} = {value!r}", f"Expected one of: {', '.join(known)}")
    return str(value)


def _number(table: Mapping[str, Any], key: str, place: str) -> float:
    value = table.get(key)
    if isinstance(value, bool) or not isinstance(value, int | float) or not (math.isfinite(value) and value > 0):
        raise StandardError(f"{place}: {key} = {value!r}", "A positive number")
    return float(value)


def _flag(table: Mapping[str, Any], key: str, place: str) -> bool:
    value = table.get(key)
    if not isinstance(value, bool):
        raise StandardError(f"{place}: {key} = {value!r}", "true or false")
    return value
