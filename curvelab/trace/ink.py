"""Ink: how much darker than its local paper each pixel of the plot is, on untouched grey levels."""

from dataclasses import dataclass

import cv2
import numpy as np
from numpy.typing import NDArray

from curvelab.records.axes import Axes
from curvelab.records.sheet import Pixels

Image = NDArray[np.float32]

MARGIN = 12
"""Pixels kept around the plot's frame."""
COARSE = 8
"""The paper is estimated on means of 8 x 8 pixels."""
WIDEST_FILL = 41
"""Coarse pixels: what is darker than its surroundings over less than this is ink, not paper."""


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class Ink:
    """Ink of the plot and its neighbourhood.

    Parameters
    ----------
    origin : tuple of int
        Column and row in the image of the top left pixel kept.
    density : array, shape (height, width, channels), float32
        1 - level / paper in each channel; one channel where the page has no colour.
    dark : array, shape (height, width), float32
        Mean of the channels.
    noise : float
        Standard deviation of the noise of ``dark``, with the rounding of grey levels.
    two_level : bool
        True for a 1-bit scan.
    """

    origin: tuple[int, int]
    density: Image
    dark: Image
    noise: float
    two_level: bool


def read_ink(pixels: Pixels, axes: Axes) -> Ink:
    """Ink of the part of the image inside the plot's frame."""
    columns, rows = _crop(pixels, axes)
    chosen = pixels.grey if pixels.colour is None else pixels.colour
    levels = np.ascontiguousarray(chosen[rows, columns])
    if levels.ndim == 3 and _is_neutral(levels):
        levels = np.ascontiguousarray(pixels.grey[rows, columns])
    planes = levels.reshape(levels.shape[0], levels.shape[1], -1)
    density = np.empty(planes.shape, dtype=np.float32)
    for k in range(planes.shape[2]):
        plane = planes[:, :, k]
        np.divide(plane, _paper(plane), out=density[:, :, k], dtype=np.float32)
    np.subtract(1.0, density, out=density)
    dark = density[:, :, 0] if density.shape[2] == 1 else density.mean(axis=2)
    return Ink(
        origin=(columns.start, rows.start),
        density=density,
        dark=dark,
        noise=_noise(dark),
        two_level=_is_two_level(levels),
    )


def _crop(pixels: Pixels, axes: Axes) -> tuple[slice, slice]:
    x0, y0, x1, y1 = axes.frame
    corners = pixels.columns_rows(np.array([[x0, y0], [x1, y0], [x1, y1], [x0, y1]]))
    height, width = pixels.grey.shape
    left, top = np.floor(corners.min(axis=0)).astype(int) - MARGIN
    right, bottom = np.ceil(corners.max(axis=0)).astype(int) + MARGIN + 1
    return slice(max(0, int(left)), min(width, int(right))), slice(max(0, int(top)), min(height, int(bottom)))


def _is_neutral(levels: NDArray[np.uint8]) -> bool:
    sample = levels[::3, ::3].astype(np.int16)
    chroma = sample.max(axis=2) - sample.min(axis=2)
    return bool(np.mean(chroma > 30) < 1e-5)


def _is_two_level(levels: NDArray[np.uint8]) -> bool:
    sample = levels[::2, ::2]
    return bool(np.mean((sample > 16) & (sample < 239)) < 1e-4)


def _paper(plane: NDArray[np.uint8]) -> Image:
    """Level of the bare paper: a closing of the coarse image fills lines and bands, and keeps slow changes of light."""
    height, width = plane.shape
    coarse_size = (max(1, width // COARSE), max(1, height // COARSE))
    coarse = cv2.resize(plane, coarse_size, interpolation=cv2.INTER_AREA)
    reach = WIDEST_FILL
    bordered = cv2.copyMakeBorder(coarse, reach, reach, reach, reach, cv2.BORDER_REPLICATE)
    kernel = np.ones((reach, reach), dtype=np.uint8)
    closed = cv2.morphologyEx(bordered, cv2.MORPH_CLOSE, kernel)[reach:-reach, reach:-reach]
    smooth = cv2.GaussianBlur(closed.astype(np.float32), (0, 0), 3.0, borderType=cv2.BORDER_REPLICATE)
    paper = cv2.resize(np.maximum(smooth, 1.0), (width, height), interpolation=cv2.INTER_LINEAR)
    return np.asarray(paper, dtype=np.float32)


def _noise(dark: Image) -> float:
    """Robust noise from second differences on a sample, at least that of rounding to 256 levels."""
    sample = dark[::3]
    second = sample[:, 2:] - 2.0 * sample[:, 1:-1] + sample[:, :-2]
    spread = float(np.median(np.abs(second))) / 0.6745 / np.sqrt(6.0)
    return max(float(spread), float(1.0 / (255.0 * np.sqrt(12.0))))
