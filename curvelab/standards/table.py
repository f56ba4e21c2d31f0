"""One rule table: a standard's requirements in a TOML file, validated when read."""

import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import replace
from math import inf
from pathlib import Path
from typing import Any

from curvelab.errors import StandardError
from curvelab.records.curve import EDGES
from curvelab.records.device import KINDS
from curvelab.standards.fields import choice, flag, maybe, number, refuse_unknown, tables, text, texts
from curvelab.standards.limits import LIMIT_KEYS, StatedLimit, stated_limits
from curvelab.standards.rule import Applicability, Asked, Devices, Rule, Span

FORMAT = 1
REQUIREMENTS = ("hold", "trip")
CONFIDENCES = ("published", "memory", "practice")

_DEVICE_KEYS = {
    *("characteristics", "above_a", "from_a", "up_to_a", "below_a", "above_residual_a", "up_to_residual_a"),
    *("residual_delay", "residual_waveforms"),
}
_ASKED_KEYS = {"start", "supply", "path", "meaning", "edge", "waveform"}
_RULE_KEYS = {
    *("id", "clause", "edition", "requirement", "strict", "times_settings", "source", "confidence", "advisory", "note"),
    *LIMIT_KEYS,
    *_DEVICE_KEYS,
    *_ASKED_KEYS,
}
_TABLE_KEYS = {"format", "standard", "applies_to", "sources", "rules", "adopts"}


def read_table(file: Path, within: tuple[Path, ...] = ()) -> tuple[Rule, ...]:
    """The rules of one table, those it adopts from tables beside it included.

    Parameters
    ----------
    file : path
    within : tuple of path
        The tables that adopt this one.

    Raises
    ------
    StandardError
        The table is not valid; the message says which rule and field.
    """
    place = f"Rule table '{file.name}'"
    table = _parsed(file, place)
    standard = text(table, "standard", place)
    applies = tuple(_applicability(entry, f"{place}, applies_to") for entry in tables(table, "applies_to", place))
    if not applies:
        raise StandardError(f"{place}: [[applies_to]] is missing", "At least one kind of device")
    sources = table.get("sources")
    if not isinstance(sources, dict) or not all(isinstance(each, str) for each in sources.values()):
        raise StandardError(f"{place}: [sources] is missing or not text", "A source key and its text a line")
    reader = _Reader(standard, applies, sources, place)
    around = (*within, file)
    adopted = (rule for entry in tables(table, "adopts", place) for rule in reader.adopted(entry, around))
    own = (rule for entry in tables(table, "rules", place) for rule in reader.rules(entry))
    rules = (*adopted, *own)
    if not rules:
        raise StandardError(f"{place} has no rules", "At least one [[rules]]")
    _refuse_twins(rules, place)
    return rules


def _parsed(file: Path, place: str) -> dict[str, Any]:
    try:
        table = tomllib.loads(file.read_text(encoding="utf-8"))
    except (OSError, ValueError, RecursionError) as error:
        raise StandardError(f"{place} cannot be read: {error}", "A TOML file") from None
    refuse_unknown(table, _TABLE_KEYS, place)
    if table.get("format") != FORMAT:
        raise StandardError(f"{place}: format = {table.get('format')!r}", f"Expected format = {FORMAT}")
    return table


def _refuse_twins(rules: Sequence[Rule], place: str) -> None:
    seen: set[str] = set()
    for rule in rules:
        if rule.id in seen:
            raise StandardError(f"{place}: two rules are called '{rule.id}'", "One id a rule")
        seen.add(rule.id)


