"""Findings as a plain table."""

from collections.abc import Sequence

from curvelab.cli.output import table
from curvelab.records.finding import Finding
from curvelab.units import written_between, written_percent


def findings_table(findings: Sequence[Finding]) -> str:
    """Findings as a plain table: requirement, value read with its interval, margin, outcome, what would settle it."""
    several = len({each.device for each in findings}) > 1
    heads = ["standard", "clause", "requirement", "read (95 %)", "margin", "outcome", "note"]
    rows = [
        [each.standard, each.clause, each.requirement, _read(each), _margin(each), _outcome(each), each.note]
        for each in findings
    ]
    if several:
        heads.insert(0, "device")
        rows = [[each.device, *row] for each, row in zip(findings, rows, strict=True)]
    return table(heads, rows)


def _outcome(finding: Finding) -> str:
    return f"{finding.outcome} (advisory)" if finding.advisory else finding.outcome


def _margin(finding: Finding) -> str:
    return "-" if finding.margin is None else written_percent(finding.margin)


def _read(finding: Finding) -> str:
    return "-" if finding.value is None else written_between(finding.value, finding.interval, finding.unit)
