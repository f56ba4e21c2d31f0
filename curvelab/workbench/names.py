"""A file name from a browser, made safe: it names a new file in a folder of our own and nothing else."""

import re
import unicodedata
from pathlib import PurePosixPath, PureWindowsPath

LONGEST = 80

SUFFIXES = {
    "raster": (".png", ".jpg", ".jpeg", ".tif", ".tiff", ".bmp", ".webp"),
    "pdf": (".pdf",),
    "svg": (".svg",),
}
"""Kind of content -> endings it may have; the first is given to a name without one."""

RESERVED = re.compile(r"(?:con|prn|aux|nul|com\d|lpt\d)(?:\.|$)", re.IGNORECASE)


def shown_name(given: str) -> str:
    """A name as it is shown: one line, no folders, no characters that steer a terminal or the direction of writing."""
    last = PureWindowsPath(PurePosixPath(given).name).name
    visible = "".join(sign for sign in last if unicodedata.category(sign)[0] != "C")
    return " ".join(visible.split())[:LONGEST] or "sheet"


def file_name(given: str, kind: str) -> str:
    """A name to keep a sheet under, of letters, digits, spaces, ``.``, ``-``, ``_``, with an ending of its kind."""
    name = unicodedata.normalize("NFKC", shown_name(given))
    name = re.sub(r"[^\w .-]", "_", name).strip(". ")
    suffixes = SUFFIXES[kind]
    stem, dot, ending = name.rpartition(".")
    if not dot or f".{ending.lower()}" not in suffixes:
        stem, ending = name, suffixes[0].removeprefix(".")
    stem = stem.strip(". ") or "sheet"
    return f"{'_' if RESERVED.match(stem) else ''}{stem}.{ending}"