class _Reader:
    """What every rule of one table shares."""

    def __init__(
        self, standard: str, applies: tuple[Applicability, ...], sources: Mapping[str, str], place: str
    ) -> None:
        self._standard = standard
        self._applies = applies
        self._sources = sources
        self._place = place

    def rules(self, entry: Mapping[str, Any]) -> tuple[Rule, ...]:
        """The rules of one entry, one for each limit it states."""
        group = text(entry, "id", self._place)
        place = f"{self._place}, rule '{group}'"
        refuse_unknown(entry, _RULE_KEYS, place)
        confidence = choice(entry, "confidence", CONFIDENCES, place)
        common: dict[str, Any] = {
            "group": group,
            "standard": self._standard,
            "clause": _clause(entry, place),
            "asked": _asked(entry, place),
            "requirement": choice(entry, "requirement", REQUIREMENTS, place),
            "strict": flag(entry, "strict", place),
            "times_settings": texts(entry, "times_settings", place),
            "source": self._sources[choice(entry, "source", tuple(self._sources), place)],
            "confidence": confidence,
            "advisory": flag(entry, "advisory", place, default=False) or confidence != "published",
            "note": text(entry, "note", place, default=""),
        }
        devices = self._devices(entry, place)
        return tuple(_rule(limit, devices, common) for limit in stated_limits(entry, place))

    def adopted(self, entry: Mapping[str, Any], around: tuple[Path, ...]) -> tuple[Rule, ...]:
        """The rules of another table beside this one, taken over for this standard's devices."""
        place = f"{self._place}, adopts"
        refuse_unknown(entry, {"table", "source", "confidence"}, place)
        name = text(entry, "table", place)
        file = around[-1].with_name(f"{Path(name).name}.toml")
        if not file.is_file() or file in around:
            raise StandardError(f"{place}: no table '{name}' to adopt beside it", "Another file's name without .toml")
        source = self._sources[choice(entry, "source", tuple(self._sources), place)]
        confidence = choice(entry, "confidence", CONFIDENCES, place)
        return tuple(
            replace(
                rule,
                standard=self._standard,
                clause=f"as {rule.standard}, {rule.clause}",
                devices=replace(rule.devices, applies_to=self._applies),
                source=source if rule.confidence == "published" else rule.source,
                confidence=confidence if rule.confidence == "published" else rule.confidence,
                advisory=rule.advisory or confidence != "published",
            )
            for rule in read_table(file, around)
        )

    def _devices(self, entry: Mapping[str, Any], place: str) -> Devices:
        return Devices(
            applies_to=self._applies,
            characteristics=texts(entry, "characteristics", place),
            rated_a=_span(entry, "a", place),
            residual_a=_span(entry, "residual_a", place),
            residual_delay=maybe(entry, "residual_delay", ("general", "S"), place),
            residual_waveforms=texts(entry, "residual_waveforms", place),
        )


def _rule(limit: StatedLimit, devices: Devices, common: Mapping[str, Any]) -> Rule:
    if limit.rated_a is not None:
        devices = replace(devices, rated_a=Span(above=_just_below(limit.rated_a), up_to=limit.rated_a))
    return Rule(
        id=common["group"] + limit.suffix,
        devices=devices,
        current=limit.current,
        current_from=limit.current_from,
        base=limit.base,
        limit_s=limit.limit_s,
        let_through_a2s=limit.let_through_a2s,
        **common,
    )


def _clause(entry: Mapping[str, Any], place: str) -> str:
    """The clause, with the edition where it matters."""
    clause = text(entry, "clause", place)
    return f"{clause} ({text(entry, 'edition', place)})" if "edition" in entry else clause


def _asked(entry: Mapping[str, Any], place: str) -> Asked:
    return Asked(
        start=maybe(entry, "start", ("cold", "hot"), place),
        supply=maybe(entry, "supply", ("ac", "dc"), place),
        path=maybe(entry, "path", ("line_to_neutral", "residual"), place),
        meaning=maybe(entry, "meaning", ("pre_arcing", "operating"), place),
        edge=maybe(entry, "edge", EDGES, place),
        waveform=text(entry, "waveform", place) if "waveform" in entry else None,
    )


def _span(entry: Mapping[str, Any], unit: str, place: str) -> Span:
    above, up_to = 0.0, number(entry, f"up_to_{unit}", place, inf)
    if f"above_{unit}" in entry:
        above = number(entry, f"above_{unit}", place)
    elif f"from_{unit}" in entry:
        above = _just_below(number(entry, f"from_{unit}", place))
    if f"below_{unit}" in entry:
        up_to = min(up_to, _just_below(number(entry, f"below_{unit}", place)))
    if not above < up_to:
        raise StandardError(f"{place}: no rating lies above {above:g} A and up to {up_to:g} A", "A range of ratings")
    return Span(above=above, up_to=up_to)


def _just_below(value: float) -> float:
    """A rounding below, so that the value itself lies above it."""
    return value * (1 - 1e-9)


def _applicability(entry: Mapping[str, Any], place: str) -> Applicability:
    refuse_unknown(entry, {"kind", "standards", "named"}, place)
    return Applicability(
        kind=choice(entry, "kind", KINDS, place),
        standards=texts(entry, "standards", place, needed=True),
        named=flag(entry, "named", place, default=False),
    )
