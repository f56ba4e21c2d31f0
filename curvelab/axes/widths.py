"""Width of sharp strokes told by the pattern, where the pixels alone do not tell it.

A sharp stroke little wider than a pixel mostly covers two pixels, and two grey levels do not say whether it is narrow
and dark or wide and faint; the centre read from them depends on it, with the line's phase on the pixels. The lines
of one class have many phases, and their places lie straight in the logarithm: the right width is the one with which
they do.
"""

import numpy as np

from curvelab.axes.stroke import Shape, darkest_places, fit_centres
from curvelab.records.arrays import Floats

SHARP = 0.3
"""Blur, in pixels, below which a stroke is sharp."""

FEWEST = 6
"""Lines from which on their scatter tells a width."""

FACTORS = np.linspace(0.7, 1.4, 29)
AS_GOOD = 0.15
"""Grey levels of misfit by which a width may be worse than the best one: half of what rounding to levels leaves."""

KEPT = 0.8
"""Share of the lines whose scatter counts; the rest may be hidden by something."""


def settled_width(shape: Shape, profiles: Floats, offsets: Floats, expected: Floats, scaled: Floats) -> Shape:
    """The shape with the width that lays the lines straightest.

    Parameters
    ----------
    shape : Shape
        As fitted to the class of lines.
    profiles : array, shape (lines, k)
        One profile of each line.
    offsets : array, shape (k,)
    expected : array, shape (lines,)
        Where each line is predicted in its profile, but for a straight ruler's error.
    scaled : array, shape (lines,)
        Their scaled values.
    """
    if shape.blur > SHARP or len(profiles) < FEWEST:
        return shape
    shapes = [Shape(width=float(f * shape.width), blur=shape.blur, amplitude=shape.amplitude / f) for f in FACTORS]
    start = darkest_places(profiles, offsets, expected, 2.0)
    fits = [fit_centres(profiles, offsets, candidate, start) for candidate in shapes]
    misfits = np.array([np.median(fit.misfit) for fit in fits])
    scatters = np.array([_scatter(fit.centre - expected, scaled) for fit in fits])
    scatters[misfits > misfits.min() + AS_GOOD] = np.inf
    return shapes[int(np.argmin(scatters))]


def _scatter(off: Floats, scaled: Floats) -> float:
    """Root mean square of the smaller distances from a straight ruler."""
    design = np.stack([np.ones_like(scaled), scaled - scaled.mean()], axis=1)
    residual = off - design @ np.linalg.lstsq(design, off, rcond=None)[0]
    kept = np.sort(np.abs(residual))[: max(3, int(KEPT * len(off)))]
    return float(np.sqrt(np.mean(kept**2)))
