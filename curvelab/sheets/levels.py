"""Decoded images of every colour mode become grey levels, and colours where the page has any."""

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray
from PIL import Image

from curvelab.records.arrays import Bytes

WHITE = 255
ROWS_AT_ONCE = 256

MODES = ("1", "L", "LA", "La", "P", "PA", "RGB", "RGBA", "RGBa", "RGBX", "CMYK", "YCbCr")
"""Pillow's colour modes with 8 bits of grey or colour."""

COLOURED_DIFFERENCE = 32
"""Spread between red, green and blue of a pixel from which it counts as coloured: above JPEG's noise on grey ink."""

COLOURED_SHARE = 2e-5
"""Share of coloured pixels from which a page has colour: a thin line of 60 pixels' length on an A4 page at 300 dpi."""


class UnknownModeError(ValueError):
    """A colour mode that carries no grey levels."""


Band = Callable[[int, int], Image.Image]
"""Rows of an image from the first to before the second number."""


def image_levels(image: Image.Image) -> tuple[Bytes, Bytes | None]:
    """Levels of a decoded image, see `banded_levels`.

    Raises
    ------
    UnknownModeError
        The colour mode is one that carries no grey levels (32-bit, Lab, ...).
    """
    if not (image.mode in MODES or image.mode.startswith("I;16") or (image.mode == "I" and image.format == "PNG")):
        raise UnknownModeError(image.mode)
    return banded_levels(lambda first, last: image.crop((0, first, image.width, last)), image.size)


def banded_levels(band: Band, size: tuple[int, int]) -> tuple[Bytes, Bytes | None]:
    """Luminance, shape (rows, columns), and colours, shape (rows, columns, 3), or None where the page is neutral.

    Transparent places are white paper; 16-bit grey is divided down. The image is taken in bands of rows, so that no
    second copy of a large page is ever held.

    Parameters
    ----------
    band : callable
        Gives rows of the image.
    size : tuple of int
        Columns and rows.
    """
    columns, rows = size
    grey = np.empty((rows, columns), dtype=np.uint8)
    colour: Bytes | None = None
    coloured = 0
    for first in range(0, rows, ROWS_AT_ONCE):
        last = min(first + ROWS_AT_ONCE, rows)
        opaque = _opaque(band(first, last))
        grey[first:last] = np.asarray(opaque.convert("L"))
        if opaque.mode == "RGB":
            colour = np.empty((rows, columns, 3), dtype=np.uint8) if colour is None else colour
            colour[first:last] = np.asarray(opaque)
            coloured += _coloured(colour[first:last])
    return grey, colour if coloured > COLOURED_SHARE * rows * columns else None


def _opaque(image: Image.Image) -> Image.Image:
    """8-bit grey or RGB on white paper."""
    if image.mode.startswith("I"):
        return Image.fromarray(from_sixteen_bits(np.asarray(image)))
    opaque = on_white(image)
    return opaque.convert("L" if opaque.mode in ("1", "L") else "RGB")


def _coloured(colour: Bytes) -> int:
    """How many pixels are coloured."""
    red, green, blue = colour[..., 0], colour[..., 1], colour[..., 2]
    spread = np.maximum(np.maximum(red, green), blue) - np.minimum(np.minimum(red, green), blue)
    return int(np.count_nonzero(spread >= COLOURED_DIFFERENCE))


def from_sixteen_bits(levels: NDArray[np.generic]) -> Bytes:
    """8-bit levels of 16-bit ones, rounded: 65535 is 255."""
    wide = np.clip(levels, 0, 65535).astype(np.uint32)
    eight: Bytes = ((wide + 128) // 257).astype(np.uint8)
    return eight


def on_white(image: Image.Image) -> Image.Image:
    """The image without transparency, laid on white paper."""
    if image.mode in ("La", "RGBa"):
        image = image.convert(image.mode.upper())
    if "transparency" in image.info:
        image = image.convert("LA" if image.mode in ("1", "L") else "RGBA")
    elif image.mode == "PA":
        image = image.convert("RGBA")
    if image.mode not in ("LA", "RGBA"):
        return image
    flat = image.mode[:-1]
    paper = Image.new(flat, image.size, "white")
    paper.paste(image.convert(flat), mask=image.getchannel("A"))
    return paper
