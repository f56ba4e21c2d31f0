"""``python -m tests.benchmark.standards``: are drawn devices out of standard caught, and those in standard left alone?

Each sheet is drawn afresh, scanned as its class says, read as a person's worksheet guides it, and checked.
``caught`` counts sheets of which every broken rule fails (or is undecided, where the sheet cannot decide); ``false``
findings that fail though the device keeps the rule; ``undecided`` the share of findings of kept rules that are open.
"""

import argparse
import sys
import tempfile
from dataclasses import dataclass
from pathlib import Path

import numpy as np

from curvelab.errors import CurvelabError
from curvelab.reading.digitise import digitise
from curvelab.records.finding import Finding
from tests.drawing.standard_cases import IN_STANDARD, OUT_OF_STANDARD, Case
from tests.drawn import sheet_of

COLUMNS = "{:<20}{:<8}{:>7}{:>9}{:>8}{:>7}{:>9}{:>11}{:>13}"
HEADINGS = ("device", "class", "sheets", "refused", "caught", "false", "findings", "undecided", "not covered")
MAKERS = {**IN_STANDARD, **OUT_OF_STANDARD}


@dataclass(frozen=True, kw_only=True, slots=True)
class Checked:
    """One sheet: whether it was caught, and the findings of the rules its device keeps."""

    name: str
    caught: bool
    missed: tuple[str, ...]
    kept: tuple[Finding, ...]
    error: str = ""

    @property
    def false(self) -> tuple[Finding, ...]:
        """Findings that fail though the device keeps the rule."""
        return tuple(finding for finding in self.kept if finding.outcome == "fails")


def check_one(name: str, seed: int, quality: str, folder: Path) -> Checked:
    """Draw, read and check one sheet."""
    case = MAKERS[name](np.random.default_rng(seed))
    try:
        reading = digitise(sheet_of(case.subject, seed, quality).written(folder))
    except CurvelabError as error:
        return Checked(name=name, caught=False, missed=(), kept=(), error=f"seed {seed}: {error}")
    return _checked(name, case, reading.findings)


def _checked(name: str, case: Case, findings: tuple[Finding, ...]) -> Checked:
    outcomes = {finding.rule: finding.outcome for finding in findings}
    missed = [rule for rule in case.fails if outcomes.get(rule) != "fails"]
    missed += [rule for rule in case.open if outcomes.get(rule) != "undecided"]
    return Checked(
        name=name,
        caught=not missed,
        missed=tuple(f"{rule} {outcomes.get(rule)}" for rule in missed),
        kept=tuple(finding for finding in findings if case.keeps(finding.rule)),
    )


def row(name: str, quality: str, results: list[Checked]) -> str:
    """One kind of sheet in one line."""
    kept = [finding for each in results for finding in each.kept]
    read = [each for each in results if not each.error]
    share = {
        outcome: sum(finding.outcome == outcome for finding in kept) / max(1, len(kept))
        for outcome in ("undecided", "not covered")
    }
    return COLUMNS.format(
        name,
        quality,
        len(results),
        len(results) - len(read),
        "-" if name in IN_STANDARD else f"{sum(each.caught for each in read)}/{len(read)}",
        sum(len(each.false) for each in read),
        len(kept),
        f"{share['undecided']:.1%}",
        f"{share['not covered']:.1%}",
    )


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.standards", description=__doc__)
    parser.add_argument("--classes", default="clean,grey", help="comma-separated classes of sheet")
    parser.add_argument("--sheets", type=int, default=10, help="sheets a device and class")
    parser.add_argument("--first", type=int, default=70_000, help="first seed")
    parser.add_argument("--devices", default=",".join(MAKERS), help="comma-separated devices")
    options = parser.parse_args()
    unknown = set(options.devices.split(",")) - MAKERS.keys()
    if unknown:
        parser.error(f"unknown devices {', '.join(unknown)}; known: {', '.join(MAKERS)}")
    print(COLUMNS.format(*HEADINGS))
    right = True
    with tempfile.TemporaryDirectory() as folder:
        for quality in options.classes.split(","):
            for name in options.devices.split(","):
                seeds = range(options.first, options.first + options.sheets)
                results = [check_one(name, seed, quality, Path(folder)) for seed in seeds]
                print(row(name, quality, results), flush=True)
                for each in results:
                    for words in (
                        *each.missed,
                        *(f"{f.rule} {f.value}" for f in each.false),
                        *filter(None, [each.error]),
                    ):
                        print(f"   {words}")
                right &= not any(each.error or each.missed or each.false for each in results)
    return 0 if right else 1


if __name__ == "__main__":
    sys.exit(main())
