"""The page of all rules for a reader, made from the tables: ``python -m curvelab.standards.rules_page FILE``."""

import sys
from collections.abc import Iterable, Iterator, Sequence
from itertools import groupby
from math import isinf
from pathlib import Path

from curvelab.standards.point import Point
from curvelab.standards.rule import Devices, Rule, Span
from curvelab.standards.rules import load_rules
from curvelab.standards.words import requirement, written_test_current
from curvelab.units import written_current, written_let_through, written_time

HEAD = """# Rules

What `curvelab check` asks of a device. This page is made from the tables in `database/standards/` by
`python -m curvelab.standards.rules_page docs/rules.md`; edit the tables, not the page.

No standard was opened. **Published** is a number that was seen in a document that quotes the standard, **memory** one
that was not seen in print, **practice** one without a standard behind it. A rule marked *advisory* is shown and never
decides: every rule that is not published is, and some whose number depends on an edition or a maker's choice.
"""


def rules_page(rules: Iterable[Rule]) -> str:
    """The page as Markdown: a table a standard, a row a rule or a group of them that differ by rating or multiple."""
    return HEAD + "".join(_section(standard, tuple(group)) for standard, group in groupby(rules, _standard))


def _standard(rule: Rule) -> str:
    return rule.standard


def _section(standard: str, rules: Sequence[Rule]) -> str:
    kinds = ", ".join(_kind(entry.kind, entry.named) for entry in rules[0].devices.applies_to)
    sources = {source: index for index, source in enumerate(dict.fromkeys(rule.source for rule in rules), start=1)}
    rows = [_row(tuple(group), sources) for _, group in groupby(rules, lambda rule: rule.group)]
    listed = "\n".join(f"{index}. {source}" for source, index in sources.items())
    heads = "| rule | clause | for | requirement | confidence | source |\n| --- | --- | --- | --- | --- | --- |"
    return f"\n## {standard}\n\nFor {kinds}.\n\n{heads}\n" + "\n".join(rows) + f"\n\n{listed}\n"


def _kind(kind: str, named: bool) -> str:
    return f"{kind} that names it" if named else kind


def _row(rules: Sequence[Rule], sources: dict[str, int]) -> str:
    first = rules[0]
    note = f". {first.note}" if first.note else ""
    scale = f". The time is multiplied by {' or '.join(first.times_settings)}" if first.times_settings else ""
    cells = (
        first.group,
        first.clause,
        _devices(rules),
        _requirements(rules) + scale + note,
        first.confidence + (", advisory" if first.advisory else ""),
        str(sources[first.source]),
    )
    return f"| {' | '.join(cells)} |"


def _requirements(rules: Sequence[Rule]) -> str:
    if len(rules) == 1:
        return requirement(_point(rules[0]))
    return requirement(_point(rules[0])) + "; " + "; ".join(_further(rule) for rule in rules[1:])


def _point(rule: Rule) -> Point:
    return Point(rule=rule, current=rule.current, base=rule.base, limit_s=rule.limit_s)


def _further(rule: Rule) -> str:
    """What differs from the first of the group: the current of a rating, or the time of a multiple."""
    if rule.let_through_a2s is not None:
        return f"{rule.devices.rated_a.up_to:g} A: {written_let_through(rule.let_through_a2s)}"
    if rule.base == "A":
        return f"{rule.devices.rated_a.up_to:g} A: {written_test_current(rule, 'A')}"
    return f"{written_current(rule.current, rule.base)}: {written_time(rule.limit_s, 4)}"


def _devices(rules: Sequence[Rule]) -> str:
    of = rules[0].devices
    words = [*of.characteristics]
    if len({rule.devices.rated_a for rule in rules}) > 1:
        words.append(f"ratings {rules[0].devices.rated_a.up_to:g} to {rules[-1].devices.rated_a.up_to:g} A")
    else:
        words += _span(of.rated_a, "In")
    words += [*_span(of.residual_a, "IΔn"), *_residual(of)]
    return ", ".join(words) or "all"


def _residual(of: Devices) -> Iterator[str]:
    if of.residual_delay:
        yield of.residual_delay if of.residual_delay == "general" else f"type {of.residual_delay}"
    if of.residual_waveforms:
        yield "type " + "/".join(of.residual_waveforms)


def _span(span: Span, name: str) -> list[str]:
    low, high = round(span.above, 6), round(span.up_to, 6)
    if low == high:
        return [f"{name} {high:g} A"]
    words = []
    if span.above > 0:
        words.append(f"{name} {'above' if low == span.above else 'from'} {written_current(low, 'A')}")
    if not isinf(span.up_to):
        words.append(f"{name} {'up to' if high == span.up_to else 'below'} {written_current(high, 'A')}")
    return words


if __name__ == "__main__":
    Path(sys.argv[1]).write_text(rules_page(load_rules()), encoding="utf-8")
