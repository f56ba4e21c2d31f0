"""The printed pattern laid on the lines that are there, starting from marks that are only roughly placed."""

from dataclasses import dataclass, replace

import numpy as np

from curvelab.axes.pattern import MAIN, Range, finer_lines, linear_lines, linear_steps, log_lines
from curvelab.axes.strips import Profile
from curvelab.records.arrays import Floats
from curvelab.records.axes import Axis

REACH = 30
"""How far from a mark, in pixels of the profile, its grid line is looked for."""

CLICK_SD = 1.5
"""Pixels by which a mark is off as a rule; larger errors cost the logarithm of a heavy-tailed density."""

LINE_WORTH = 3.0
"""What one line met is worth, in units of log likelihood."""

LEAST_SHARE = 0.5
"""Share of the pattern's lines that must be met, and of the lines seen that the pattern must explain."""


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

    ``met`` is the share of the pattern's lines that are there, ``explained`` the share of the lines that are there
    which the finest pattern explains; ``score`` compares alignments of the same axis. ``step`` is that of a linear axis
    in its printed unit, 0 on a log axis.
    """

    ruler: Ruler
    lines: Floats
    met: float
    explained: float
    score: float
    step: float = 0.0

    @property
    def agrees(self) -> bool:
        """Whether the pattern is the one printed."""
        return self.met * len(self.lines) >= 3 and self.explained >= LEAST_SHARE


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
    tried = [
        replace(_laid(axis, ruler, ends, profile, linear_lines(axis, ends, step)), step=step) for step in steps
    ]
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
    share_met = float(np.mean(profile.at(moved.across(lines)))) if len(lines) else 0.0
    explained = _explained(axis, moved, ends, profile, lines)
    return Alignment(ruler=moved, lines=lines, met=share_met, explained=explained, score=float(score[i, j]))


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


def _explained(axis: Axis, ruler: Ruler, ends: Range, profile: Profile, lines: Floats) -> float:
    """Share of the lines seen between the outermost marks that the finest pattern has too."""
    low, high = sorted(ruler.across(np.array(ends)))
    seen = profile.peaks
    seen = seen[(seen > low - 3 * profile.step) & (seen < high + 3 * profile.step)]
    if not seen.size:
        return 0.0
    finest = finer_lines(axis, ends) if axis.scale == "log" else lines
    places = ruler.across(finest)
    distance = np.abs(seen[:, None] - places[None, :]).min(axis=1) if places.size else np.full(seen.size, np.inf)
    return float(np.mean(distance <= 2.5 * profile.step))

