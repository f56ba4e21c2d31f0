"""``python -m tests.benchmark.finding``: every curve found and named with nothing given, on sheets of known truth."""

import argparse
import sys
import tempfile
import time
from concurrent.futures import ProcessPoolExecutor
from dataclasses import dataclass, replace
from functools import partial
from pathlib import Path

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from curvelab.errors import CurvelabError
from curvelab.reading.digitise import read
from curvelab.records.reading import ReadCurve, Reading
from curvelab.records.worksheet import DeviceEntry, Worksheet
from curvelab.worksheets.read import read_worksheet
from demo_curves.drawing.geometry import densified
from demo_curves.drawing.truth import CurveTruth, PlotTruth
from tests.benchmark.careful import person_rms
from tests.benchmark.guided import joined
from tests.drawn import QUALITIES, DrawnSheet, score, worded_sheet

Floats = NDArray[np.float64]

COMPLETE = 0.85
"""Share of a printed line that a reading of it covers at least."""
OFF = 3.0
"""Largest rms distance, px (pt), of a reading from the line it is of."""
ABOUT_SHEET = {"grid-snapped", "page-bent", "meaning-unknown", "rating-unknown"}
"""Warnings that do not say that a line or its name may be wrong."""

COLUMNS = "{:<10}{:>7}{:>7}{:>8}{:>8}{:>8}{:>9}{:>8}{:>9}{:>8}{:>9}{:>8}{:>8}"
HEADINGS = ("class", "sheets", "lines", "F1", "found", "named", "refused", "wrong", "rms px", "p95", "person", "swaps",
            "s page")  # fmt: skip


@dataclass(frozen=True, kw_only=True, slots=True)
class Outcome:
    """One sheet: counts of lines, errors in px (decades on vector sheets), and what went wrong."""

    sheet: str
    printed: int
    found: int
    named: int
    claimed: int
    silently_wrong: int
    rms: tuple[float, ...]
    person: float
    swaps: int
    crossings: int
    seconds: float
    said: tuple[str, ...]


def read_one(seed: int, quality: str, folder: Path, *, axes_given: bool) -> Outcome:
    """Draw one sheet, read it with nothing given, or with the axes' marks alone, and judge every line."""
    sheet = worded_sheet(seed, quality)
    path = sheet.written(folder)
    given = read_worksheet(path)
    bare = Worksheet(sheet=given.sheet)
    if axes_given:
        bare = replace(bare, current=given.current, value=given.value)
    started = time.perf_counter()
    try:
        reading = read(bare, folder)
    except CurvelabError as refusal:
        return _refused(sheet, time.perf_counter() - started, str(refusal))
    return judged(sheet, reading, given.devices, time.perf_counter() - started)


def _refused(sheet: DrawnSheet, seconds: float, why: str) -> Outcome:
    lines = len({curve.design.name for curve in sheet.truth.plots[0].curves})
    return Outcome(
        sheet=sheet.name, printed=lines, found=0, named=0, claimed=0, silently_wrong=0, rms=(), person=np.nan, swaps=0,
        crossings=0, seconds=seconds, said=(f"REFUSED {why}",),
    )  # fmt: skip


def judged(sheet: DrawnSheet, reading: Reading, devices: tuple[DeviceEntry, ...], seconds: float) -> Outcome:
    """Which printed lines were found, which of them rightly named, and which names are wrong with no warning."""
    plot = sheet.truth.plots[0]
    truths = {curve.design.name: curve for curve in plot.curves}
    matches = {name: _match(plot, name, reading) for name in truths}
    said: list[str] = []
    right = {
        name: number for name, (number, _) in matches.items() if (number is not None
        and not (wrong := _misnamed(truths[name], reading.curves[number], reading, devices)))
        or (said.append(f"{name}: {'not found' if number is None else wrong}") or False)
    }  # fmt: skip
    claimed = [number for number, read_curve in enumerate(reading.curves) if _claims(read_curve)]
    wrong = [number for number in claimed if number not in right.values()]
    silent = [number for number in wrong if not _warned(reading, number)]
    said += [f"extra or wrong: {_told(reading.curves[k])}{' SILENT' if k in silent else ''}" for k in wrong]
    scale = 1.0 if sheet.truth.unit == "px" else _decade_per_unit(plot)
    swaps, crossings = _swaps(plot, reading)
    return Outcome(
        sheet=sheet.name,
        printed=len(truths),
        found=sum(number is not None for number, _ in matches.values()),
        named=len(right),
        claimed=len(claimed),
        silently_wrong=len(silent),
        rms=tuple(rms * scale for number, rms in matches.values() if number is not None),
        person=person_rms(sheet) * scale,
        swaps=swaps,
        crossings=crossings,
        seconds=seconds,
        said=tuple(said) + tuple(f"[{w.code}]" for w in reading.warnings),
    )


