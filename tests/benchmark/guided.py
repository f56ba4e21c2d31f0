"""Guided reading end to end: from the file and a worksheet clicked by an imperfect hand to values."""

import time
from dataclasses import dataclass
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from curvelab.errors import CurvelabError
from curvelab.reading.digitise import digitise
from curvelab.records.curve import COVERAGE_FACTOR, Curve
from curvelab.records.normal import along_normal
from demo_curves.drawing.truth import CurveTruth, PlotTruth
from tests.drawn import DrawnSheet, random_sheet, score

Floats = NDArray[np.float64]


FAR_OFF = 2.0
"""RMS in units of the sheet from which a curve is wrong."""
DOUBTS = ("trace-doubt", "area-edge")
NEAR = 30.0
"""Units of the sheet from a curve within which a warning is about it."""


@dataclass(frozen=True, kw_only=True, slots=True)
class CurveResult:
    """One curve of one sheet: errors normal to it in px (decades on vector sheets), and what was stated of them."""

    sheet: str
    name: str
    rms: float
    largest: float
    completeness: float
    covered: float
    stated: float
    off: float
    """RMS in units of the sheet."""
    warned: bool

    @property
    def silently_wrong(self) -> bool:
        """Whether it is far off and nothing was said, the worst fault."""
        return self.off > FAR_OFF and not self.warned


@dataclass(frozen=True, kw_only=True, slots=True)
class SheetResult:
    """One sheet: its curves, the seconds it took, and the error that stopped it."""

    sheet: str
    curves: tuple[CurveResult, ...]
    seconds: float
    error: str = ""


def read_one(seed: int, quality: str, folder: Path) -> SheetResult:
    """Draw, write, read and score one sheet."""
    sheet = random_sheet(seed, quality)
    path = sheet.written(folder)
    started = time.perf_counter()
    try:
        reading = digitise(path)
    except CurvelabError as error:
        return SheetResult(sheet=sheet.name, curves=(), seconds=time.perf_counter() - started, error=str(error))
    seconds = time.perf_counter() - started
    plot = sheet.truth.plots[0]
    pairs = zip(plot.curves, reading.curves, strict=True)
    doubts = [warning.at for warning in reading.warnings if warning.code in DOUBTS and warning.at is not None]
    curves = tuple(_result(sheet, truth, read.curve, doubts) for truth, read in pairs)
    return SheetResult(sheet=sheet.name, curves=curves, seconds=seconds)


def _result(sheet: DrawnSheet, truth: CurveTruth, curve: Curve, doubts: list[tuple[float, float]]) -> CurveResult:
    plot = sheet.truth.plots[0]
    current, value = joined(curve)
    scale = _decade_per_unit(plot) if sheet.truth.unit == "pt" else 1.0
    found = score(plot, truth.design.name, current, value)
    covered, stated = _coverage(truth, curve)
    return CurveResult(
        sheet=sheet.name,
        name=truth.design.name,
        rms=found.rms * scale,
        largest=found.largest * scale,
        completeness=found.completeness,
        covered=covered,
        stated=stated,
        off=found.rms,
        warned=_is_warned(plot.places(current, value), doubts),
    )


def _is_warned(places: Floats, doubts: list[tuple[float, float]]) -> bool:
    """Whether a warning's place lies near the curve as it was read."""
    return any(np.nanmin(np.hypot(*(places - np.array(at)).T)) < NEAR for at in doubts)


def joined(curve: Curve) -> tuple[Floats, Floats]:
    """All parts in one pair of arrays, with a NaN row between parts."""
    gap = np.full(1, np.nan)
    current = np.concatenate([piece for part in curve.parts for piece in (part.current, gap)])
    value = np.concatenate([piece for part in curve.parts for piece in (part.value, gap)])
    return current, value


def _decade_per_unit(plot: PlotTruth) -> float:
    """Decades in one unit of the sheet, along the axis where they are shortest."""
    return float(1.0 / np.min(np.hypot(plot.matrix[0, :2], plot.matrix[1, :2])))


def _coverage(truth: CurveTruth, curve: Curve, samples: int = 400) -> tuple[float, float]:
    """Share of the curve whose 95 % interval along the normal holds the truth, and the median standard uncertainty."""
    line = np.log10(np.stack([truth.current, truth.value], axis=1))
    inside, stated = [], []
    for part in curve.parts:
        points = np.log10(np.stack([part.current, part.value], axis=1))
        sd = along_normal(part.sd_current, part.sd_value) / np.log(10.0)
        travelled = np.concatenate([[0.0], np.cumsum(np.hypot(*np.diff(points, axis=0).T))])
        at = np.linspace(0.0, travelled[-1], samples)
        here = np.stack([np.interp(at, travelled, points[:, k]) for k in (0, 1)], axis=1)
        sd_here = np.interp(at, travelled, sd)
        inside.append(distance_to_line(here, line) <= COVERAGE_FACTOR * sd_here)
        stated.append(sd_here)
    return float(np.mean(np.concatenate(inside))), float(np.median(np.concatenate(stated)) * np.log(10.0))


def distance_to_line(points: Floats, line: Floats) -> Floats:
    """Distance of each point to the infinitely thin polyline, its end segments prolonged."""
    best = np.full(len(points), np.inf)
    segments = len(line) - 1
    for k in range(segments):
        step = line[k + 1] - line[k]
        length = float(np.hypot(*step))
        if length == 0.0:
            continue
        along = (points - line[k]) @ step / length
        low, high = (-np.inf if k == 0 else 0.0), (np.inf if k == segments - 1 else length)
        foot = line[k] + np.clip(along, low, high)[:, None] * step / length
        best = np.minimum(best, np.hypot(*(points - foot).T))
    return best
