"""Sub-pixel centres: the stroke's profile fitted to untouched pixels, node by node, with width and blur of the line.

Model of a pixel: under + a T(u - d) (1 - under), under = the grid's known ink plus the level beside the line, T the
stroke's profile, a its amplitude (about 1) and d the offset along the normal. Offset and amplitude are estimated by
weighted least squares (maximum likelihood in white noise); pixels that other ink covers lose their weight.
"""

from dataclasses import dataclass

import numpy as np
from scipy.ndimage import median_filter
from scipy.optimize import least_squares

from curvelab.records.arrays import Floats
from curvelab.trace.course import Course, recentred
from curvelab.trace.prepared import Raster
from curvelab.trace.profile import StrokeProfile, stroke_profile
from curvelab.trace.thinning import Mask

PASSES = 3
STEPS = 3
AMPLITUDE_SD = 0.3
"""How far the amplitude at one node may reasonably lie from the line's."""
OUTLIER = 3.0
FLOOR = 0.012
"""Least misfit of the model, in shares of the line's ink."""
TWO_LEVEL_FLOOR = 0.3
"""The same where a stroke's edges are ink or paper and nothing between: a 1-bit scan, a plot drawn in steps."""
HARD_EDGED = 0.03
"""Share of a line's inked pixels between ink and paper: fewer, and its edges run in steps."""
GRID_DOUBT = 0.06
"""Doubt of the predicted grid ink, in shares of it."""
STEADY = 0.5
"""px: a centre this far from the line through its neighbours counts a quarter."""
STRAY = 0.3
"""px: beyond this and three standard deviations a centre is another stroke's."""
LEAST_SD = 0.04
"""px: what renderers that count few sub-pixels leave even without noise."""
COVERED_SD = 0.1
"""px: error at a node where other ink covers half of what tells the centre."""
REJECTED_IN_NOISE = 0.25
REJECTED_SD = 3.0
"""px per share of a node's pixels that other ink covers, beyond what noise alone has rejected."""
PROBE = 0.02
"""px by which width and blur are varied for their derivatives."""
MOST_FITTED = 200
"""Nodes the width and blur are fitted on."""
LARGEST_STEP = 0.7
WORST_USED = 0.5
"""px: a centre less sure than this takes no part in the line's own width and ink."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Centres:
    """Measured centres.

    Parameters
    ----------
    course : Course
    across : array
        Centre of each node in px across.
    sd : array
        Standard deviation along the normal in px.
    amplitude : array
        Ink of each node relative to the line's.
    misfit : array
        Residual of each node in units of the line's own noise.
    width, blur : float
        px.
    ink : array, shape (channels,)
    """

    course: Course
    across: Floats
    sd: Floats
    amplitude: Floats
    misfit: Floats
    width: float
    blur: float
    ink: Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Window:
    """Pixels of each node: distance along the normal, ink along the line's own ink, ink beneath."""

    distance: Floats
    seen: Floats
    under: Floats
    grid: Floats
    angle: Floats
    inside: Floats


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class _Fit:
    offset: Floats
    amplitude: Floats
    sd: Floats
    misfit: Floats
    noise: float


def measure_centres(raster: Raster, course: Course, ink: Floats, width: float) -> Centres:
    """Centres of a line along its course.

    Parameters
    ----------
    raster : Raster
    course : Course
        Within about 1.5 px of the line.
    ink : array, shape (channels,)
        Ink of the line where it covers a pixel wholly, as far as known.
    width : float
        Width in px, as far as known.
    """
    blur = 0.6
    profile = stroke_profile(width, blur, _reach(width, blur) + 3.0)
    across = course.across
    noise = raster.ink.noise / max(float(np.abs(ink).mean()), 0.05)
    floor, fit = FLOOR, None
    for number in range(PASSES):
        window = _window(raster, course, ink, profile)
        if number == 0:
            floor = TWO_LEVEL_FLOOR if raster.ink.two_level or _hard_edged(window) else FLOOR
        fit = _fit(window, profile, noise, floor)
        across = course.across + fit.offset / course.cosine
        if number == PASSES - 1:
            break
        good = (fit.amplitude > 0.5) & (fit.sd < WORST_USED)
        steady = 1.0 / (1.0 + (fit.offset / (STEADY if number else 1.0)) ** 2) ** 2
        course = recentred(course, across, np.where(good, steady / fit.sd**2, 1e-6))
        if number == 0 and good.sum() > 20:
            ink = ink * float(np.median(fit.amplitude[good]))
        profile, ink = _refined(raster, course, ink, profile, good)
    assert fit is not None
    return Centres(
        course=course,
        across=across,
        sd=np.where(np.abs(fit.offset) > STRAY + 3.0 * fit.sd, np.hypot(fit.sd, 2.0 * fit.offset), fit.sd),
        amplitude=fit.amplitude,
        misfit=fit.misfit,
        width=profile.width,
        blur=profile.blur,
        ink=ink,
    )


