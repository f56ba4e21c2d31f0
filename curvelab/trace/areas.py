"""Edges of filled areas along which no line was found."""

import cv2
import numpy as np

from curvelab.records.trace import Place
from curvelab.trace.cover import Cover
from curvelab.trace.prepared import Raster
from curvelab.trace.seeds import places_of

SMALLEST = 0.004
"""Share of the plot that an area covers at least."""
NEAR = 8
"""px from the frame within which an area's edge is the frame's."""


def bare_edges(raster: Raster, cover: Cover, shortest: float) -> list[Place]:
    """A place on each stretch of an area's edge that no line explains, the longest first.

    Parameters
    ----------
    raster : Raster
    cover : Cover
        The lines found.
    shortest : float
        Length in the sheet's unit that counts.
    """
    deep = cv2.erode(raster.inside.astype(np.uint8), np.ones((2 * NEAR + 1, 2 * NEAR + 1), dtype=np.uint8))
    found: list[tuple[int, Place]] = []
    outlines, _ = cv2.findContours(raster.fill.astype(np.uint8), cv2.RETR_LIST, cv2.CHAIN_APPROX_NONE)
    for outline in outlines:
        if cv2.contourArea(outline) < SMALLEST * raster.inside.sum():
            continue
        points = outline[:, 0, :].astype(np.float64)
        columns, rows = outline[:, 0, 0], outline[:, 0, 1]
        bare = (deep[rows, columns] > 0) & ~cover.near(places_of(raster, points))
        for run in np.split(np.arange(len(bare)), np.flatnonzero(np.diff(bare.astype(int))) + 1):
            if bare[run[0]] and len(run) * raster.pixels.size_in_places > shortest:
                x, y = places_of(raster, points[run[len(run) // 2]][None])[0]
                found.append((len(run), (round(float(x), 1), round(float(y), 1))))
    return [place for _, place in sorted(found, reverse=True)]
