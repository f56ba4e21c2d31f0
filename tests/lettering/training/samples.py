"""Segments of drawn pages with the character each of them is."""

from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.ink import find_ink
from curvelab.lettering.network import CLASSES
from curvelab.lettering.page import cut_ways
from curvelab.lettering.segments import Cutting
from tests.lettering.training.drawn import Page, page

NONE = len(CLASSES)
UNSURE = -1


def samples(seed: int, faces: list[Path], pages: int) -> tuple[NDArray[np.float16], NDArray[np.int16]]:
    """Features and classes of segments from a number of pages in random faces."""
    rng = np.random.default_rng(seed)
    features, classes = [], []
    for _ in range(pages):
        drawn = page(rng, faces[rng.integers(len(faces))])
        for ways in cut_ways(find_ink(drawn.grey)):
            if len(ways) != 1 or not ways[0].segments:
                continue
            found = segment_classes(ways[0], drawn)
            sure = found != UNSURE
            features.append(ways[0].features[sure].astype(np.float16))
            classes.append(found[sure])
    return _with_fewer_none(np.vstack(features), np.concatenate(classes), rng)


def _with_fewer_none(
    features: NDArray[np.float16], classes: NDArray[np.int16], rng: np.random.Generator
) -> tuple[NDArray[np.float16], NDArray[np.int16]]:
    """At most one sample in five is no character."""
    none = np.flatnonzero(classes == NONE)
    spare = len(none) - (len(classes) - len(none)) // 4
    kept = np.ones(len(classes), dtype=bool)
    if spare > 0:
        kept[rng.choice(none, spare, replace=False)] = False
    return features[kept], classes[kept]


def segment_classes(cutting: Cutting, drawn: Page) -> NDArray[np.int16]:
    """The class of each segment: a character it covers exactly, none, or unsure."""
    every = [character for label in drawn.labels for character in label.characters]
    boxes = np.array([box for _, box in every])
    found = np.full(len(cutting.segments), UNSURE, dtype=np.int16)
    for number, segment in enumerate(cutting.segments):
        found[number] = _class_of(cutting.strip.page_box(segment.box), boxes, every, drawn.capital_px)
    return found


def _class_of(
    box: tuple[float, float, float, float],
    boxes: NDArray[np.float64],
    every: list[tuple[str, tuple[float, float, float, float]]],
    capital: float,
) -> int:
    x0, y0, x1, y1 = box
    width, height = boxes[:, 2] - boxes[:, 0], boxes[:, 3] - boxes[:, 1]
    across = np.minimum(boxes[:, 2], x1) - np.maximum(boxes[:, 0], x0)
    down = np.minimum(boxes[:, 3], y1) - np.maximum(boxes[:, 1], y0)
    touching = (across > 0) & (down > 0)
    if not touching.any():
        return NONE
    slack = max(1.6, 0.16 * capital)
    off = np.abs(boxes - np.array(box)).max(axis=1)
    covered = touching & (across > 0.65 * width) & (down > 0.5 * height)
    fits = np.flatnonzero(touching & (off <= slack))
    if len(fits) >= 1 and covered.sum() <= 1:
        best = int(fits[np.argmin(off[fits])])
        return CLASSES.find(every[best][0]) if every[best][0] in CLASSES and every[best][0] else UNSURE
    if covered.sum() >= 2:
        return NONE
    parts = np.flatnonzero(touching)
    share = (across / np.maximum(width, 1.0))[parts]
    return NONE if share.max() < 0.7 or off[parts].min() > 2.0 * slack else UNSURE
