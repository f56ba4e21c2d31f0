"""What is printed on a plot beside curves and grid: framed boxes with words in them, and words."""

import cv2
import numpy as np

from curvelab.records.arrays import Floats
from curvelab.records.sheet import Word
from curvelab.trace.prepared import Raster
from curvelab.trace.thinning import Mask

SMALLEST_BOX = 20
"""px: shorter side of a framed box."""
LARGEST_BOX = 0.35
"""Share of the plot."""
RECTANGULAR = 0.93
"""Least share of its own bounding rectangle that a box fills."""
RIM = 5
"""px: a box's own stroke lies within this of its inside."""
SURE_WORD = 0.5
"""Confidence from which what looks like a word is one."""


def furniture(raster: Raster, words: tuple[Word, ...]) -> Mask:
    """Pixels of framed boxes that hold something, with their frames, and of words."""
    mask = np.zeros(raster.skeleton.shape, dtype=np.uint8)
    for corners in _boxes(raster):
        cv2.fillConvexPoly(mask, corners, 1)
    kernel = np.ones((2 * RIM + 1, 2 * RIM + 1), dtype=np.uint8)
    mask = np.asarray(cv2.dilate(mask, kernel), dtype=np.uint8)
    for word in words:
        if is_word(word):
            low, high = _pixel_box(raster, word)
            mask[low[1] : high[1], low[0] : high[0]] = 1
    return mask.astype(bool)


def is_word(word: Word) -> bool:
    """Whether it surely is text, and not a piece of a line that looks like a character."""
    return word.confidence >= SURE_WORD and sum(letter.isalnum() for letter in word.text) >= 2


def _boxes(raster: Raster) -> list[Floats]:
    """Corners of every rectangle enclosed by strokes that has further strokes inside."""
    strokes = cv2.dilate(raster.skeleton.astype(np.uint8), np.ones((5, 5), dtype=np.uint8))
    empty = ((strokes == 0) & raster.inside).astype(np.uint8)
    count, labels, stats, _ = cv2.connectedComponentsWithStats(empty, connectivity=4)
    largest = LARGEST_BOX * float(raster.inside.sum())
    found = []
    for number in range(1, count):
        left, top, width, height, area = (int(value) for value in stats[number])
        if min(width, height) < SMALLEST_BOX or area > largest:
            continue
        part = (labels[top : top + height, left : left + width] == number).astype(np.uint8)
        outline = max(cv2.findContours(part, cv2.RETR_EXTERNAL, cv2.CHAIN_APPROX_SIMPLE)[0], key=cv2.contourArea)
        rectangle = cv2.minAreaRect(outline)
        if min(rectangle[1]) < SMALLEST_BOX or cv2.contourArea(outline) < RECTANGULAR * np.prod(rectangle[1]):
            continue
        filled = np.zeros_like(part)
        cv2.drawContours(filled, [outline], -1, 1, cv2.FILLED)
        held = raster.skeleton[top : top + height, left : left + width] & (filled > 0) & (part == 0)
        if held.any():
            found.append(np.round(cv2.boxPoints(rectangle) + np.array([left, top])).astype(np.int32))
    return found


def _pixel_box(raster: Raster, word: Word) -> tuple[list[int], list[int]]:
    x0, y0, x1, y1 = word.box
    corners = raster.pixels.columns_rows(np.array([[x0, y0], [x1, y0], [x0, y1], [x1, y1]])) - raster.ink.origin
    low, high = np.floor(corners.min(axis=0)), np.ceil(corners.max(axis=0)) + 1
    return np.clip(low, 0, None).astype(int).tolist(), np.clip(high, 0, None).astype(int).tolist()
