"""The stroke model meets exact area coverage without bias, and the Cramer-Rao bound in noise."""

import numpy as np
import pytest

from curvelab.axes.stroke import Shape, coverage, fit_centres, fit_shape

OFFSETS = np.arange(-7.0, 8.0)


def area_covered(centres: np.ndarray, width: float) -> np.ndarray:
    """Share of each pixel between the two edges of a stroke."""
    low, high = centres[:, None] - width / 2, centres[:, None] + width / 2
    return np.clip(np.minimum(OFFSETS + 0.5, high) - np.maximum(OFFSETS - 0.5, low), 0.0, 1.0)


@pytest.mark.parametrize("width", [1.2, 1.5, 2.0, 2.08, 2.6, 3.3])
def test_area_coverage_in_whole_grey_levels_is_centred_within_five_thousandths_of_a_pixel(width: float) -> None:
    centres = np.random.default_rng(3).uniform(-0.5, 0.5, 60)
    profiles = np.rint(250 - 200 * area_covered(centres, width))
    start = Shape(width=width + 0.3, blur=0.3, amplitude=150.0)
    shape, _ = fit_shape(profiles, OFFSETS, start, fit_centres(profiles, OFFSETS, start, np.zeros(60)).centre)
    fitted = fit_centres(profiles, OFFSETS, shape, np.zeros(60))
    assert shape.width == pytest.approx(width, abs=0.01)
    assert np.abs(fitted.centre - centres).max() < 0.005
    assert fitted.paper == pytest.approx(np.full(60, 250.0), abs=1.0)


def test_the_profile_without_blur_is_area_coverage() -> None:
    centres = np.linspace(-0.5, 0.5, 21)
    value, _ = coverage(OFFSETS - centres[:, None], 1.7, 1e-6)
    assert value == pytest.approx(area_covered(centres, 1.7), abs=1e-5)


def test_the_profile_is_the_convolution_of_bar_pixel_and_gaussian() -> None:
    """Against numerical convolution on a fine grid."""
    fine = np.linspace(-12, 12, 2401)
    bar, pixel = (np.clip((half - np.abs(fine)) / 0.01 + 0.5, 0.0, 1.0) for half in (1.15, 0.5))
    gauss = np.exp(-0.5 * (fine / 0.8) ** 2)
    profile = np.convolve(np.convolve(bar, 0.01 * pixel, "same"), gauss / gauss.sum(), "same")
    value, slope = coverage(OFFSETS, 2.3, 0.8)
    assert value == pytest.approx(np.interp(OFFSETS, fine, profile), abs=1e-3)
    step = 1e-6
    assert slope == pytest.approx((coverage(OFFSETS + step, 2.3, 0.8)[0] - value) / step, abs=1e-5)


def test_noise_is_met_at_the_cramer_rao_bound() -> None:
    """sd >= (s/A) sqrt(b sqrt(pi) / (1 - exp(-w^2 / 4 b^2))) for white noise; b includes the pixel's own 1/12."""
    rng = np.random.default_rng(5)
    width, blur, contrast, noise = 3.0, 0.7, 150.0, 7.5
    centres = rng.uniform(-0.5, 0.5, 4000)
    clean = 250 - contrast * coverage(OFFSETS - centres[:, None], width, blur)[0]
    profiles = clean + noise * rng.standard_normal(clean.shape)
    shape = Shape(width=width, blur=blur, amplitude=contrast)
    error = fit_centres(profiles, OFFSETS, shape, np.zeros(4000)).centre - centres
    whole = np.sqrt(blur**2 + 1 / 12)
    bound = noise / contrast * np.sqrt(whole * np.sqrt(np.pi) / (1 - np.exp(-(width**2) / (4 * whole**2))))
    assert abs(error.mean()) < 4 * bound / np.sqrt(4000)
    assert 0.9 * bound < error.std() < 1.1 * bound
