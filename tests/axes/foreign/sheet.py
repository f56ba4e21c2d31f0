"""Random foreign sheets of every class as files, with the truth in their places."""

import io
from dataclasses import dataclass, replace

import cv2
import numpy as np
from numpy.typing import NDArray
from PIL import Image

from demo_curves.drawing.design import AxisDesign
from demo_curves.drawing.placemap import SAME_PLACE, Photo, PlaceMap, keystone, scan_skew
from demo_curves.drawing.truth import PlotTruth
from tests.axes.foreign.draw import RENDERERS, pdf_file, svg_file
from tests.axes.foreign.page import ForeignPage, random_page
from tests.axes.foreign.wording import Along

CLASSES = ("vector", "clean", "grey", "bilevel", "photo", "coarse")
"""Vector files; pixels as drawn; grey, 1-bit and photographed pages; pages of 75 to 100 dpi."""

FINE = 2
COARSEST, COARSE = 75.0, 100.0
DESIGNED = 200.0


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class ForeignSheet:
    """A file and the truth of its plot."""

    name: str
    data: bytes
    plot: PlotTruth


def foreign_sheet(seed: int, quality: str) -> ForeignSheet:
    """A random sheet of a class."""
    rng = np.random.default_rng([seed, CLASSES.index(quality)])
    page = random_page(rng)
    if quality == "vector":
        kind = ("pdf", "svg")[seed % 2]
        data = pdf_file(page) if kind == "pdf" else svg_file(page)
        return ForeignSheet(name=f"foreign-{seed}.{kind}", data=data, plot=_truth(page, page.matrix(), SAME_PLACE))
    renderer = sorted(RENDERERS)[seed % len(RENDERERS)]
    if quality == "clean":
        pixels = RENDERERS[renderer](page, 1)
        return _image(f"foreign-{seed}-{renderer}", pixels, _truth(page, _centred(page.matrix()), SAME_PLACE), "png")
    fine = cv2.cvtColor(RENDERERS[renderer](page, FINE), cv2.COLOR_RGB2GRAY)
    size, matrix = page.size, page.matrix()
    if quality == "coarse":
        share = float(rng.uniform(COARSEST, COARSE)) / DESIGNED
        size = (round(size[0] * share), round(size[1] * share))
        scale = np.array([size[0] / page.size[0], size[1] / page.size[1]])
        fine = cv2.resize(fine, (size[0] * FINE, size[1] * FINE), interpolation=cv2.INTER_AREA)
        matrix = matrix * scale[:, None]
        page = replace(page, frame=tuple(np.array(page.frame) * np.tile(scale, 2)))
    place_map = _photo(rng, size) if quality == "photo" else scan_skew(size, float(rng.uniform(-1.5, 1.5)), (1.0, 1.0))
    if quality == "coarse" and rng.random() < 0.5:
        place_map = SAME_PLACE
    grey = _scanned(np.asarray(fine), size, place_map, rng)
    if quality == "bilevel":
        grey = np.where(grey < rng.uniform(150, 190), 0, 255).astype(np.uint8)
    kind = {"bilevel": "tif", "photo": "jpg"}.get(quality, str(rng.choice(["jpg", "png"])))
    return _image(f"foreign-{seed}-{renderer}", grey, _truth(page, _centred(matrix), place_map), kind)


def _photo(rng: np.random.Generator, size: tuple[int, int]) -> PlaceMap:
    lean = (float(rng.uniform(-0.04, 0.04)), float(rng.uniform(-0.04, 0.04)))
    return Photo(
        matrix=keystone(size, float(rng.uniform(-2, 2)), lean),
        curl=(float(rng.uniform(-0.004, 0.004)) * size[1], float(rng.uniform(-0.004, 0.004)) * size[0]),
        phase=(float(rng.uniform(0, np.pi)), float(rng.uniform(0, np.pi))),
        size_px=size,
    )


def _scanned(
    fine: NDArray[np.uint8], size: tuple[int, int], place_map: PlaceMap, rng: np.random.Generator
) -> NDArray[np.uint8]:
    """The page moved by a map at twice its resolution, averaged down, blurred, unevenly lit and noisy."""
    width, height = size
    across, down = np.meshgrid(
        (np.arange(width * FINE) + 0.5) / FINE - 0.5, (np.arange(height * FINE) + 0.5) / FINE - 0.5
    )
    source = (place_map.inverse(np.column_stack([across.ravel(), down.ravel()])) + 0.5) * FINE - 0.5
    source = source.reshape(height * FINE, width * FINE, 2).astype(np.float32)
    moved = cv2.remap(fine, source[:, :, 0], source[:, :, 1], cv2.INTER_LINEAR, borderValue=255)
    moved = cv2.GaussianBlur(moved.astype(np.float32), (0, 0), FINE * float(rng.uniform(0.4, 0.9)))
    small = np.asarray(cv2.resize(moved, (width, height), interpolation=cv2.INTER_AREA))
    paper, ink = rng.uniform(225, 250), rng.uniform(10, 60)
    light = 1.0 - rng.uniform(0.0, 0.15) * np.linspace(0, 1, width)[None, :] * np.linspace(1, 0.4, height)[:, None]
    levels = (ink + (paper - ink) * small / 255.0) * light + rng.normal(0.0, rng.uniform(1.0, 6.0), small.shape)
    return np.clip(np.rint(levels), 0, 255).astype(np.uint8)


def _image(name: str, pixels: NDArray[np.uint8], plot: PlotTruth, kind: str) -> ForeignSheet:
    target = io.BytesIO()
    image = Image.fromarray(pixels)
    if kind == "jpg":
        image.save(target, "JPEG", quality=88)
    elif kind == "tif":
        image.convert("1", dither=Image.Dither.NONE).save(target, "TIFF", compression="group4")
    else:
        image.save(target, "PNG")
    return ForeignSheet(name=f"{name}.{kind}", data=target.getvalue(), plot=plot)


def _centred(matrix: NDArray[np.float64]) -> NDArray[np.float64]:
    """The map to places whose whole numbers are pixel centres, from one whose whole numbers are their corners."""
    moved = matrix.copy()
    moved[:, 2] -= 0.5
    return moved


def _truth(page: ForeignPage, matrix: NDArray[np.float64], place_map: PlaceMap) -> PlotTruth:
    return PlotTruth(
        matrix=matrix,
        frame=page.frame,
        current=_design("current", page.current),
        value=_design("time", page.time),
        current_direction="x",
        current_lines=(),
        value_lines=(),
        curves=(),
        place_map=place_map,
    )


def _design(quantity: str, axis: Along) -> AxisDesign:
    return AxisDesign(
        quantity=quantity, unit=axis.unit, low=axis.low, high=axis.high, label=axis.title, factor=axis.factor
    )
