"""One line of lettering as a strip of contrast, turned level and brought to one height of capitals."""

from dataclasses import dataclass
from typing import Literal

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.ink import Ink
from curvelab.lettering.lines import TextLine

CAPITAL_PX = 24.0
"""Height of capitals in a strip."""

MARGIN_PX = 3
TALL_SHARE = 0.75
"""Pieces at least this share of the tallest stand from baseline to the height of capitals."""

LARGEST_SLOPE = 0.12
MOST_PX = 6000
"""Longest strip, in its own pixels: a line of more than 200 characters is none."""

FullTurn = Literal[0, 90, 270]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Strip:
    """A line turned level.

    ``contrast`` is 0 to 1, shape (rows, columns); the baseline runs at row ``baseline + slope * column``; one pixel of
    the strip is ``1 / scale`` pixels of the page; ``origin`` is the page pixel of the crop's upper left corner and
    ``size`` the crop's (columns, rows) on the page.
    """

    contrast: NDArray[np.float32]
    baseline: float
    slope: float
    scale: float
    origin: tuple[int, int]
    size: tuple[int, int]
    turned_deg: FullTurn

    def page_box(self, box: tuple[float, float, float, float]) -> tuple[float, float, float, float]:
        """A box (x0, y0, x1, y1) of the strip, in pixels of the page; edges, not centres, are whole."""
        x0, y0, x1, y1 = (edge / self.scale for edge in box)
        columns, rows = self.size
        left, top = self.origin
        if self.turned_deg == 90:  # the page was turned clockwise: strip x runs up the page
            return left + y0, top + rows - x1, left + y1, top + rows - x0
        if self.turned_deg == 270:
            return left + columns - y1, top + x0, left + columns - y0, top + x1
        return left + x0, top + y0, left + x1, top + y1


def strip_of(ink: Ink, line: TextLine, turned_deg: FullTurn) -> Strip | None:
    """The strip of a line read in a direction; None where it is too long or too flat to be one."""
    rows, columns = ink.contrast.shape
    x0, y0, x1, y1 = line.box
    left, top = max(0, x0 - MARGIN_PX), max(0, y0 - MARGIN_PX)
    right, bottom = min(columns, x1 + MARGIN_PX), min(rows, y1 + MARGIN_PX)
    contrast = ink.contrast[top:bottom, left:right]
    own = cv2.dilate(ink.mask[top:bottom, left:right], np.ones((3, 3), dtype=np.uint8))
    levels = np.where(own, contrast, 0).astype(np.float32)
    boxes = line.boxes - np.array([left, top, left, top])
    size = (right - left, bottom - top)
    levels, boxes = _turned(levels, boxes, turned_deg)
    capital, baseline, slope = _rules(boxes)
    scale = CAPITAL_PX / capital
    width, height = round(levels.shape[1] * scale), round(levels.shape[0] * scale)
    if not 1 <= width <= MOST_PX or not 1 <= height <= 8 * CAPITAL_PX:
        return None
    how = cv2.INTER_CUBIC if scale > 1 else cv2.INTER_AREA
    resized = cv2.resize(levels, (width, height), interpolation=how)
    full = float(np.quantile(levels[levels > 0], 0.93)) if levels.any() else 0.0
    if full <= 0:
        return None
    return Strip(
        contrast=np.clip(resized / full, 0.0, 1.0).astype(np.float32),
        baseline=baseline * scale,
        slope=slope,
        scale=scale,
        origin=(left, top),
        size=size,
        turned_deg=turned_deg,
    )


def _turned(
    levels: NDArray[np.float32], boxes: NDArray[np.int64], turned_deg: FullTurn
) -> tuple[NDArray[np.float32], NDArray[np.int64]]:
    rows, columns = levels.shape
    x0, y0, x1, y1 = boxes.T
    if turned_deg == 90:
        return np.rot90(levels, -1).copy(), np.column_stack([rows - y1, x0, rows - y0, x1])
    if turned_deg == 270:
        return np.rot90(levels, 1).copy(), np.column_stack([y0, columns - x1, y1, columns - x0])
    return levels, boxes


def _rules(boxes: NDArray[np.int64]) -> tuple[float, float, float]:
    """Height of capitals, baseline at column 0 and its slope, from the tall pieces of a line."""
    heights = (boxes[:, 3] - boxes[:, 1]).astype(float)
    tall = heights >= TALL_SHARE * heights.max()
    capital = float(np.median(heights[tall]))
    middles = (boxes[tall, 0] + boxes[tall, 2]) / 2.0
    bottoms = boxes[tall, 3].astype(float)
    slope = 0.0
    if tall.sum() >= 3 and np.ptp(middles) > 3 * capital:
        across, up = np.subtract.outer(middles, middles), np.subtract.outer(bottoms, bottoms)
        apart = across > capital
        slope = float(np.clip(np.median(up[apart] / across[apart]), -LARGEST_SLOPE, LARGEST_SLOPE))
    return max(capital, 1.0), float(np.median(bottoms - slope * middles)), slope
