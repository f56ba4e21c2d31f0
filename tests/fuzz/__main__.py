"""``python -m tests.fuzz``: damaged input through every intake; harmful cases are kept in the corpus."""

import argparse
import hashlib
import logging
import os
import random
import sys
import tempfile
import warnings
from collections import Counter
from collections.abc import Sequence
from concurrent.futures import ProcessPoolExecutor
from functools import partial
from pathlib import Path

from tests.fuzz.attempt import Outcome, attempt, pristine_library
from tests.fuzz.intakes import CORPUS, HARMFUL, INTAKES, Case, Intake

BATCH = 50


def main() -> int:
    """Run the cases, print a table, keep what did harm; 1 when anything did."""
    parser = argparse.ArgumentParser(prog="python -m tests.fuzz", description=__doc__)
    parser.add_argument("--cases", type=int, default=10_000)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--only", choices=[intake.name for intake in INTAKES], help="one intake alone")
    options = parser.parse_args()
    chosen = [intake for intake in INTAKES if options.only in {None, intake.name}]
    tasks = _tasks(chosen, options.cases, options.seed)
    counts, slowest, harm = Counter[tuple[str, int]](), Counter[str](), 0
    with tempfile.TemporaryDirectory() as folder, ProcessPoolExecutor(os.cpu_count()) as pool:
        work = partial(_batch, pristine_library(Path(folder)))
        for done, results in enumerate(pool.map(work, tasks), start=1):
            for name, case, outcome in results:
                counts[name, outcome.status] += 1
                slowest[name] = max(slowest[name], round(outcome.seconds, 2))
                harm += outcome.fault is not None
                if outcome.fault is not None:
                    print(f"\n{_keep(name, case)}\n{outcome.fault}", file=sys.stderr)
            print(f"\r{done * BATCH} of {len(tasks) * BATCH}", end="", file=sys.stderr)
    print(file=sys.stderr)
    print(f"{'intake':<11}{'done':>8}{'findings':>10}{'refused':>9}{'slowest s':>11}")
    for intake in chosen:
        done, found, refused = (counts[intake.name, status] for status in (0, 1, 2))
        print(f"{intake.name:<11}{done:>8}{found:>10}{refused:>9}{slowest[intake.name]:>11.2f}")
    print(f"{sum(counts.values())} cases, {harm} did harm")
    return int(harm > 0)


def _tasks(intakes: Sequence[Intake], cases: int, seed: int) -> list[tuple[str, int]]:
    """Batches: the intake and a seed of its own."""
    rng = random.Random(seed)
    names = rng.choices([one.name for one in intakes], [one.weight for one in intakes], k=-(-cases // BATCH))
    return [(name, seed * 1_000_000 + number) for number, name in enumerate(names)]


def _batch(pristine: Path, task: tuple[str, int]) -> list[tuple[str, Case, Outcome]]:
    warnings.simplefilter("error")
    logging.disable()
    name, seed = task
    intake = next(one for one in INTAKES if one.name == name)
    rng = random.Random(seed)
    cases = [intake.case(rng) for _ in range(BATCH)]
    return [(name, case, attempt(intake, case, pristine)) for case in cases]


def _keep(name: str, case: Case) -> Path:
    data, suffix = case
    path = CORPUS / name / f"{HARMFUL}{hashlib.sha256(data).hexdigest()[:12]}{suffix}"
    path.parent.mkdir(exist_ok=True)
    path.write_bytes(data)
    return path


if __name__ == "__main__":
    sys.exit(main())
