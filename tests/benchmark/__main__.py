"""``python -m tests.benchmark``: one table a class of sheet; seeds from ``--first`` on are drawn afresh each time."""

import argparse
import sys
import tempfile
from concurrent.futures import ProcessPoolExecutor
from functools import partial
from pathlib import Path

import numpy as np

from tests.benchmark.guided import SheetResult, read_one
from tests.drawn import QUALITIES

GUIDED = "clean,snapped,stepped,grey,bilevel,vector"
"""Classes that guided reading is measured on by default; photographs ask for more of the axes."""

COLUMNS = "{:<10}{:>8}{:>8}{:>10}{:>10}{:>10}{:>10}{:>10}{:>10}{:>9}{:>8}{:>8}"
HEADINGS = (
    "class",
    "sheets",
    "refused",
    "RMS",
    "p95 RMS",
    "largest",
    "complete",
    "covered",
    "u median",
    "s median",
    "curves",
    "silent",
)


def row(quality: str, results: list[SheetResult]) -> str:
    """The class in one line; RMS in px, on vector sheets in decades; ``u`` relative, along the normal.

    ``silent`` counts the curves that are more than 2 px off (2 pt on vector sheets) without a warning near them.
    """
    curves = [curve for result in results for curve in result.curves]
    refused = sum(1 for result in results if result.error)
    if not curves:
        return COLUMNS.format(quality, len(results), refused, *["-"] * 9)
    rms = np.array([curve.rms for curve in curves])
    return COLUMNS.format(
        quality,
        len(results),
        refused,
        f"{np.sqrt(np.mean(rms**2)):.3g}",
        f"{np.quantile(rms, 0.95):.3g}",
        f"{max(curve.largest for curve in curves):.3g}",
        f"{np.mean([curve.completeness for curve in curves]):.2%}",
        f"{np.mean([curve.covered for curve in curves]):.1%}",
        f"{np.median([curve.stated for curve in curves]):.2%}",
        f"{np.median([result.seconds for result in results]):.2f}",
        len(curves),
        sum(curve.silently_wrong for curve in curves),
    )


def worst(results: list[SheetResult], count: int) -> list[str]:
    """The curves furthest off, and every refusal."""
    curves = sorted((curve for result in results for curve in result.curves), key=lambda curve: -curve.rms)
    lines = [
        f"   {each.sheet} {each.name}: RMS {each.rms:.3g}, largest {each.largest:.3g}, "
        f"complete {each.completeness:.1%}, covered {each.covered:.0%}"
        for each in curves[:count]
    ]
    return lines + [f"   {result.sheet}: {result.error}" for result in results if result.error]


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark", description=__doc__)
    parser.add_argument("--classes", default=GUIDED, help="comma-separated, of: " + ", ".join(QUALITIES))
    parser.add_argument("--sheets", type=int, default=30, help="sheets a class")
    parser.add_argument("--first", type=int, default=10_000, help="first seed")
    parser.add_argument("--worst", type=int, default=0, help="show the N worst curves and every refusal")
    parser.add_argument("--jobs", type=int, default=1, help="processes; timings are of one process's share")
    options = parser.parse_args()
    print("Guided: marks with 0.7 px scatter, guides with 1.5 px; errors normal to the curve, end to end.")
    print(COLUMNS.format(*HEADINGS))
    with tempfile.TemporaryDirectory() as folder, ProcessPoolExecutor(options.jobs) as pool:
        for quality in options.classes.split(","):
            task = partial(read_one, quality=quality, folder=Path(folder))
            results = list(pool.map(task, range(options.first, options.first + options.sheets)))
            print(row(quality, results), flush=True)
            for line in worst(results, options.worst) if options.worst else ():
                print(line)
    return 0


if __name__ == "__main__":
    sys.exit(main())
