"""Sheets with known truth, drawn at random from a seed, and how far a reading of them is from it."""

from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from demo_curves.drawing.degrade import Scan, bilevel, scanned, seen_through
from demo_curves.drawing.design import SheetDesign
from demo_curves.drawing.files import image_file
from demo_curves.drawing.geometry import Points, at_length, densified, lengths
from demo_curves.drawing.layout import lay_out
from demo_curves.drawing.placemap import Photo, keystone
from demo_curves.drawing.render import VECTOR, grey, raster
from demo_curves.drawing.truth import PlotTruth, SheetTruth
from demo_curves.drawing.worksheet import Clicks, WorksheetHead, worksheet_text
from tests.drawing.shapes import KINDS, Subject
from tests.drawing.styles import styled
from tests.drawing.worded import WORDINGS, worded

QUALITIES = {
    "clean": ("agg", "resvg", "pdfium"),
    "snapped": ("agg-snapped",),
    "stepped": ("agg-stepped",),
    "grey": ("agg", "resvg", "pdfium"),
    "bilevel": ("agg", "resvg", "pdfium"),
    "photo": ("agg", "resvg", "pdfium"),
    "vector": ("matplotlib-pdf", "reportlab-pdf"),
}
"""Classes of sheet, each with the renderers it is drawn by."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class DrawnSheet:
    """A sheet's file, its truth and a worksheet clicked by an imperfect hand."""

    name: str
    data: bytes
    truth: SheetTruth
    worksheet: str

    def written(self, folder: Path) -> Path:
        """The worksheet's path, after it and the sheet are written to the folder."""
        (folder / self.name).write_bytes(self.data)
        path = (folder / self.name).with_suffix(".toml")
        path.write_text(self.worksheet, encoding="utf-8")
        return path


def random_sheet(seed: int, quality: str = "clean", renderer: str | None = None, kind: str | None = None) -> DrawnSheet:
    """A sheet of a quality (see QUALITIES) and kind of device (see KINDS); what is None follows from the seed."""
    rng = np.random.default_rng(seed)
    kind = kind or sorted(KINDS)[seed % len(KINDS)]
    return _drawn(KINDS[kind](rng), f"{kind}-{seed}", (seed, rng), quality, renderer)


def sheet_of(subject: Subject, seed: int, quality: str = "clean", renderer: str | None = None) -> DrawnSheet:
    """A sheet of given lines; its look follows from the seed."""
    return _drawn(subject, f"subject-{seed}", (seed, np.random.default_rng(seed)), quality, renderer)


def _drawn(
    subject: Subject, stem: str, chance: tuple[int, np.random.Generator], quality: str, renderer: str | None
) -> DrawnSheet:
    design = styled(subject, chance[1], line_art=quality == "bilevel")
    return _printed(design, subject, stem, chance, quality, renderer)


def worded_sheet(seed: int, quality: str = "clean", kind: str | None = None) -> DrawnSheet:
    """A sheet whose words tell what every line is (see WORDINGS)."""
    rng = np.random.default_rng(seed)
    kind = kind or sorted(WORDINGS)[seed % len(WORDINGS)]
    wording = WORDINGS[kind](rng)
    design = worded(wording, rng, line_art=quality == "bilevel")
    return _printed(design, wording.subject, f"{kind}-{seed}", (seed, rng), quality, None)


def _printed(
    design: SheetDesign,
    subject: Subject,
    stem: str,
    chance: tuple[int, np.random.Generator],
    quality: str,
    renderer: str | None,
) -> DrawnSheet:
    seed, rng = chance
    renderers = QUALITIES[quality]
    renderer = renderer or renderers[seed % len(renderers)]
    drawn = lay_out(design)
    truth = drawn.truth
    page = design.page
    if quality == "vector":
        name, data = f"{stem}.{renderer[-3:]}", VECTOR[renderer](drawn.ink, page)
    elif quality in {"clean", "snapped", "stepped"}:
        truth = truth.to_pixels()
        pixels = raster(drawn, page, renderer)
        name, data = f"{stem}.png", image_file(pixels if seed % 3 else grey(pixels), "png", page.dpi)
    elif quality == "photo":
        shot = replace(_random_scan(rng, renderer, "grey"), light=float(rng.uniform(0.1, 0.35)))
        pixels, truth = seen_through(drawn, page, _random_photo(rng, (page.width_px, page.height_px)), shot)
        jpeg = image_file(pixels, "jpg", page.dpi, quality=int(rng.integers(80, 95)))
        name, data = f"{stem}.jpg", jpeg
    else:
        pixels, truth = scanned(drawn, page, _random_scan(rng, renderer, quality))
        name, data = _scan_file(stem, pixels, quality, page.dpi, rng)
    head = WorksheetHead(file=name, document={"title": subject.title, "maker": "Trial"}, devices=subject.devices)
    clicks = Clicks(seed=seed + 1, marks=int(rng.integers(2, 5)), guides=2)
    return DrawnSheet(name=name, data=data, truth=truth, worksheet=worksheet_text(truth, head, clicks))


