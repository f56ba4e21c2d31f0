"""Thinning of a mask of strokes to lines one pixel wide, for topology only.

Zhang and Suen's parallel thinning (Comm. ACM 27, 1984) with Lu and Wang's condition of at least three neighbours (Comm.
ACM 29, 1986), without which slanting lines two pixels wide vanish; on the indices of set pixels alone. Then the corner
pixels it leaves in staircases are removed, so that a plain line has two neighbours everywhere.
"""

import numpy as np
from numpy.typing import NDArray

Mask = NDArray[np.bool_]

RING = ((-1, 0), (-1, 1), (0, 1), (1, 1), (1, 0), (1, -1), (0, -1), (-1, -1))
"""The eight neighbours (row, column) clockwise from above."""


def _deletable(first: bool) -> Mask:
    table = np.zeros(256, dtype=bool)
    for code in range(256):
        p = [(code >> k) & 1 for k in range(8)]
        rises = sum(p[k] == 0 and p[(k + 1) % 8] == 1 for k in range(8))
        north, east, south, west = p[0], p[2], p[4], p[6]
        open_sides = (
            (north * east * south == 0 and east * south * west == 0)
            if first
            else (north * east * west == 0 and north * south * west == 0)
        )
        table[code] = 3 <= sum(p) <= 6 and rises == 1 and open_sides
    return table


def _corner(side: int) -> Mask:
    """Codes of a pixel that only rounds the corner between the straight neighbours ``side`` and ``side + 2``."""
    table = np.zeros(256, dtype=bool)
    for code in range(256):
        p = [(code >> k) & 1 for k in range(8)]
        far = (p[(side + 4) % 8], p[(side + 5) % 8], p[(side + 6) % 8])
        table[code] = p[side] == 1 and p[(side + 2) % 8] == 1 and not any(far)
    return table


DELETABLE = (_deletable(True), _deletable(False))
CORNERS = tuple(_corner(side) for side in (0, 2, 4, 6))


def ring_codes(flat: NDArray[np.uint8], at: NDArray[np.intp], width: int) -> NDArray[np.uint8]:
    """For each pixel the eight neighbours as bits, in the order of ``RING``."""
    codes = np.zeros(at.size, dtype=np.uint8)
    for k, (row, column) in enumerate(RING):
        codes |= flat[at + (row * width + column)] << np.uint8(k)
    return codes


def thin(mask: Mask) -> Mask:
    """Lines one pixel wide through the middle of the mask's strokes."""
    framed = np.pad(mask, 1).astype(np.uint8)
    width = framed.shape[1]
    flat = framed.ravel()
    left = np.flatnonzero(flat)
    deleted = True
    while deleted:
        deleted = False
        for table in DELETABLE:
            going = table[ring_codes(flat, left, width)]
            if going.any():
                flat[left[going]] = 0
                left = left[~going]
                deleted = True
    for table in CORNERS:
        going = table[ring_codes(flat, left, width)]
        flat[left[going]] = 0
        left = left[~going]
    return framed[1:-1, 1:-1].astype(bool)