def _decade_per_unit(plot: PlotTruth) -> float:
    return float(1.0 / np.min(np.hypot(plot.matrix[0, :2], plot.matrix[1, :2])))


def _match(plot: PlotTruth, name: str, reading: Reading) -> tuple[int | None, float]:
    """The reading's curve that is this line, and its rms distance."""
    scored = []
    for number, read_curve in enumerate(reading.curves):
        found = score(plot, name, *joined(read_curve.curve))
        if found.rms <= OFF and found.completeness >= COMPLETE:
            scored.append((found.rms, number))
    return (min(scored)[1], min(scored)[0]) if scored else (None, np.nan)


def _claims(read_curve: ReadCurve) -> bool:
    """Whether the reading says of which device's which limit the line is."""
    return bool(read_curve.devices)


def _misnamed(truth: CurveTruth, found: ReadCurve, reading: Reading, devices: tuple[DeviceEntry, ...]) -> str:
    """What is wrong with a line's name; empty where edge, device, rating and settings are right."""
    design = truth.design
    whose = design.devices[0] if design.devices else devices[0].nameplate.key
    plate = next(entry.nameplate for entry in devices if entry.nameplate.key == whose)
    if not found.devices:
        return "no device"
    own = next(record.nameplate for record in reading.devices if record.nameplate.key == found.devices[0])
    for what in ("kind", "characteristic", "rated_current_a", "rated_residual_current_a"):
        if getattr(own, what) != getattr(plate, what):
            return f"{what} {getattr(own, what)} for {getattr(plate, what)}"
    if found.curve.edge != design.edge:
        return f"edge {found.curve.edge} for {design.edge}"
    if dict(found.curve.at) != dict(design.at):
        return f"at {dict(found.curve.at)} for {dict(design.at)}"
    if found.curve.meaning not in (None, design.meaning):
        return f"meaning {found.curve.meaning} for {design.meaning}"
    return "" if found.curve.element == design.element else f"element {found.curve.element} for {design.element}"


def _told(read_curve: ReadCurve) -> str:
    return f"{read_curve.devices} {read_curve.curve.edge} {dict(read_curve.curve.at)}"


def _warned(reading: Reading, number: int) -> bool:
    """Whether a warning names the curve's place, or doubts the sheet as a whole."""
    trace = reading.curves[number].trace
    for warning in reading.warnings:
        if warning.code in ABOUT_SHEET:
            continue
        if warning.at is None or trace is None or warning.text.startswith("Words that name"):
            return True
        if np.hypot(*(trace.places - np.array(warning.at)).T).min() < 15.0:
            return True
    return False


def _swaps(plot: PlotTruth, reading: Reading) -> tuple[int, int]:
    """Times a reading leaves its line for another's, and crossings of printed lines."""
    names = [curve.design.name for curve in plot.curves]
    trees = {name: cKDTree(densified(plot.curve(name).places, 0.5)) for name in names}
    swaps = 0
    for read_curve in reading.curves:
        if read_curve.trace is None or len(names) < 2:
            continue
        places = read_curve.trace.places[::4]
        away = np.array([trees[name].query(places)[0] for name in names])
        near, second = np.sort(away, axis=0)[:2]
        sure = away.argmin(axis=0)[(near < 3.0) & (second > 8.0)]
        swaps += int(np.count_nonzero(np.diff(sure)))
    return swaps, _crossings(plot, names)