def _random_photo(rng: np.random.Generator, size_px: tuple[int, int]) -> Photo:
    """A hand-held camera: turned up to 2 degrees, scale falling by up to 4 % to the edges, curl up to 0.4 %."""
    return Photo(
        matrix=keystone(
            size_px, float(rng.uniform(-2, 2)), (float(rng.uniform(-0.04, 0.04)), float(rng.uniform(-0.04, 0.04)))
        ),
        curl=(float(rng.uniform(-0.004, 0.004)) * size_px[1], float(rng.uniform(-0.004, 0.004)) * size_px[0]),
        phase=(float(rng.uniform(0, np.pi)), float(rng.uniform(0, np.pi))),
        size_px=size_px,
    )


def _random_scan(rng: np.random.Generator, renderer: str, quality: str) -> Scan:
    return Scan(
        angle_deg=float(rng.uniform(-2.0, 2.0)),
        stretch=(float(rng.uniform(0.997, 1.003)), float(rng.uniform(0.997, 1.003))),
        blur_px=float(rng.uniform(0.5, 1.1)),
        noise=float(rng.uniform(2.0, 8.0)) if quality == "grey" else float(rng.uniform(2.0, 5.0)),
        paper=float(rng.uniform(225, 248)),
        ink=float(rng.uniform(20, 60)),
        light=float(rng.uniform(0.0, 0.15)),
        seed=int(rng.integers(2**31)),
        renderer=renderer,
    )


def _scan_file(
    stem: str, pixels: NDArray[np.uint8], quality: str, dpi: float, rng: np.random.Generator
) -> tuple[str, bytes]:
    if quality == "bilevel":
        return f"{stem}.tif", image_file(bilevel(pixels, float(rng.uniform(165, 195))), "g4", dpi)
    if rng.integers(2):
        return f"{stem}.jpg", image_file(pixels, "jpg", dpi, quality=int(rng.integers(75, 95)))
    return f"{stem}.tif", image_file(pixels, "tif", dpi)


@dataclass(frozen=True, kw_only=True, slots=True)
class Score:
    """How far a reading is from a printed line, normal to it, in units of the sheet; completeness is a share."""

    rms: float
    p99: float
    largest: float
    completeness: float


def score(plot: PlotTruth, name: str, current: NDArray[np.float64], value: NDArray[np.float64]) -> Score:
    """The reading's canonical values of one line against its truth; NaN rows separate parts of the reading.

    Lengths are in px for image sheets; for vector sheets in points, and two points count as near.
    """
    truth = [curve for curve in plot.curves if curve.design.name == name]
    parts = _parts(plot, current, value)
    if not parts:
        return Score(rms=np.inf, p99=np.inf, largest=np.inf, completeness=0.0)
    away = np.concatenate([_distances(part, [curve.places for curve in truth]) for part in parts])
    seen = np.vstack([densified(run, 0.5) for curve in truth for run in curve.visible_runs()])
    near = cKDTree(np.vstack([densified(part, 0.5) for part in parts])).query(seen)[0] <= 2.0
    return Score(
        rms=float(np.sqrt(np.mean(away**2))),
        p99=float(np.quantile(np.abs(away), 0.99)),
        largest=float(np.max(np.abs(away))),
        completeness=float(np.mean(near)),
    )


def _parts(plot: PlotTruth, current: NDArray[np.float64], value: NDArray[np.float64]) -> list[Points]:
    """Places of each uninterrupted part of a reading, sampled evenly so that no stretch counts more than another."""
    known = np.isfinite(current) & np.isfinite(value)
    breaks = np.flatnonzero(~known)
    parts = []
    for stretch in np.split(np.arange(len(current)), breaks):
        rows = stretch[known[stretch]]
        if len(rows) > 1:
            points = plot.places(current[rows], value[rows])
            total = lengths(points)[-1]
            parts.append(at_length(points, np.linspace(0.0, total, max(2, int(total) + 1))))
    return parts


def _distances(points: Points, lines: list[Points]) -> NDArray[np.float64]:
    """Distance of each point to the nearest segment; up to 2 units past a line's end it is counted along its normal."""
    starts = np.vstack([line[:-1] for line in lines])
    ends = np.vstack([line[1:] for line in lines])
    best = np.full(len(points), np.inf)
    first = np.concatenate([[True] + [False] * (len(line) - 2) for line in lines])
    last = np.concatenate([[False] * (len(line) - 2) + [True] for line in lines])
    for start, end, is_first, is_last in zip(starts, ends, first, last, strict=True):
        length = float(np.hypot(*(end - start)))
        if length == 0.0:
            continue
        along = (points - start) @ (end - start) / length
        low, high = (-2.0 if is_first else 0.0), (length + 2.0 if is_last else length)
        nearest = start + np.clip(along, low, high)[:, None] * (end - start) / length
        best = np.minimum(best, np.hypot(*(points - nearest).T))
    return best