def _hard_edged(window: _Window) -> bool:
    """Whether hardly a pixel of the line lies between ink and paper."""
    ink = (window.seen - window.under)[(window.inside > 0) & (window.grid < 0.05)]
    between = np.count_nonzero((ink > 0.15) & (ink < 0.85))
    return bool(between < HARD_EDGED * np.count_nonzero(ink >= 0.15))


def _reach(width: float, blur: float) -> float:
    return float(0.5 * width + 2.2 * np.hypot(blur, 0.3) + 1.0)


def _window(raster: Raster, course: Course, ink: Floats, profile: StrokeProfile) -> _Window:
    reach = _reach(profile.width, profile.blur)
    side = int(np.ceil((reach + 2.0) * 1.45))
    steps = np.arange(-side, side + 1)
    pixel = np.round(course.across).astype(np.intp)[:, None] + steps[None, :]
    along = np.broadcast_to(course.along[:, None], pixel.shape)
    flat = course.flat[:, None]
    rows, columns = np.where(flat, pixel, along), np.where(flat, along, pixel)
    height, width = raster.ink.dark.shape
    inside = (rows >= 0) & (rows < height) & (columns >= 0) & (columns < width)
    rows, columns = np.clip(rows, 0, height - 1), np.clip(columns, 0, width - 1)
    weights = ink / float(ink @ ink)
    seen = raster.ink.density[rows, columns] @ weights
    grid = raster.grid.dark[rows, columns].astype(np.float64) * float(raster.grid.tint @ weights)
    distance = (pixel - course.across[:, None]) * course.cosine[:, None]
    within = inside & (np.abs(distance) <= reach)
    beside = _beside(seen - grid, distance, inside & (np.abs(distance) <= reach + 2.0), reach - 0.8)
    return _Window(
        distance=distance,
        seen=seen,
        under=np.clip(grid + beside, -0.2, 0.95),
        grid=grid,
        angle=np.arctan(course.slope)[:, None],
        inside=within.astype(np.float64),
    )


def _beside(excess: Floats, distance: Floats, inside: Mask, edge: float) -> Floats:
    """Level beside the line at each pixel: running medians of both flanks, the change between them under the stroke."""
    levels = []
    for flank in (inside & (distance < -edge), inside & (distance > edge)):
        values = np.where(flank, excess, np.nan)
        empty = ~flank.any(axis=1)
        values[empty] = 0.0
        level = np.nanmedian(values, axis=1)
        levels.append(median_filter(level, size=min(31, max(1, len(level))), mode="nearest"))
    before, after = levels
    share = 1.0 / (1.0 + np.exp(-np.clip(2.5 * distance, -30, 30)))
    result: Floats = before[:, None] + (after - before)[:, None] * share
    return result


