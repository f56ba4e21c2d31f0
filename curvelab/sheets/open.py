"""The one way in: a file, or its bytes, and a page become a Sheet."""

import hashlib
import os
from collections.abc import Callable, Mapping
from pathlib import Path

from curvelab.errors import SheetError
from curvelab.records.sheet import Sheet
from curvelab.sheets import limits
from curvelab.sheets.kind import SUPPORTED, Kind, kind_of
from curvelab.sheets.pdf import pdf_page
from curvelab.sheets.raster import raster_page
from curvelab.sheets.source import Source
from curvelab.sheets.strokes import TooManyPointsError
from curvelab.sheets.svg import svg_page

READERS: Mapping[Kind | None, Callable[[Source], Sheet]] = {"raster": raster_page, "pdf": pdf_page, "svg": svg_page}


def open_sheet(path: str | os.PathLike[str], page: int = 1) -> Sheet:
    """Read one page of a sheet's file.

    Parameters
    ----------
    path : str or path
        PNG, JPEG, TIFF, BMP, WebP, PDF or SVG; told by the content, not by the name.
    page : int
        Counted from 1.

    Raises
    ------
    SheetError
        The file is missing, unreadable, of another kind, damaged or over the limits, or has no such page.
    """
    name = os.fspath(path)
    return sheet_from_bytes(name, read_file(name), page)


def sheet_from_bytes(name: str, data: bytes, page: int = 1) -> Sheet:
    """Read one page of a sheet whose bytes are at hand; ``name`` is kept and named in messages.

    Raises
    ------
    SheetError
        The content is of another kind, damaged or over the limits, or has no such page.
    """
    source = Source(name=name, data=data, sha256=hashlib.sha256(data).hexdigest(), page=page)
    if not data:
        raise SheetError(f"'{name}' is empty", SUPPORTED)
    if len(data) > limits.FILE_BYTES:
        raise too_large(name, len(data))
    reader = READERS.get(kind_of(data))
    if reader is not None:
        try:
            return reader(source)
        except TooManyPointsError as error:
            raise source.over("points on its lines", limits.STROKE_POINTS) from error
    raise SheetError(f"'{name}' is not a sheet that can be read", SUPPORTED, "Save the page as one of these")


def read_file(name: str) -> bytes:
    """Bytes of a regular file within the size limit.

    Raises
    ------
    SheetError
        It is missing, a folder or no regular file, may not be read, or is too large.
    """
    path = Path(name)
    try:
        if path.is_dir():
            raise SheetError(f"'{name}' is a folder", "One file is expected", "Name a file in it")
        if not path.exists():
            raise SheetError(f"There is no file '{name}'", "", "Check the name and the folder")
        if not path.is_file():
            raise SheetError(f"'{name}' is not a regular file", SUPPORTED)
        if (size := path.stat().st_size) > limits.FILE_BYTES:
            raise too_large(name, size)
        return path.read_bytes()
    except (OSError, ValueError) as error:
        if isinstance(error, SheetError):
            raise
        reason = getattr(error, "strerror", None) or "the name is not possible"
        raise SheetError(f"'{name}' cannot be read: {reason}", "", "Check the name and the permissions") from error


def too_large(name: str, size: int) -> SheetError:
    """The error for a file over the size limit."""
    return SheetError(
        f"'{name}' has {size / 1e6:.0f} MB",
        f"At most {limits.FILE_BYTES / 1e6:.0f} MB are read",
        "Save the page with the curves as a file of its own",
    )
