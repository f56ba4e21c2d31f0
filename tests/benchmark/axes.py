"""``python -m tests.benchmark.axes``: axes read with nothing given, against the truth of sheets drawn at random."""

import argparse
import resource
import sys
import tempfile
import time
from collections import Counter
from concurrent.futures import ProcessPoolExecutor
from dataclasses import dataclass
from functools import partial
from pathlib import Path
from typing import Literal

import numpy as np

from curvelab.axes.calibrate import calibrate
from curvelab.errors import CurvelabError
from curvelab.records.axes import Axes
from curvelab.records.worksheet import AxisEntry
from curvelab.sheets.open import open_sheet
from curvelab.units import CURRENT_UNITS
from demo_curves.drawing.truth import PlotTruth
from tests.axes.foreign.sheet import CLASSES, foreign_sheet
from tests.drawn import QUALITIES, random_sheet

RIGHT = 0.003
"""Relative error of current and time, anywhere in the plot, up to which axes are right."""

UNRELATED = {"grid-snapped"}
"""Warnings that say how exact the sheet is: one alone does not count against what is right."""

FOREIGN = "foreign-"
"""Classes of pages as other programs print them, beside those of the project's own drawing."""

KNOWN = (*QUALITIES, *(FOREIGN + name for name in CLASSES))

Outcome = Literal["right", "warned", "wrong", "wrong-warned", "refused"]

COLUMNS = "{:<16}{:>8}{:>9}{:>9}{:>9}{:>12}{:>9}{:>12}{:>9}{:>9}"
HEADINGS = ("class", "sheets", "right", "warned", "refused", "wrong warned", "wrong", "med. error", "s median", "s p95")


@dataclass(frozen=True, kw_only=True, slots=True)
class AxesResult:
    """One sheet: the outcome, the largest relative error over the plot, seconds and what was said."""

    sheet: str
    outcome: Outcome
    error: float
    seconds: float
    said: str


def largest_error(plot: PlotTruth, axes: Axes) -> float:
    """The largest relative error of current or time at places all over the plot."""
    left, top, right, bottom = plot.frame
    across, down = np.meshgrid(np.linspace(left, right, 9), np.linspace(top, bottom, 9))
    flat = np.column_stack([across.ravel(), down.ravel()])
    logs = np.linalg.solve(plot.matrix[:, :2], (flat - plot.matrix[:, 2]).T)
    read = axes.values(plot.place_map.forward(flat))
    return float(max(np.abs(values / 10.0**true - 1.0).max() for values, true in zip(read, logs, strict=True)))


def drawn(seed: int, quality: str) -> tuple[str, bytes, PlotTruth]:
    """A sheet's name, its file and the truth of its plot."""
    if quality.startswith(FOREIGN):
        foreign = foreign_sheet(seed, quality.removeprefix(FOREIGN))
        return foreign.name, foreign.data, foreign.plot
    sheet = random_sheet(seed, quality)
    return sheet.name, sheet.data, sheet.truth.plots[0]


def read_axes(seed: int, quality: str, folder: Path) -> AxesResult:
    """Draw one sheet, read its axes and judge them."""
    name, data, plot = drawn(seed, quality)
    path = folder / name
    path.write_bytes(data)
    opened = open_sheet(path, 1)
    started = time.perf_counter()
    try:
        axes, warnings = calibrate(opened, AxisEntry(quantity="current"), None)
    except CurvelabError as refusal:
        return AxesResult(
            sheet=name,
            outcome="refused",
            error=np.nan,
            seconds=time.perf_counter() - started,
            said=str(refusal),
        )
    finally:
        path.unlink()
    seconds = time.perf_counter() - started
    error = largest_error(plot, axes)
    named = (axes.current.base, axes.value.quantity) == (_base(plot), plot.value.quantity)
    doubts = [warning for warning in warnings if warning.code not in UNRELATED]
    if named and error <= RIGHT:
        outcome: Outcome = "warned" if doubts else "right"
    else:
        outcome = "wrong-warned" if warnings else "wrong"
    said = f"{axes.current.unit} {axes.value.unit} " + " ".join(f"[{doubt.code}] {doubt.text}" for doubt in doubts)
    return AxesResult(sheet=name, outcome=outcome, error=error, seconds=seconds, said=said)


def _base(plot: PlotTruth) -> str:
    """What the current axis counts in."""
    return CURRENT_UNITS[plot.current.unit][0]


def row(quality: str, results: list[AxesResult]) -> str:
    """The class in one line: shares of all sheets."""
    count = Counter(result.outcome for result in results)
    seconds = [result.seconds for result in results]
    errors = [result.error for result in results if result.outcome in ("right", "warned")]

    def share(*outcomes: Outcome) -> str:
        return f"{sum(count[outcome] for outcome in outcomes) / len(results):.1%}"

    return COLUMNS.format(
        quality,
        len(results),
        share("right", "warned"),
        share("warned"),
        share("refused"),
        share("wrong-warned"),
        share("wrong"),
        f"{np.median(errors):.2e}" if errors else "-",
        f"{np.median(seconds):.2f}",
        f"{np.quantile(seconds, 0.95):.2f}",
    )


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.axes", description=__doc__)
    parser.add_argument("--classes", default=",".join(KNOWN), help="comma-separated classes of sheet")
    parser.add_argument("--sheets", type=int, default=30, help="sheets a class")
    parser.add_argument("--first", type=int, default=20_000, help="first seed")
    parser.add_argument("--show", default="", help="comma-separated outcomes to list: warned, wrong, refused, ...")
    parser.add_argument("--jobs", type=int, default=1, help="processes; timings are of one process's share")
    options = parser.parse_args()
    print(f"Right: current and time within {RIGHT:.1%} all over the plot, base right, nothing given.")
    print(COLUMNS.format(*HEADINGS))
    with tempfile.TemporaryDirectory() as folder, ProcessPoolExecutor(options.jobs) as pool:
        for quality in options.classes.split(","):
            task = partial(read_axes, quality=quality, folder=Path(folder))
            results = list(pool.map(task, range(options.first, options.first + options.sheets)))
            print(row(quality, results), flush=True)
            for result in results:
                if result.outcome in options.show.split(","):
                    print(f"   {result.sheet} {result.outcome} {result.error:.2e}: {result.said}", flush=True)
    peak_mb = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
    print(f"Peak memory of a process, drawing included: {peak_mb:.0f} MB")
    return 0


if __name__ == "__main__":
    sys.exit(main())
