"""Where the library file lies: the path given, else CURVELAB_LIBRARY, else the user's data folder."""

import os
import sys
from pathlib import Path

VARIABLE = "CURVELAB_LIBRARY"
FILE = "library.sqlite"


def library_path(path: str | os.PathLike[str] | None = None) -> Path:
    """The absolute path of the library file; it need not exist."""
    chosen = path or os.environ.get(VARIABLE)
    return Path(chosen).expanduser().absolute() if chosen else data_folder() / FILE


def data_folder() -> Path:
    """The user's folder for the data of this program, as each system places it."""
    if sys.platform == "win32":
        parent = Path(os.environ.get("LOCALAPPDATA") or Path.home() / "AppData" / "Local")
    elif sys.platform == "darwin":
        parent = Path.home() / "Library" / "Application Support"
    else:
        parent = Path(os.environ.get("XDG_DATA_HOME") or Path.home() / ".local" / "share")
    return parent / "curvelab"