def _crossings(plot: PlotTruth, names: list[str]) -> int:
    """Pairs of printed lines of which each lies left of the other somewhere."""
    count = 0
    lines = [plot.curve(name) for name in dict.fromkeys(names)]
    for index, one in enumerate(lines):
        for other in lines[index + 1 :]:
            levels = np.geomspace(max(one.value.min(), other.value.min()), min(one.value.max(), other.value.max()), 300)
            apart = [
                np.interp(np.log(levels), np.log(line.value[::-1]), np.log(line.current[::-1])) for line in (one, other)
            ]
            count += int(np.count_nonzero(np.diff(np.sign(np.round(apart[0] - apart[1], 4))) != 0) > 0)
    return count


def row(quality: str, outcomes: list[Outcome]) -> str:
    """The class in one line."""
    printed, named = sum(one.printed for one in outcomes), sum(one.named for one in outcomes)
    claimed = sum(one.claimed for one in outcomes)
    errors = np.array([error for one in outcomes for error in one.rms])
    persons = np.array([one.person for one in outcomes])
    refused = sum(one.said[:1] != () and one.said[0].startswith("REFUSED") for one in outcomes)
    style = "{:.3f}" if quality != "vector" else "{:.1e}"
    return COLUMNS.format(
        quality,
        len(outcomes),
        printed,
        f"{2 * named / max(printed + claimed, 1):.3f}",
        f"{sum(one.found for one in outcomes) / printed:.3f}",
        f"{named / printed:.3f}",
        refused,
        f"{sum(one.silently_wrong for one in outcomes) / max(printed, 1):.2%}",
        style.format(np.sqrt(np.mean(errors**2))) if errors.size else "-",
        style.format(np.quantile(errors, 0.95)) if errors.size else "-",
        style.format(np.sqrt(np.nanmean(persons**2))) if np.isfinite(persons).any() else "-",
        f"{sum(one.swaps for one in outcomes)}/{sum(one.crossings for one in outcomes)}",
        f"{np.median([one.seconds for one in outcomes]):.2f}",
    )


def main() -> int:
    parser = argparse.ArgumentParser(prog="python -m tests.benchmark.finding", description=__doc__)
    parser.add_argument("--classes", default="clean,snapped,grey,bilevel,photo,vector", help="classes of sheet")
    parser.add_argument("--sheets", type=int, default=24, help="sheets a class")
    parser.add_argument("--first", type=int, default=40_000, help="first seed")
    parser.add_argument("--axes-given", action="store_true", help="marks of both axes are given, curves are not")
    parser.add_argument("--show", action="store_true", help="list what was not found or wrong")
    parser.add_argument("--jobs", type=int, default=1, help="processes; timings are of one process's share")
    options = parser.parse_args()
    unknown = set(options.classes.split(",")) - set(QUALITIES)
    if unknown:
        parser.error(f"unknown classes: {', '.join(sorted(unknown))}")
    print("F1 of lines found and rightly named; wrong: share of lines claimed wrongly with no warning.")
    print(COLUMNS.format(*HEADINGS))
    with tempfile.TemporaryDirectory() as folder, ProcessPoolExecutor(options.jobs) as pool:
        for quality in options.classes.split(","):
            task = partial(read_one, quality=quality, folder=Path(folder), axes_given=options.axes_given)
            outcomes = list(pool.map(task, range(options.first, options.first + options.sheets)))
            print(row(quality, outcomes), flush=True)
            for outcome in outcomes:
                if options.show and (outcome.named < outcome.printed or outcome.claimed > outcome.named):
                    print(
                        f"   {outcome.sheet} {outcome.named}/{outcome.printed}: " + " | ".join(outcome.said), flush=True
                    )
    return 0


if __name__ == "__main__":
    sys.exit(main())
