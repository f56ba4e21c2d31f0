"""Decoded images of every colour mode become grey levels, and colours where the page has any."""

import numpy as np
from numpy.typing import NDArray
from PIL import Image

from curvelab.records.arrays import Bytes

WHITE = 255
ROWS_AT_ONCE = 256

COLOURED_DIFFERENCE = 32
"""Spread between red, green and blue of a pixel from which it counts as coloured: above JPEG's noise on grey ink."""

COLOURED_SHARE = 2e-5
"""Share of coloured pixels from which a page has colour: a thin line of 60 pixels' length on an A4 page at 300 dpi."""


def grey_and_colour(image: Image.Image) -> tuple[Bytes, Bytes | None]:
    """Luminance, shape (rows, columns), and colours, shape (rows, columns, 3), or None where the page is neutral.

    Transparent places are white paper. 16-bit grey is divided down, white-is-zero already turned.

    Raises
    ------
    ValueError
        The colour mode is one that carries no grey levels (32-bit, Lab, ...).
    """
    if image.mode.startswith("I;16") or (image.mode == "I" and image.format == "PNG"):
        return from_sixteen_bits(np.asarray(image)), None
    opaque = on_white(image)
    if opaque.mode in ("1", "L"):
        return np.asarray(opaque.convert("L")), None
    if opaque.mode not in ("RGB", "P", "CMYK", "YCbCr"):
        raise ValueError(f"colour mode {opaque.mode}")
    in_colour = opaque.convert("RGB")
    grey, colour = np.asarray(in_colour.convert("L")), np.asarray(in_colour)
    return grey, colour if has_colour(colour) else None


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


def has_colour(colour: Bytes) -> bool:
    """Whether enough pixels are coloured for colour to mean anything."""
    coloured = 0
    for first in range(0, len(colour), ROWS_AT_ONCE):
        rows = colour[first : first + ROWS_AT_ONCE]
        red, green, blue = rows[..., 0], rows[..., 1], rows[..., 2]
        highest = np.maximum(np.maximum(red, green), blue)
        lowest = np.minimum(np.minimum(red, green), blue)
        coloured += int(np.count_nonzero(highest - lowest >= COLOURED_DIFFERENCE))
    return bool(coloured > COLOURED_SHARE * colour[..., 0].size)
