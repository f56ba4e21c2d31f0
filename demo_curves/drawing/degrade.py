"""What printing and scanning does to a page, with the exact place of everything kept."""

from dataclasses import dataclass

import cv2
import numpy as np
from numpy.typing import NDArray

from demo_curves.drawing.design import Page
from demo_curves.drawing.layout import DrawnPage
from demo_curves.drawing.placemap import PlaceMap, scan_skew
from demo_curves.drawing.render import Pixels, enlarged, grey, raster
from demo_curves.drawing.truth import SheetTruth


@dataclass(frozen=True, kw_only=True, slots=True)
class Scan:
    """One pass over a scanner's glass. Grey levels 0 to 255; lengths in pixels of the scan."""

    angle_deg: float = 0.8
    stretch: tuple[float, float] = (1.0, 1.0)  # across and down
    blur_px: float = 0.7  # standard deviation of the optics
    noise: float = 4.0  # standard deviation in grey levels
    paper: float = 238.0
    ink: float = 35.0
    light: float = 0.08  # share by which the light falls off over the page
    seed: int = 0
    renderer: str = "agg"


def scanned(drawn: DrawnPage, page: Page, scan: Scan) -> tuple[Pixels, SheetTruth]:
    """Grey pixels (height, width) of the scanned page, and the truth in their places."""
    return seen_through(drawn, page, scan_skew((page.width_px, page.height_px), scan.angle_deg, scan.stretch), scan)


def seen_through(drawn: DrawnPage, page: Page, place_map: PlaceMap, scan: Scan) -> tuple[Pixels, SheetTruth]:
    """The page moved by any map, with the light, noise and blur of a scan, and the truth in its places."""
    flat = scanner_image(drawn, page, place_map, scan)
    truth = drawn.truth.to_pixels(page.dpi).mapped(place_map, page.width_px, page.height_px, page.dpi)
    return _exposed(flat, scan), truth


def scanner_image(drawn: DrawnPage, page: Page, place_map: PlaceMap, scan: Scan) -> NDArray[np.float32]:
    """The page moved by a map and blurred, grey levels as drawn.

    Drawn and moved at a multiple of the resolution, then averaged down: interpolation then leaves no bias worth
    mentioning in the places of lines.
    """
    times = 2 if page.dpi >= 200 else 3
    fine = grey(raster(drawn, enlarged(page, times), scan.renderer))
    moved = _moved(fine, place_map, times)
    if scan.blur_px > 0:
        moved = cv2.GaussianBlur(moved, (0, 0), scan.blur_px * times)
    return np.asarray(cv2.resize(moved, (page.width_px, page.height_px), interpolation=cv2.INTER_AREA))


def _moved(fine: Pixels, place_map: PlaceMap, times: int) -> NDArray[np.float32]:
    """Every fine pixel fetched from where the map says it came from."""
    height, width = fine.shape
    moved = np.empty((height, width), dtype=np.float32)
    columns = (np.arange(width) + 0.5) / times - 0.5
    for first in range(0, height, 256):
        rows = (np.arange(first, min(first + 256, height)) + 0.5) / times - 0.5
        across, down = np.meshgrid(columns, rows)
        source = (place_map.inverse(np.column_stack([across.ravel(), down.ravel()])) + 0.5) * times - 0.5
        source = source.reshape(len(rows), width, 2).astype(np.float32)
        moved[first : first + len(rows)] = cv2.remap(
            fine, source[:, :, 0], source[:, :, 1], cv2.INTER_LINEAR, borderMode=cv2.BORDER_CONSTANT, borderValue=255
        )
    return moved


def _exposed(flat: NDArray[np.float32], scan: Scan) -> Pixels:
    """Paper and ink levels, uneven light and noise."""
    rng = np.random.default_rng(scan.seed)
    levels = scan.ink + (scan.paper - scan.ink) * flat / 255.0
    height, width = levels.shape
    across, down = np.meshgrid(np.linspace(-1, 1, width), np.linspace(-1, 1, height))
    tilt = rng.uniform(-1, 1, size=3)
    field = 1.0 - scan.light * (0.5 + 0.25 * (tilt[0] * across + tilt[1] * down + tilt[2] * (across**2 - down**2)))
    noisy = levels * field + rng.normal(0.0, scan.noise, size=levels.shape)
    return np.clip(np.rint(noisy), 0, 255).astype(np.uint8)


def bilevel(pixels: Pixels, level: float) -> Pixels:
    """Black (0) where darker than the level, else white (255)."""
    return np.where(pixels < level, 0, 255).astype(np.uint8)
