"""Where a line goes next: a straight or parabolic fit to the last of its walked places, extrapolated."""

from dataclasses import dataclass

import numpy as np

from curvelab.records.arrays import Floats

WINDOWS = (72, 40, 22, 12)
"""Walked px used, the longest over which the line is smooth."""
SMOOTH = 0.7
"""Largest rms in px of thinned pixels about a smooth line."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Heading:
    """A line's continuation in its own frame: sideways offset = bend * ahead^2.

    Parameters
    ----------
    tip : array, shape (2,)
    direction : array, shape (2,)
        Unit vector forward.
    bend : float
        1/px.
    base : float
        Length in px it was fitted over.
    """

    tip: Floats
    direction: Floats
    bend: float
    base: float

    def frame(self, places: Floats) -> tuple[Floats, Floats]:
        """Distance ahead and sideways deviation from the continuation, in px."""
        offset = np.atleast_2d(places) - self.tip
        ahead = offset @ self.direction
        aside = offset @ np.array([-self.direction[1], self.direction[0]])
        return ahead, aside - self.bend * np.minimum(np.abs(ahead), 2.0 * self.base) ** 2

    def spread(self, ahead: Floats) -> Floats:
        """Standard deviation in px of the continuation at a distance ahead."""
        relative = np.abs(ahead) / max(self.base, 4.0)
        result: Floats = 1.0 + 1.0 * relative + 0.25 * relative**2
        return result


def heading(walked: Floats) -> Heading | None:
    """Continuation of a line from its walked places, the last one the tip; None where there are too few."""
    if len(walked) < 4:
        return None
    # neighbouring places are a pixel or more apart: no window reaches further back
    last = walked[: -int(max(WINDOWS)) - 3 : -1]
    back = np.r_[0.0, np.cumsum(np.hypot(*np.diff(last, axis=0).T))]
    best = None
    for window in WINDOWS:
        near = last[back <= window]
        if len(near) < 4:
            break
        fitted, rms = _fit(near)
        best = fitted
        if rms < SMOOTH:
            break
    return best


def _fit(near: Floats) -> tuple[Heading, float]:
    """Fit to places ordered from the tip backwards."""
    middle = near.mean(axis=0)
    _, _, axes = np.linalg.svd(near - middle, full_matrices=False)
    forward = axes[0] * np.sign((near[0] - near[-1]) @ axes[0] or 1.0)
    normal = np.array([-forward[1], forward[0]])
    ahead = (near - near[0]) @ forward
    aside = (near - near[0]) @ normal
    base = float(ahead[0] - ahead[-1])
    degree = 2 if base >= 30 else 1
    powers = (ahead / max(base, 1.0))[:, None] ** np.arange(degree + 1)
    coefficients = np.linalg.lstsq(powers, aside, rcond=None)[0]
    rms = float(np.sqrt(np.mean((powers @ coefficients - aside) ** 2)))
    coefficients /= max(base, 1.0) ** np.arange(degree + 1)
    direction = forward + coefficients[1] * normal
    scale = float(np.hypot(*direction))
    bend = float(coefficients[2]) if degree == 2 else 0.0
    tip = near[0] + coefficients[0] * normal
    return Heading(tip=tip, direction=direction / scale, bend=bend, base=max(base, 2.0)), rms
