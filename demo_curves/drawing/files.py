"""Pixels as the files people keep: PNG, JPEG, TIFF and fax-coded TIFF."""

import io

import numpy as np
from PIL import Image

from demo_curves.drawing.render import Pixels


def image_file(pixels: Pixels, kind: str, dpi: float, quality: int = 85) -> bytes:
    """An image file: `png`, `palette` (PNG of 256 colours), `jpg`, `tif` (grey, packed) or `g4` (1-bit TIFF)."""
    image = Image.fromarray(pixels)
    target = io.BytesIO()
    density = (dpi, dpi)
    match kind:
        case "png":
            image.save(target, "PNG", dpi=density, optimize=True)
        case "palette":
            few = image.quantize(256, method=Image.Quantize.MEDIANCUT, dither=Image.Dither.NONE)
            few.save(target, "PNG", dpi=density, optimize=True)
        case "jpg":
            image.save(target, "JPEG", dpi=density, quality=quality)
        case "tif":
            image.save(target, "TIFF", dpi=density, compression="tiff_adobe_deflate")
        case "g4":
            image.convert("1", dither=Image.Dither.NONE).save(target, "TIFF", dpi=density, compression="group4")
        case _:
            raise ValueError(f"Image kind '{kind}' is not one of png, palette, jpg, tif, g4")
    return target.getvalue()


def pixels_of(file: bytes) -> Pixels:
    """Pixels of an image file: grey (height, width) or RGB (height, width, 3)."""
    image = Image.open(io.BytesIO(file))
    if image.mode in {"1", "L"}:
        return np.asarray(image.convert("L")).copy()
    return np.asarray(image.convert("RGB")).copy()
