"""``python -m tests.benchmark.coverage``: whether stated 95 % intervals hold the truth, end to end by guided reading.

One line a class: sheets and curves; the share of places whose interval along the normal holds the printed line, with
its own 95 % interval from resampling whole sheets (the calibration is one draw a sheet); the same of times at given
currents and of currents at given times, by the stored curve as it is asked; the median relative standard uncertainty
along the normal, scaled to 400 px a decade, and the median width of the 95 % intervals of time and of current.
With ``--results FILE`` each sheet read is kept there and not read again, so that a run can be made in pieces.
"""

import argparse
import json
import sys
import tempfile
from collections.abc import Iterator
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from curvelab.errors import CurvelabError
from curvelab.reading.digitise import digitise
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.evaluation import Bounded, currents_at, values_at
from curvelab.records.normal import along_normal
from demo_curves.drawing.truth import CurveTruth, PlotTruth
from tests.benchmark.guided import distance_to_line
from tests.drawn import QUALITIES, random_sheet

Floats = NDArray[np.float64]

PLACES = 200
DECADE_PX = 400.0
RESAMPLED = 2000
HEADINGS = (
    *("class", "sheets", "refused", "curves", "normal", "from", "to", "time", "current"),
    *("u at 400", "time width", "current width"),
)
COLUMNS = "{:<9}{:>7}{:>8}{:>7}{:>8}{:>8}{:>8}{:>8}{:>8}{:>9}{:>11}{:>14}"


def read_sheet(seed: int, quality: str, folder: Path) -> dict[str, object]:
    """Draw and read one sheet; what its curves' intervals hold."""
    sheet = random_sheet(seed, quality)
    try:
        reading = digitise(sheet.written(folder))
    except CurvelabError as error:
        return {"quality": quality, "seed": seed, "error": str(error), "curves": []}
    plot = sheet.truth.plots[0]
    pairs = zip(plot.curves, reading.curves, strict=True)
    return {
        "quality": quality,
        "seed": seed,
        "error": "",
        "curves": [held(plot, truth, read.curve) | {"name": truth.design.name} for truth, read in pairs],
    }


def held(plot: PlotTruth, truth: CurveTruth, curve: Curve) -> dict[str, float]:
    """Shares of places, times and currents of one curve whose 95 % intervals hold the truth, and how wide they are."""
    line = np.log10(np.stack([truth.current, truth.value], axis=1))
    places, sd = _places(curve)
    off = distance_to_line(places, line)
    current, value = 10.0**places.T
    time, at_current = values_at(curve, current), _truth_at(line, current)
    currents, at_value = currents_at(curve, value[::-1]), _truth_at(line[::-1, ::-1], value[::-1])
    return {
        "normal": float(np.mean(off <= COVERAGE_FACTOR * sd)),
        "worst": float(np.max(off / sd)),
        "mean_square": float(np.mean((off / sd) ** 2)),
        "sd": float(np.median(sd) * np.log(10.0)) * _decade(plot) / DECADE_PX,
        **_held_by(time, at_current, "time"),
        **_held_by(currents, at_value, "current"),
    }


def _decade(plot: PlotTruth) -> float:
    """Length of the shortest decade in the sheet's unit."""
    return float(np.min(np.hypot(plot.matrix[0, :2], plot.matrix[1, :2])))


def _places(curve: Curve) -> tuple[Floats, Floats]:
    """Places evenly along all parts in log10, shape (n, 2), and their standard deviation along the normal."""
    places, spreads = [], []
    for part in curve.parts:
        points = np.log10(np.stack([part.current, part.value], axis=1))
        sd = along_normal(part.sd_current, part.sd_value) / np.log(10.0)
        travelled = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
        at = np.linspace(0.0, travelled[-1], PLACES)
        places.append(np.stack([np.interp(at, travelled, points[:, k]) for k in (0, 1)], axis=1))
        spreads.append(np.interp(at, travelled, sd))
    return np.concatenate(places), np.concatenate(spreads)


