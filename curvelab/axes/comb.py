"""The printed pattern laid on the lines that are there, starting from marks that are only roughly placed."""

from dataclasses import dataclass, replace

import numpy as np
from scipy.stats import binom

from curvelab.axes.pattern import MAIN, Range, linear_lines, linear_steps, log_lines, log_patterns
from curvelab.axes.strips import Profile
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis

REACH = 30
"""How far from a mark, in pixels of the profile, its grid line is looked for."""

CLICK_SD = 1.5
"""Pixels by which a mark is off as a rule; larger errors cost the logarithm of a heavy-tailed density."""

LINE_WORTH = 3.0
"""What one line met is worth, in units of log likelihood."""

AT_LINE = 1.5
"""Pixels within which a line seen is one of the pattern, once the ruler rests on the lines."""

EXPLAINED = 0.6
"""Share of the lines seen that a pattern must explain, and"""

BY_CHANCE = 1e-3
"""the probability that as many were explained by chance, which it must stay below."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Ruler:
    """Affine map of one axis: across = origin + per_scaled * scaled, at the profile's middle."""

    origin: float
    per_scaled: float

    def across(self, scaled: Floats) -> Floats:
        """Places of scaled values."""
        return self.origin + self.per_scaled * scaled

    def scaled(self, across: Floats) -> Floats:
        """Scaled values of places."""
        return (across - self.origin) / self.per_scaled


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Alignment:
    """A pattern laid on the lines: the ruler, the lines it predicts, and how well both agree.

    ``agrees`` says whether a printed pattern explains the lines that are there; ``score`` compares alignments of the
    same axis. ``step`` is that of a linear axis in its printed unit, 0 on a log axis.
    """

    ruler: Ruler
    lines: Floats
    agrees: bool
    score: float
    step: float = 0.0


def align(axis: Axis, ruler: Ruler, ends: Range, profile: Profile) -> Alignment:
    """The best alignment near a first ruler.

    Parameters
    ----------
    axis : Axis
    ruler : Ruler
        From marks, good to some pixels.
    ends : (float, float)
        Scaled values of the outermost marks, about which the ruler moves.
    profile : Profile
    """
    if axis.scale == "log":
        return _laid(axis, ruler, ends, profile, log_lines(axis, ends, MAIN))
    span = abs(ends[1] - ends[0])
    steps = linear_steps(axis, span, 8.0 * profile.step / abs(ruler.per_scaled))
    tried = [replace(_laid(axis, ruler, ends, profile, linear_lines(axis, ends, step)), step=step) for step in steps]
    return max(tried, key=lambda alignment: alignment.score)


def _laid(axis: Axis, ruler: Ruler, ends: Range, profile: Profile, lines: Floats) -> Alignment:
    """Move both ends of the ruler over a square of errors and keep what meets most lines for the least error."""
    reach = float(REACH) * profile.step
    if axis.scale == "linear" and len(lines) > 1:
        # Equal steps match themselves one step on: the marks alone tell which line is which.
        reach = min(reach, 0.45 * abs(ruler.per_scaled) * float(np.diff(lines).min()))
    errors = np.arange(-reach, reach + 0.5 * profile.step, profile.step)
    part = (lines - ends[0]) / (ends[1] - ends[0])
    base = ruler.across(lines)
    met = np.zeros((len(errors), len(errors)))
    for place, share in zip(base, part, strict=True):
        met += profile.at(place + (1 - share) * errors[:, None] + share * errors[None, :])
    cost = np.log1p((errors / (CLICK_SD * profile.step)) ** 2)
    score = LINE_WORTH * (met - (0.5 * len(lines) if axis.scale == "linear" else 0.0)) - cost[:, None] - cost[None, :]
    i, j = np.unravel_index(int(np.argmax(score)), score.shape)
    per_scaled = ruler.per_scaled + float(errors[j] - errors[i]) / (ends[1] - ends[0])
    moved = Ruler(
        origin=ruler.origin + float(errors[i]) - (per_scaled - ruler.per_scaled) * ends[0], per_scaled=per_scaled
    )
    moved = _settled(moved, lines, profile)
    patterns = log_patterns(axis, ends) if axis.scale == "log" else [lines]
    agrees = any(_explains(moved.across(pattern), moved.across(np.array(ends)), profile) for pattern in patterns)
    return Alignment(ruler=moved, lines=lines, agrees=agrees, score=float(score[i, j]))


def _settled(ruler: Ruler, lines: Floats, profile: Profile) -> Ruler:
    """The ruler through the peaks next to its lines, three of them at least."""
    if not profile.peaks.size or len(lines) < 3:
        return ruler
    room = 0.45 * np.abs(np.diff(ruler.across(lines))).min()
    for near in (4.0, 3.0, 2.0):
        places = ruler.across(lines)
        nearest = profile.peaks[np.argmin(np.abs(places[:, None] - profile.peaks[None, :]), axis=1)]
        good = np.abs(nearest - places) <= min(near * profile.step, room)
        if np.sum(good) < 3:
            return ruler
        per_scaled, origin = np.polyfit(lines[good], nearest[good], 1)
        ruler = Ruler(origin=float(origin), per_scaled=float(per_scaled))
    return ruler


def _explains(places: Floats, ends: Floats, profile: Profile) -> bool:
    """Whether lines at ``places`` are nearly all that is seen between the outermost marks, and not by chance.

    A dense pattern meets any line within the tolerance of one of its own: the binomial tail counts that in.
    """
    margin = 2 * AT_LINE * profile.step
    low, high = ends.min() - margin, ends.max() + margin
    seen = profile.peaks[(profile.peaks > low) & (profile.peaks < high)]
    if not seen.size or not places.size:
        return False
    near = np.abs(seen[:, None] - places).min(axis=1) <= AT_LINE * profile.step
    chance = min(1.0, len(places) * margin / (high - low))
    count = int(np.sum(near))
    return count >= EXPLAINED * len(seen) and float(binom.sf(count - 1, len(seen), chance)) < BY_CHANCE
