"""Where a printed line ends, with a number or a dash pattern in line with it."""

import numpy as np
from numpy.typing import NDArray

from curvelab.axes.ends import line_end

Bytes = NDArray[np.uint8]


def page(noise: float = 0.0, contrast: float = 150.0) -> Bytes:
    """A line of two pixels down column 50, from row 20 to row 219."""
    levels = np.full((300, 100), 240.0)
    levels[20:220, 50:52] -= contrast
    levels += noise * np.random.default_rng(3).standard_normal(levels.shape)
    return np.clip(np.rint(levels), 0, 255).astype(np.uint8)


def test_a_number_below_does_not_prolong_the_line() -> None:
    grey = page()
    grey[227:245, 50:52] = 90  # the stem of a 1
    assert line_end(grey, (50.5, 248.0), 0.0, 1) == 219.0


def test_the_end_beyond_what_was_followed_is_found() -> None:
    assert line_end(page(), (50.5, 208.0), 0.0, 1) == 219.0
    assert line_end(page(), (50.5, 30.0), 0.0, -1) == 20.0


def test_a_dashed_line_goes_on_over_its_gaps() -> None:
    grey = page()
    for row in range(30, 220, 12):
        grey[row : row + 5, 50:52] = 240
    assert line_end(grey, (50.5, 215.0), 0.0, 1) >= 213.0


def test_a_crossing_curve_is_no_end() -> None:
    grey = page()
    for row in range(140, 180):
        grey[row, 40 + (row - 140) // 2 : 46 + (row - 140) // 2] = 60
    assert line_end(grey, (50.5, 215.0), 0.0, 1) == 219.0


def test_the_end_of_a_line_hardly_above_noise_stays() -> None:
    assert line_end(page(noise=12.0, contrast=12.0), (50.5, 215.0), 0.0, 1) == 215.0


def test_a_line_at_the_pages_edge_ends_there() -> None:
    grey = page()
    grey[20:, 50:52] = 90
    assert line_end(grey, (50.5, 296.0), 0.0, 1) == 299.0
    assert line_end(grey, (2.0, 100.0), 0.0, 1) == 100.0
