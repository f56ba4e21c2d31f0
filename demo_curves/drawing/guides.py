"""Where a person would click a line to say which one is meant: on its ink, clear of other lines."""

import numpy as np
from numpy.typing import NDArray
from scipy.spatial import cKDTree

from demo_curves.drawing.geometry import Points, at_length, densified, lengths
from demo_curves.drawing.truth import CurveTruth, PlotTruth


def guide_places(
    curve: CurveTruth, plot: PlotTruth, count: int, rng: np.random.Generator, per_px: float
) -> list[Points]:
    """One or two places on visible ink, in the line's order, apart from other lines and from each other.

    Any place with enough room will do for a person, so one of those is drawn at random.
    """
    candidates = _candidates(curve, per_px)
    room = _clearance(candidates, curve, plot, per_px)
    enough = np.flatnonzero(room >= min(20.0 * per_px, 0.6 * room.max()))
    first = int(rng.choice(enough))
    if count == 1:
        return [candidates[first]]
    apart = np.hypot(*(candidates[enough] - candidates[first]).T)
    far = enough[apart >= 0.5 * apart.max()]
    second = int(rng.choice(far))
    return [candidates[index] for index in sorted({first, second})]


def _candidates(curve: CurveTruth, per_px: float) -> Points:
    """Places every 3 px along what is seen, not near the ends of a stretch; on dashed lines the middles of dashes."""
    places = []
    for run in curve.visible_runs():
        total = lengths(run)[-1]
        margin = min(10.0 * per_px, 0.3 * total)
        along = np.arange(margin, total - margin, 3.0 * per_px)
        places.append(at_length(run, along if len(along) else np.array([total / 2])))
    candidates = np.vstack(places)
    dash = curve.design.dash_pt
    return candidates if not dash else _on_dashes(candidates, curve, dash, per_px)


def _on_dashes(candidates: Points, curve: CurveTruth, dash: tuple[float, ...], per_px: float) -> Points:
    """Each candidate moved to the middle of the nearest first dash of the pattern."""
    scale = curve.unit_per_pt
    period = sum(dash) * scale
    tree = cKDTree(densified(curve.places, per_px))
    measured = lengths(densified(curve.places, per_px))
    near = measured[tree.query(candidates)[1]]
    middle = np.rint((near - dash[0] * scale / 2) / period) * period + dash[0] * scale / 2
    return at_length(curve.places, np.unique(np.clip(middle, 0.0, lengths(curve.places)[-1])))


def _clearance(candidates: Points, curve: CurveTruth, plot: PlotTruth, per_px: float) -> NDArray[np.float64]:
    """Distance of each candidate to the nearest other line."""
    others = [densified(other.places, 2.0 * per_px) for other in plot.curves if other is not curve]
    if not others:
        return np.full(len(candidates), np.inf)
    return np.asarray(cKDTree(np.vstack(others)).query(candidates)[0])
