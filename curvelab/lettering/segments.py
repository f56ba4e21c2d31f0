"""A strip cut into atoms, and the runs of atoms that may be one character each."""

from dataclasses import dataclass
from itertools import pairwise

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.lettering.strip import CAPITAL_PX, Strip

INK = 0.46
LEAST_AREA = 5
WIDE = 0.62 * CAPITAL_PX
"""Pieces wider than this may be touching characters and are offered for cutting."""

CUT_APART = 0.16 * CAPITAL_PX
THINNER = 0.2
LOWER = 0.07 * CAPITAL_PX
NEAR = round(0.5 * CAPITAL_PX)
"""Characters may touch where a column has less ink (share of the mean) or its ink is less high (px) than near by."""

MOST_ATOMS = 6
"""A character is never cut into more."""

BROKEN_GAP = 0.14 * CAPITAL_PX
WIDEST = 1.8 * CAPITAL_PX
JOINED_WIDEST = 1.25 * CAPITAL_PX
"""Parts of one broken character lie closer than BROKEN_GAP and are no wider than this together."""

RASTER = 20
FEATURES = RASTER * RASTER + 6


@dataclass(frozen=True, kw_only=True, slots=True)
class Segment:
    """Atoms ``first`` to before ``last`` taken as one character, with their ink's box (x0, y0, x1, y1) in the strip."""

    first: int
    last: int
    box: tuple[int, int, int, int]


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Cutting:
    """A strip's atoms in reading order and every run that may be a character; ``features`` has a row for each."""

    strip: Strip
    atoms: int
    segments: tuple[Segment, ...]
    features: NDArray[np.float32]


@dataclass(frozen=True, kw_only=True, slots=True)
class _Atom:
    unit: int
    x0: int
    x1: int


def cut(strip: Strip) -> Cutting:
    """Atoms of a strip and the features of every run of them that may be one character."""
    units, boxes = _units(strip.contrast)
    atoms = [atom for unit, box in enumerate(boxes) for atom in _atoms(strip.contrast, units, unit, box)]
    segments: list[Segment] = []
    rows: list[NDArray[np.float32]] = []
    for first in range(len(atoms)):
        for last in range(first + 1, min(first + MOST_ATOMS, len(atoms)) + 1):
            if not _may_be_one(atoms, first, last):
                break
            found = _character(strip, units, atoms[first:last])
            if found is not None:
                segments.append(Segment(first=first, last=last, box=found[0]))
                rows.append(found[1])
    features = np.vstack(rows) if rows else np.zeros((0, FEATURES), dtype=np.float32)
    return Cutting(strip=strip, atoms=len(atoms), segments=tuple(segments), features=features)


def _units(contrast: NDArray[np.float32]) -> tuple[NDArray[np.int32], list[tuple[int, int, int, int]]]:
    """Connected pieces, those above one another taken together: each pixel's unit (-1 for none) and their boxes."""
    _, labels, stats, _ = cv2.connectedComponentsWithStats((contrast >= INK).astype(np.uint8), connectivity=8)
    pieces = [
        (int(x), int(y), int(x + w), int(y + h), label)
        for label, (x, y, w, h, area) in enumerate(stats[1:].tolist(), start=1)
        if area >= LEAST_AREA and not (w > 2.2 * CAPITAL_PX and h < 0.25 * CAPITAL_PX)
    ]
    unit_of = np.full(len(stats), -1, dtype=np.int32)
    boxes: list[tuple[int, int, int, int]] = []
    for x0, y0, x1, y1, label in sorted(pieces):
        if boxes and _above(boxes[-1], (x0, x1)):
            last = boxes[-1]
            boxes[-1] = (min(last[0], x0), min(last[1], y0), max(last[2], x1), max(last[3], y1))
        else:
            boxes.append((x0, y0, x1, y1))
        unit_of[label] = len(boxes) - 1
    units: NDArray[np.int32] = unit_of[labels]
    return units, boxes


def _above(box: tuple[int, int, int, int], span: tuple[int, int]) -> bool:
    shared = min(box[2], span[1]) - max(box[0], span[0])
    return shared > 0.5 * min(box[2] - box[0], span[1] - span[0])


