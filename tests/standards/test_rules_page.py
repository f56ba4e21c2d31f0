"""The page of rules a reader sees is what the tables say."""

from pathlib import Path

from curvelab.standards.rules import load_rules
from curvelab.standards.rules_page import rules_page

PAGE = Path(__file__).parents[2] / "docs" / "rules.md"


def test_the_page_is_current():
    made = rules_page(load_rules())
    assert PAGE.read_text(encoding="utf-8") == made, "run: python -m curvelab.standards.rules_page docs/rules.md"


def test_every_group_of_every_table_is_on_it():
    page = PAGE.read_text(encoding="utf-8")
    assert {f"## {rule.standard}" for rule in load_rules()} <= set(page.splitlines())
    assert sum(line.startswith("| ") for line in page.splitlines()) == len(
        {(rule.standard, rule.group) for rule in load_rules()}
    ) + 2 * len({rule.standard for rule in load_rules()})