def _truth_at(line: Floats, asked: Floats) -> tuple[Floats, Floats]:
    """Least and greatest true answer of a falling line within a millionth of what is asked: a step has many."""
    given, answer = line.T
    low, high = (np.interp(np.log10(asked) + side, given, answer) for side in (-5e-7, 5e-7))
    outside = (np.log10(asked) < given[0]) | (np.log10(asked) > given[-1])
    least, greatest = 10.0 ** np.minimum(low, high), 10.0 ** np.maximum(low, high)
    return np.where(outside, np.nan, least), np.where(outside, np.nan, greatest)


def _held_by(answer: Bounded, truth: tuple[Floats, Floats], name: str) -> dict[str, float]:
    known = np.isfinite(answer.lower) & np.isfinite(truth[0])
    if not known.any():
        return {name: np.nan, f"{name}_width": np.nan}
    inside = (answer.lower <= truth[1]) & (answer.upper >= truth[0])
    return {
        name: float(np.mean(inside[known])),
        f"{name}_width": float(np.median((answer.upper - answer.lower)[known] / answer.value[known])),
    }


def row(quality: str, sheets: list[dict[str, object]]) -> str:
    """One class in one line; every sheet counts alike."""
    read = [sheet["curves"] for sheet in sheets if sheet["curves"]]
    refused = sum(1 for sheet in sheets if sheet["error"])
    if not read:
        return COLUMNS.format(quality, len(sheets), refused, 0, *["-"] * 8)
    curves = [curve for sheet in read for curve in sheet]
    shares = np.array([np.mean([curve["normal"] for curve in sheet]) for sheet in read])
    chance = np.random.default_rng(0).integers(len(shares), size=(RESAMPLED, len(shares)))
    low, high = np.quantile(shares[chance].mean(axis=1), [0.025, 0.975])

    def by_sheet(name: str) -> float:
        return float(np.nanmean([np.nanmean([curve[name] for curve in sheet]) for sheet in read]))

    def median(name: str) -> float:
        return float(np.nanmedian([curve[name] for curve in curves]))

    return COLUMNS.format(
        quality,
        len(sheets),
        refused,
        len(curves),
        f"{shares.mean():.1%}",
        f"{low:.1%}",
        f"{high:.1%}",
        f"{by_sheet('time'):.1%}",
        f"{by_sheet('current'):.1%}",
        f"{median('sd'):.3%}",
        f"{median('time_width'):.2%}",
        f"{median('current_width'):.2%}",
    )


def kept(results: Path | None) -> Iterator[dict[str, object]]:
    """Sheets read before."""
    if results is not None and results.exists():
        yield from map(json.loads, results.read_text(encoding="utf-8").splitlines())


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.coverage", description=__doc__)
    parser.add_argument("--classes", default="clean,grey", help="comma-separated, of: " + ", ".join(QUALITIES))
    parser.add_argument("--sheets", type=int, default=30, help="sheets a class")
    parser.add_argument("--first", type=int, default=20_000, help="first seed")
    parser.add_argument("--results", type=Path, help="file to which each sheet read is added as a line of JSON")
    options = parser.parse_args()
    done = {(sheet["quality"], sheet["seed"]): sheet for sheet in kept(options.results)}
    print(COLUMNS.format(*HEADINGS))
    with tempfile.TemporaryDirectory() as folder:
        for quality in options.classes.split(","):
            for seed in range(options.first, options.first + options.sheets):
                if (quality, seed) in done:
                    continue
                sheet = read_sheet(seed, quality, Path(folder))
                done[quality, seed] = sheet
                if options.results is not None:
                    with options.results.open("a", encoding="utf-8") as file:
                        file.write(json.dumps(sheet) + "\n")
            print(row(quality, [sheet for (of, _), sheet in done.items() if of == quality]), flush=True)
    return 0


if __name__ == "__main__":
    sys.exit(main())
