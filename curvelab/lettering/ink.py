"""Where on a page there is ink that may be lettering: dark pieces of a character's size, without long lines."""

from dataclasses import dataclass

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.records.arrays import Bytes

PAPER_CELL = 8
"""The paper's level is taken as the brightest of cells of this many pixels, some cells around."""

INK_SHARE = 0.38
"""Ink is darker than this share of the page's full contrast: less for thin, blurred strokes than for solid ones."""

GLYPH_PX = 110
"""No character is larger: capitals up to 60 px, with brackets and touching neighbours."""

LINE_PX = 30
"""A straight run of ink this long inside a larger piece is a line, not a stroke of a character."""

TICK_RATIO = 3.0
"""Length by width from which on a piece that stands on a line is a tick, not a character."""

Boxes = NDArray[np.int64]
"""Rows of (x0, y0, x1, y1), the end exclusive, in pixels."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Ink:
    """A page's ink.

    ``contrast`` is 0 for paper, 255 as dark as can be; ``mask`` marks pieces of a character's size, whose ``boxes`` are
    given; ``level_lines`` and ``upright_lines`` mark long straight lines.
    """

    contrast: Bytes
    mask: Bytes
    boxes: Boxes
    level_lines: Bytes
    upright_lines: Bytes


def contrast_of(grey: Bytes) -> Bytes:
    """Darkness relative to the paper around, 0 to 255; uneven light is taken out."""
    rows, columns = grey.shape
    size = (max(1, columns // PAPER_CELL), max(1, rows // PAPER_CELL))
    cells = cv2.resize(grey, size, interpolation=cv2.INTER_AREA)
    cells = cv2.dilate(cells, np.ones((9, 9), dtype=np.uint8))
    cells = cv2.blur(cells, (9, 9))
    paper = cv2.resize(cells, (columns, rows), interpolation=cv2.INTER_LINEAR)
    contrast: Bytes = cv2.divide(cv2.subtract(paper, grey), paper, scale=255.0).astype(np.uint8, copy=False)
    return contrast


def find_ink(grey: Bytes) -> Ink:
    """Pieces of ink that may be characters or parts of them.

    Parameters
    ----------
    grey : array, shape (rows, columns), uint8
    """
    contrast = contrast_of(grey)
    dark = (contrast >= ink_level(contrast)).astype(np.uint8)
    mask, boxes, large = _pieces(dark)
    level, upright = _lines(large)
    more, more_boxes, _ = _pieces(large & ~level & ~upright & ~_ticks(large, level, upright))
    return Ink(
        contrast=contrast,
        mask=mask | more,
        boxes=np.vstack([boxes, more_boxes]),
        level_lines=level,
        upright_lines=upright,
    )


def ink_level(contrast: Bytes) -> int:
    """The contrast from which a pixel counts as ink."""
    counts = np.bincount(contrast[::2, ::2].ravel(), minlength=256)
    inked = counts.copy()
    inked[:40] = 0
    if not inked.any():
        return 255
    full = int(np.searchsorted(np.cumsum(inked), 0.9 * inked.sum()))
    return max(40, round(INK_SHARE * full))


def _pieces(dark: Bytes) -> tuple[Bytes, Boxes, Bytes]:
    """Ink of a character's size, its boxes, and the ink of everything larger."""
    _, labels, stats, _ = cv2.connectedComponentsWithStats(dark, connectivity=8, ltype=cv2.CV_32S)
    widths, heights = stats[:, cv2.CC_STAT_WIDTH], stats[:, cv2.CC_STAT_HEIGHT]
    small = (widths <= GLYPH_PX) & (heights <= GLYPH_PX)
    small[0] = False
    kept = small.astype(np.uint8)[labels] if len(stats) > 1 else np.zeros_like(dark)
    chosen = stats[small].astype(np.int64)
    corners = chosen[:, [cv2.CC_STAT_LEFT, cv2.CC_STAT_TOP]]
    sizes = chosen[:, [cv2.CC_STAT_WIDTH, cv2.CC_STAT_HEIGHT]]
    return kept, np.hstack([corners, corners + sizes]), dark & ~kept


def _ticks(large: Bytes, level: Bytes, upright: Bytes) -> Bytes:
    """Short straight pieces that stand across a line."""
    left = large & ~level & ~upright
    _, labels, stats, _ = cv2.connectedComponentsWithStats(left, connectivity=8, ltype=cv2.CV_32S)
    x, y, width, height = (stats[:, column] for column in range(4))
    rows, columns = large.shape
    above, below = np.maximum(y - 2, 0), np.minimum(y + height + 1, rows - 1)
    before, after = np.maximum(x - 2, 0), np.minimum(x + width + 1, columns - 1)
    across, down = x + width // 2, y + height // 2
    upwards = (height >= TICK_RATIO * width) & ((level[above, across] > 0) | (level[below, across] > 0))
    sideways = (width >= TICK_RATIO * height) & ((upright[down, before] > 0) | (upright[down, after] > 0))
    ticks = (upwards | sideways).astype(np.uint8)
    ticks[0] = 0
    found: Bytes = ticks[labels]
    return found


def _lines(large: Bytes) -> tuple[Bytes, Bytes]:
    """Level and upright runs of large pieces of ink, a pixel wider than printed."""
    level = cv2.morphologyEx(large, cv2.MORPH_OPEN, np.ones((1, LINE_PX), dtype=np.uint8))
    upright = cv2.morphologyEx(large, cv2.MORPH_OPEN, np.ones((LINE_PX, 1), dtype=np.uint8))
    wider, taller = np.ones((1, 3), dtype=np.uint8), np.ones((3, 1), dtype=np.uint8)
    return cv2.dilate(level, taller).astype(np.uint8), cv2.dilate(upright, wider).astype(np.uint8)
