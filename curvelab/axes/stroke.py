"""The grey profile across a straight stroke, and the sub-pixel centre fitted to it.

A stroke of width w, blurred by a Gaussian of standard deviation b and integrated over square pixels, darkens the
paper by amplitude x F(offset); F has a closed form, so that area-coverage drawings (b -> 0) are met without bias.
"""

from dataclasses import dataclass

import numpy as np
from scipy.special import ndtr

from curvelab.records.arrays import Floats

LEAST_BLUR = 0.03
"""Standard deviation, in pixels, below which the profile is that of pure area coverage."""

LEAST_SHAPE = np.array([0.2, LEAST_BLUR, 1.0])
CENTRE_STEPS = 6
SHAPE_STEPS = 30
LARGEST_STEP = 0.5
SETTLED = 1e-8

CORNERS = ((1, 1), (1, -1), (-1, 1), (-1, -1))
"""Signs of the stroke's side and of the pixel's side where F bends."""


@dataclass(frozen=True, kw_only=True, slots=True)
class Shape:
    """Width of a stroke and blur of the image in pixels, contrast of the ink in grey levels."""

    width: float
    blur: float
    amplitude: float


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Centres:
    """Strokes fitted to n profiles: centre across in pixels; contrast, paper and rms misfit in grey levels."""

    centre: Floats
    amplitude: Floats
    paper: Floats
    misfit: Floats


def coverage(offset: Floats, width: float, blur: float) -> tuple[Floats, Floats]:
    """Darkening F of pixels at ``offset`` from the stroke's centre, and its derivative by the offset."""
    value = np.zeros_like(offset)
    slope = np.zeros_like(offset)
    for side, pixel in CORNERS:
        z = (offset + (side * width + pixel) / 2) / blur
        rise = ndtr(z)
        value += side * pixel * blur * (_normal(z) + z * rise)
        slope += side * pixel * rise
    return value, slope


def darkest_places(profiles: Floats, offsets: Floats, expected: Floats, reach: float) -> Floats:
    """Where to start: the centre of ink of three pixels about the darkest within ``reach`` of what is expected.

    A stroke that is one whole pixel wide starts at that pixel's centre, whatever was expected.
    """
    dark = profiles.max(axis=1, keepdims=True) - profiles
    near = np.abs(offsets - expected[:, None]) <= reach
    best = np.clip(np.argmax(np.where(near, dark, -1.0), axis=1), 1, len(offsets) - 2)
    rows = np.arange(len(profiles))
    left, top, right = (dark[rows, best + k] for k in (-1, 0, 1))
    places: Floats = offsets[best] + (right - left) / np.maximum(left + top + right, 1e-9)
    return places


def fit_centres(profiles: Floats, offsets: Floats, shape: Shape, start: Floats) -> Centres:
    """Least-squares centre, contrast and paper level of each profile for a known stroke shape.

    Parameters
    ----------
    profiles : array, shape (n, k)
        Grey levels.
    offsets : array, shape (k,)
        Places of the pixels across the stroke.
    shape : Shape
        Contrast and paper are fitted to each profile; only width and blur are used.
    start : array, shape (n,)
        Centres to start from.
    """
    grey = _centred(profiles)
    centre = start.astype(np.float64)
    for _ in range(CENTRE_STEPS):
        value, slope = coverage(offsets - centre[:, None], shape.width, shape.blur)
        dark = _centred(value)
        amplitude = _share(-grey, dark)
        turn = _without(_centred(slope), dark) * amplitude[:, None]
        step = _share(grey + amplitude[:, None] * dark, turn)
        centre = np.clip(centre + np.clip(step, -LARGEST_STEP, LARGEST_STEP), offsets[0], offsets[-1])
    value, _ = coverage(offsets - centre[:, None], shape.width, shape.blur)
    amplitude = _share(-grey, _centred(value))
    paper = profiles.mean(axis=1) + amplitude * value.mean(axis=1)
    residual = profiles - paper[:, None] + amplitude[:, None] * value
    return Centres(centre=centre, amplitude=amplitude, paper=paper, misfit=np.sqrt(np.mean(residual**2, axis=1)))