def _atoms(
    contrast: NDArray[np.float32], units: NDArray[np.int32], unit: int, box: tuple[int, int, int, int]
) -> list[_Atom]:
    """A unit cut where its ink is thin or notched, if it is wide enough for two characters."""
    x0, y0, x1, y1 = box
    if x1 - x0 <= WIDE:
        return [_Atom(unit=unit, x0=x0, x1=x1)]
    mine = units[y0:y1, x0:x1] == unit
    ink = np.where(mine, contrast[y0:y1, x0:x1], 0.0).sum(axis=0)
    extent = y1 - y0 - np.argmax(mine, axis=0) - np.argmax(mine[::-1], axis=0)
    thin = _minima(ink, THINNER * float(ink.mean()))
    low = _minima(extent.astype(np.float64), LOWER)
    cuts: list[int] = []
    for column, _ in sorted(thin + low, key=lambda one: -one[1]):
        if all(abs(column - other) >= CUT_APART for other in (*cuts, 0, x1 - x0)):
            cuts.append(column)
    edges = [x0, *(x0 + column for column in sorted(cuts)), x1]
    return [_Atom(unit=unit, x0=start, x1=end) for start, end in pairwise(edges)]


def _minima(profile: NDArray[np.float64], least: float) -> list[tuple[int, float]]:
    """Columns where a profile is lower than somewhere near on both sides, and by how many times the least depth."""
    smooth = np.convolve(np.pad(profile, 1, mode="edge"), np.ones(3) / 3, mode="valid")
    found = []
    for column in np.flatnonzero((smooth[1:-1] <= smooth[:-2]) & (smooth[1:-1] <= smooth[2:])) + 1:
        left = smooth[max(0, column - NEAR) : column].max()
        right = smooth[column + 1 : column + 1 + NEAR].max()
        depth = float((min(left, right) - smooth[column]) / least)
        if depth >= 1.0:
            found.append((int(column), depth))
    return found


def _may_be_one(atoms: list[_Atom], first: int, last: int) -> bool:
    """Whether the atoms may be one character: of one unit, or parts of a broken one close together."""
    if last - first == 1:
        return True
    width = atoms[last - 1].x1 - atoms[first].x0
    if atoms[first].unit == atoms[last - 1].unit:
        return width <= WIDEST
    return atoms[last - 1].x0 - atoms[last - 2].x1 < BROKEN_GAP and width <= JOINED_WIDEST


def _character(
    strip: Strip, units: NDArray[np.int32], atoms: list[_Atom]
) -> tuple[tuple[int, int, int, int], NDArray[np.float32]] | None:
    """The ink's box and features of atoms taken together."""
    x0, x1 = atoms[0].x0, atoms[-1].x1
    low, high = atoms[0].unit, atoms[-1].unit
    part = units[:, x0:x1]
    own = (part >= low) & (part <= high)
    rows, columns = np.flatnonzero(own.any(axis=1)), np.flatnonzero(own.any(axis=0))
    if not len(rows):
        return None
    y0, y1 = int(rows[0]), int(rows[-1]) + 1
    x0, x1 = x0 + int(columns[0]), x0 + int(columns[-1]) + 1
    part = units[y0:y1, x0:x1]
    level = np.where((part >= low) & (part <= high) | (part < 0), strip.contrast[y0:y1, x0:x1], 0.0)
    box = (x0, y0, x1, y1)
    return box, np.concatenate([_raster(level), _shape(strip, box, level)])


def _raster(level: NDArray[np.float32]) -> NDArray[np.float32]:
    """The ink fitted into a square raster, its proportions kept."""
    height, width = level.shape
    scale = RASTER / max(height, width)
    size = (max(1, round(width * scale)), max(1, round(height * scale)))
    small = cv2.resize(level.astype(np.float32), size, interpolation=cv2.INTER_AREA)
    raster = np.zeros((RASTER, RASTER), dtype=np.float32)
    top, left = (RASTER - size[1]) // 2, (RASTER - size[0]) // 2
    raster[top : top + size[1], left : left + size[0]] = small
    return raster.ravel()


def _shape(strip: Strip, box: tuple[int, int, int, int], level: NDArray[np.float32]) -> NDArray[np.float32]:
    """Height, width, top and bottom relative to capitals, blackness and proportions."""
    x0, y0, x1, y1 = box
    base = strip.baseline + strip.slope * (x0 + x1) / 2
    height, width = (y1 - y0) / CAPITAL_PX, (x1 - x0) / CAPITAL_PX
    top, bottom = (base - y0) / CAPITAL_PX, (base - y1) / CAPITAL_PX
    shape = [height, width, top, bottom, float(level.mean()), np.log(width / height)]
    return 2.0 * np.array(shape, dtype=np.float32)
