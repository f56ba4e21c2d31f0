"""Image files through Pillow: PNG, JPEG, TIFF, BMP and WebP."""

import io
import threading
import warnings
from collections.abc import Iterator
from contextlib import contextmanager

import numpy as np
from PIL import Image, ImageOps

from curvelab.errors import SheetError
from curvelab.records.sheet import Pixels, Sheet
from curvelab.sheets import limits
from curvelab.sheets.affine import IDENTITY
from curvelab.sheets.levels import UnknownModeError, image_levels
from curvelab.sheets.silent import silent_decoders
from curvelab.sheets.source import Source

FORMATS = ("PNG", "JPEG", "TIFF", "BMP", "WEBP")
PHOTOMETRIC = 262
WHITE_IS_ZERO = 0

_decoding = threading.Lock()
"""Filters of warnings are global to the process, so decoding goes one at a time."""


def raster_page(source: Source) -> Sheet:
    """One page of an image file, turned as its orientation tag says.

    Raises
    ------
    SheetError
        The image is damaged, of a colour mode without grey levels, over the limits, or has no such page.
    """
    with _guarded(source):
        return _decoded(source)


def image_frames(source: Source) -> int:
    """Number of images of a TIFF, 1 of any other image.

    Raises
    ------
    SheetError
        The image is damaged or has too many.
    """
    with _guarded(source), Image.open(io.BytesIO(source.data), formats=FORMATS) as image:
        return _frames(source, image)


@contextmanager
def _guarded(source: Source) -> Iterator[None]:
    """Whatever a decoder raises or prints, as an error that names the file."""
    with _decoding, warnings.catch_warnings(), silent_decoders():
        warnings.simplefilter("ignore")
        warnings.simplefilter("error", Image.DecompressionBombWarning)
        try:
            yield
        except SheetError:
            raise
        except (Image.DecompressionBombError, Image.DecompressionBombWarning) as error:
            raise SheetError(
                f"The image in '{source.name}' claims far too many pixels",
                f"At most {limits.PIXELS / 1e6:.0f} million are read",
                "Save it at a lower resolution, or the plot alone",
            ) from error
        except Exception as error:  # decoders raise nearly every kind of exception on damaged files
            raise source.damaged("an image") from error


def _decoded(source: Source) -> Sheet:
    with Image.open(io.BytesIO(source.data), formats=FORMATS) as image:
        pages = _frames(source, image)
        source.require_page(pages)
        if image.format == "TIFF":
            image.seek(source.page - 1)
        source.require_pixels(*image.size)
        image.load()
        pixels = _pixels(source, image)
    height, width = pixels.grey.shape
    return Sheet(
        file=source.name,
        sha256=source.sha256,
        page=source.page,
        pages=pages,
        width=float(width),
        height=float(height),
        unit="px",
        pixels=pixels,
    )


def _frames(source: Source, image: Image.Image) -> int:
    """Pages of the file; further frames of an animation or a phone photo are no pages."""
    if image.format != "TIFF":
        return 1
    frames = 0
    while frames <= limits.FRAMES:
        try:
            image.seek(frames)
        except EOFError:
            return frames
        frames += 1
    raise SheetError(f"'{source.name}' has more than {limits.FRAMES} pages", "", "Save the page as a file of its own")


def _pixels(source: Source, image: Image.Image) -> Pixels:
    inverted = image.mode.startswith("I;16") and _white_is_zero(image)
    ImageOps.exif_transpose(image, in_place=True)
    try:
        grey, colour = image_levels(image)
    except UnknownModeError as error:
        raise SheetError(
            f"Page {source.page} of '{source.name}' is an image of colour mode {error}, which has no grey levels",
            "8 or 16 bits of grey or colour are read",
            "Save it as 8-bit grey or RGB",
        ) from error
    return Pixels(grey=np.invert(grey) if inverted else grey, colour=colour, to_place=IDENTITY)


def _white_is_zero(image: Image.Image) -> bool:
    """Pillow turns a white-is-zero TIFF at 8 bits but not at 16."""
    tags = getattr(image, "tag_v2", {})
    return bool(tags.get(PHOTOMETRIC, 1) == WHITE_IS_ZERO)