def fit_shape(profiles: Floats, offsets: Floats, start: Shape, centres: Floats) -> tuple[Shape, float]:
    """Width, blur and contrast that strokes of one class share; each profile keeps its own centre and paper level.

    Damped Gauss-Newton (Levenberg and Marquardt) with the local parameters projected out. Strokes thinner than a pixel
    tell width from contrast only together, by their different phases on the pixels; that is why contrast is shared.
    The sum of squared misfits is returned too, to choose among starts.
    """
    grey = _centred(profiles)
    best = (np.array([start.width, start.blur, start.amplitude]), centres.astype(np.float64))
    residual, common, turn = _linearised(grey, offsets, *best)
    cost, damping = float(np.sum(residual**2)), 1e-3
    for _ in range(SHAPE_STEPS):
        step = _common_step(residual, common, turn, damping)
        left = residual - np.tensordot(step, common, axes=1)
        move = np.clip(_share(left, turn), -LARGEST_STEP, LARGEST_STEP)
        trial = (np.maximum(best[0] + step, LEAST_SHAPE), best[1] + move)
        linear = _linearised(grey, offsets, *trial)
        trial_cost = float(np.sum(linear[0] ** 2))
        if trial_cost >= cost:
            damping *= 10
            if damping > 1e6:
                break
            continue
        settled = cost - trial_cost < SETTLED * cost
        best, cost, damping = trial, trial_cost, max(damping / 10, 1e-9)
        residual, common, turn = linear
        if settled:
            break
    width, blur, amplitude = best[0]
    return Shape(width=float(width), blur=float(blur), amplitude=float(amplitude)), cost


def _linearised(grey: Floats, offsets: Floats, common: Floats, centre: Floats) -> tuple[Floats, Floats, Floats]:
    """Residual of centred profiles, and the model's derivatives by (width, blur, contrast) and by each centre."""
    width, blur, amplitude = common
    offset = offsets - centre[:, None]
    value, slope = coverage(offset, width, blur)
    by_width = np.zeros_like(offset)
    by_blur = np.zeros_like(offset)
    for side, pixel in CORNERS:
        z = (offset + (side * width + pixel) / 2) / blur
        by_width += 0.5 * pixel * ndtr(z)
        by_blur += side * pixel * _normal(z)
    derivatives = np.stack([-amplitude * by_width, -amplitude * by_blur, -value])
    return grey + amplitude * _centred(value), _centred(derivatives), amplitude * _centred(slope)


def _common_step(residual: Floats, common: Floats, turn: Floats, damping: float) -> Floats:
    free = np.stack([_without(column, turn).ravel() for column in common])
    normal = free @ free.T
    damped = normal + np.diag(damping * np.diag(normal) + 1e-12)
    return np.linalg.solve(damped, free @ residual.ravel()).astype(np.float64)


def _normal(z: Floats) -> Floats:
    density: Floats = np.exp(-0.5 * z**2) / np.sqrt(2 * np.pi)
    return density


def _centred(profiles: Floats) -> Floats:
    """Profiles (last axis) without their mean: the paper level projected out."""
    centred: Floats = profiles - profiles.mean(axis=-1, keepdims=True)
    return centred


def _share(profiles: Floats, direction: Floats) -> Floats:
    """Coefficient of ``direction`` in each profile."""
    share: Floats = np.sum(profiles * direction, axis=-1) / np.maximum(np.sum(direction**2, axis=-1), 1e-12)
    return share


def _without(profiles: Floats, direction: Floats) -> Floats:
    """Profiles with ``direction`` projected out."""
    return profiles - _share(profiles, direction)[..., None] * direction
