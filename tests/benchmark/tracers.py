"""Our tracer beside a general-purpose image library's minimal path, on the same sheets in the same run.

``python -m tests.benchmark.tracers``. The minimal path (scikit-image, ``graph.route_through_array``) is given both true
ends of the line and a corridor about the true line; ours only the guides of the worksheet. Errors normal to the
printed line, in px; times of one curve on a page that is already open.
"""

import argparse
import sys
import tempfile
import time
from pathlib import Path

import numpy as np
from numpy.typing import NDArray
from skimage.graph import route_through_array

from curvelab.axes.calibrate import calibrate
from curvelab.errors import CurvelabError
from curvelab.records.sheet import Sheet
from curvelab.sheets.open import open_sheet
from curvelab.trace.guided import Guide, trace_guided
from curvelab.trace.prepare import prepare
from curvelab.worksheets.read import read_worksheet
from demo_curves.drawing.geometry import densified
from tests.benchmark.guided import distance_to_line
from tests.drawn import random_sheet

Floats = NDArray[np.float64]
CORRIDOR = 12
"""Pixels on either side of the true line that the minimal path may use."""


def minimal_path(sheet: Sheet, line: Floats) -> Floats:
    """The darkest connected way between the ends of a line, pixel by pixel, as (x, y), inside a corridor about it."""
    assert sheet.pixels is not None
    low = np.maximum(np.floor(line.min(axis=0)).astype(int) - CORRIDOR, 0)
    high = np.ceil(line.max(axis=0)).astype(int) + CORRIDOR + 1
    cost = np.full(sheet.pixels.grey[low[1] : high[1], low[0] : high[0]].shape, -1.0)
    crop = 0.02 + sheet.pixels.grey[low[1] : high[1], low[0] : high[0]] / 255.0
    for column, row in np.rint(densified(line, 2.0)).astype(int) - low:
        near = np.s_[max(row - CORRIDOR, 0) : row + CORRIDOR + 1, max(column - CORRIDOR, 0) : column + CORRIDOR + 1]
        cost[near] = crop[near]
    first, last = (tuple((np.rint(place).astype(int) - low)[::-1]) for place in (line[0], line[-1]))
    path, _ = route_through_array(cost, first, last, fully_connected=True, geometric=True)
    return np.array(path, dtype=np.float64)[:, ::-1] + low


def one_sheet(seed: int, quality: str, folder: Path) -> list[tuple[str, float, float]]:
    """(tracer, RMS in px, seconds) of every curve of one sheet; infinite where the tracer refuses."""
    drawn = random_sheet(seed, quality)
    worksheet = read_worksheet(drawn.written(folder))
    assert worksheet.sheet is not None
    assert worksheet.current is not None
    assert worksheet.value is not None
    sheet = open_sheet(folder / worksheet.sheet.file)
    prepared = prepare(sheet, calibrate(sheet, worksheet.current, worksheet.value)[0])
    rows = []
    for entry, truth in zip(worksheet.curves, drawn.truth.plots[0].curves, strict=True):
        run = max(truth.visible_runs(), key=len)
        started = time.perf_counter()
        try:
            places = trace_guided(prepared, Guide(through=entry.through, colour=None, avoid=()))[0].places
        except CurvelabError:
            rows.append(("curvelab", np.inf, time.perf_counter() - started))
        else:
            rows.append(("curvelab", _rms(places, truth.places), time.perf_counter() - started))
        started = time.perf_counter()
        path = minimal_path(sheet, run)
        rows.append(("minimal path", _rms(path, truth.places), time.perf_counter() - started))
    return rows


def _rms(places: Floats, line: Floats) -> float:
    return float(np.sqrt(np.mean(distance_to_line(places, line) ** 2)))


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.tracers", description=__doc__)
    parser.add_argument("--sheets", type=int, default=10)
    parser.add_argument("--first", type=int, default=10_000)
    options = parser.parse_args()
    print(f"{'class':<10}{'tracer':<14}{'curves':>8}{'refused':>9}{'median RMS':>12}{'p95 RMS':>10}{'s median':>10}")
    with tempfile.TemporaryDirectory() as folder:
        for quality in ("clean", "grey"):
            seeds = range(options.first, options.first + options.sheets)
            rows = [row for seed in seeds for row in one_sheet(seed, quality, Path(folder))]
            for tracer in ("curvelab", "minimal path"):
                rms, seconds = np.array([row[1:] for row in rows if row[0] == tracer]).T
                read = rms[np.isfinite(rms)]
                print(
                    f"{quality:<10}{tracer:<14}{len(rms):>8}{len(rms) - len(read):>9}{np.median(read):>12.3f}"
                    f"{np.quantile(read, 0.95):>10.3f}{np.median(seconds):>10.3f}",
                    flush=True,
                )
    return 0


if __name__ == "__main__":
    sys.exit(main())
