"""Runs: the pixels of a thinned mask in order, between junctions and free ends."""

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.trace.characters import FREE
from curvelab.trace.thinning import RING, Mask, ring_codes

Run = tuple[tuple[NDArray[np.intp], NDArray[np.intp]], tuple[int, int]]


def runs_of(skeleton: Mask) -> tuple[list[Run], int]:
    """Every run with the junctions at its ends, and the number of junctions."""
    framed = np.pad(skeleton, 1).astype(np.uint8)
    width = framed.shape[1]
    flat = framed.ravel()
    at = np.flatnonzero(flat)
    codes = ring_codes(flat, at, width)
    degree = np.bitwise_count(codes)
    junction_map = np.zeros_like(framed)
    junction_map.ravel()[at[degree >= 3]] = 1
    count, labels = cv2.connectedComponents(junction_map, connectivity=8)
    junction_of = labels.ravel().astype(np.intp) - 1
    steps = [row * width + column for row, column in RING]
    neighbours = {
        int(pixel): [int(pixel) + steps[k] for k in range(8) if code >> k & 1]
        for pixel, code in zip(at.tolist(), codes.tolist(), strict=True)
    }
    junction_pixels = set(at[degree >= 3].tolist())
    runs: list[Run] = []
    seen: set[int] = set()
    starts = at[degree <= 1].tolist()
    starts += [q for p in sorted(junction_pixels) for q in neighbours[p]]
    starts += at[degree == 2].tolist()
    for start in starts:
        if start in seen or start in junction_pixels:
            continue
        run = _follow(start, neighbours, junction_pixels, seen)
        ends = _run_junctions(run, neighbours, junction_pixels, junction_of)
        pixels = np.array(run, dtype=np.intp)
        runs.append(((pixels // width - 1, pixels % width - 1), ends))
    return runs, count - 1


def _follow(start: int, neighbours: dict[int, list[int]], junctions: set[int], seen: set[int]) -> list[int]:
    run = [start]
    seen.add(start)
    while True:
        onward = [q for q in neighbours[run[-1]] if q not in seen and q not in junctions]
        if not onward:
            return run
        run.append(onward[0])
        seen.add(onward[0])


def _run_junctions(
    run: list[int], neighbours: dict[int, list[int]], junctions: set[int], junction_of: NDArray[np.intp]
) -> tuple[int, int]:
    first, last = (
        list(dict.fromkeys(int(junction_of[q]) for q in neighbours[pixel] if q in junctions))
        for pixel in (run[0], run[-1])
    )
    if len(run) == 1:
        last = first[1:]
    return (first[0] if first else FREE), (last[0] if last else FREE)