def _fit(window: _Window, profile: StrokeProfile, noise: float, floor: float) -> _Fit:
    count = len(window.distance)
    offset, amplitude = np.zeros(count), np.ones(count)
    room = 1.0 - window.under
    scale = max(noise, floor)
    for step in range(STEPS + 1):
        u = window.distance - offset[:, None]
        shape = profile.value(u, window.angle) * room
        tilt = -amplitude[:, None] * profile.derivative(u, window.angle) * room
        residual = window.seen - window.under - amplitude[:, None] * shape
        trusted = window.inside / (1.0 + (GRID_DOUBT * window.grid / scale) ** 2)
        weight = trusted / (1.0 + (residual / (OUTLIER * scale)) ** 2) ** 2
        dd = (weight * tilt * tilt).sum(axis=1)
        da = (weight * tilt * shape).sum(axis=1)
        prior = (scale / AMPLITUDE_SD) ** 2
        aa = (weight * shape * shape).sum(axis=1) + prior
        determinant = np.maximum(dd * aa - da * da, 1e-12)
        rd = (weight * tilt * residual).sum(axis=1)
        ra = (weight * shape * residual).sum(axis=1) - prior * (amplitude - 1.0)
        if step < STEPS:
            move = np.clip((aa * rd - da * ra) / determinant, -LARGEST_STEP, LARGEST_STEP)
            offset = np.clip(offset + move, -2.0, 2.0)
            amplitude = np.clip(amplitude + (dd * ra - da * rd) / determinant, 0.0, 1.6)
        if step == 0:
            scale = max(scale, _robust(residual[window.inside > 0]))
    scale = max(noise, _robust(residual[window.inside > 0]), floor if floor > FLOOR else 0.0)
    total = np.maximum((trusted * tilt * tilt).sum(axis=1), 1e-12)
    clear = np.clip(dd / total, 1e-3, 1.0)
    misfit = np.sqrt((weight * residual**2).sum(axis=1) / np.maximum(weight.sum(axis=1), 1e-6)) / max(scale, floor)
    sd = scale * np.sqrt(aa / determinant) * np.maximum(1.0, misfit)
    rejected = 1.0 - weight.sum(axis=1) / np.maximum(trusted.sum(axis=1), 1e-9)
    foreign = REJECTED_SD * np.maximum(rejected - REJECTED_IN_NOISE, 0.0)
    sd = np.sqrt(sd**2 + (COVERED_SD * (1.0 - clear) / clear) ** 2 + foreign**2 + LEAST_SD**2)
    return _Fit(offset=offset, amplitude=_ink_there(window, profile, offset), sd=sd, misfit=misfit, noise=scale)


def _ink_there(window: _Window, profile: StrokeProfile, offset: Floats) -> Floats:
    """Ink where the line should be, relative to the line's: about 1 on it, 0 where it is not printed."""
    shape = profile.value(window.distance - offset[:, None], window.angle) * (1.0 - window.under) * window.inside
    seen: Floats = (shape * (window.seen - window.under)).sum(axis=1) / np.maximum((shape**2).sum(axis=1), 1e-6)
    return seen


def _robust(residual: Floats) -> float:
    return 1.4826 * float(np.median(np.abs(residual))) if residual.size else 0.0


def _refined(
    raster: Raster, course: Course, ink: Floats, profile: StrokeProfile, good: Mask
) -> tuple[StrokeProfile, Floats]:
    """Width, blur and ink fitted to the line as a whole."""
    members = np.flatnonzero(good)
    if members.size < 20:
        return profile, ink
    members = members[:: max(1, members.size // MOST_FITTED)]
    part = Course(
        along=course.along[members],
        across=course.across[members],
        slope=course.slope[members],
        flat=course.flat[members],
        run=course.run[members],
        arc=course.arc[members],
        near_kink=course.near_kink[members],
    )
    window = _window(raster, part, ink, profile)
    use = (window.inside > 0) & (window.grid < 0.05)
    if use.sum() < 60:
        use = window.inside > 0
    distance, seen, under = window.distance[use], window.seen[use], window.under[use]
    angle = np.broadcast_to(window.angle, window.distance.shape)[use]

    room = 1.0 - under

    def residual(parameters: Floats) -> Floats:
        width, blur, amplitude, shift = parameters
        candidate = stroke_profile(width, blur, profile.reach)
        result: Floats = under + amplitude * candidate.value(distance - shift, angle) * room - seen
        return result

    def jacobian(parameters: Floats) -> Floats:
        width, blur, amplitude, shift = parameters
        candidate = stroke_profile(width, blur, profile.reach)
        value = candidate.value(distance - shift, angle)
        wider = stroke_profile(width + PROBE, blur, profile.reach).value(distance - shift, angle)
        softer = stroke_profile(width, blur + PROBE, profile.reach).value(distance - shift, angle)
        columns = [
            amplitude * (wider - value) / PROBE,
            amplitude * (softer - value) / PROBE,
            value,
            -amplitude * candidate.derivative(distance - shift, angle),
        ]
        result: Floats = np.stack(columns, axis=1) * room[:, None]
        return result

    # along a row or column of pixels the offset looks like a change of the profile: it is fitted with it
    start = np.array([profile.width, min(profile.blur, 0.3), 1.0, 0.0])
    found = least_squares(
        residual,
        start,
        jacobian,
        bounds=([0.3, 0.05, 0.5, -1.0], [profile.width * 2 + 1, 3.0, 1.6, 1.0]),
        loss="soft_l1",
        f_scale=0.05,
        ftol=1e-6,
        xtol=1e-5,
        max_nfev=14,
    )
    width, blur, amplitude, _ = (float(v) for v in found.x)
    return stroke_profile(width, blur, _reach(width, blur) + 3.0), ink * amplitude
