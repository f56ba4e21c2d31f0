"""Figures to files by their ending, without dates: the same figure gives the same bytes."""

from io import BytesIO
from pathlib import Path

from matplotlib import rc_context
from matplotlib.figure import Figure

from curvelab.errors import InputError
from curvelab.plots.ink import STYLE

METADATA: dict[str, dict[str, str | None]] = {
    "png": {"Software": "curvelab"},
    "svg": {"Creator": "curvelab", "Date": None},
    "pdf": {"Creator": "curvelab", "Producer": None, "CreationDate": None},
}
"""File ending -> what the file says of itself."""


def picture_format(path: str | Path) -> str:
    """``png``, ``svg`` or ``pdf``, by the file's ending.

    Raises
    ------
    InputError
        Another ending.
    """
    ending = Path(path).suffix.lower().removeprefix(".")
    if ending not in METADATA:
        raise InputError(
            f"No picture can be written as '{Path(path).name}'", "Expected a name that ends in .png, .svg or .pdf"
        )
    return ending


def picture_bytes(figure: Figure, ending: str) -> bytes:
    """The figure as ``png``, ``svg`` or ``pdf``, at its own size and resolution."""
    content = BytesIO()
    with rc_context(STYLE):
        figure.savefig(content, format=ending, dpi=figure.dpi, metadata=METADATA[ending])
    return content.getvalue()


def save_figure(figure: Figure, path: str | Path) -> None:
    """Write the figure at its own size and resolution; nothing is written unless all of it can be drawn.

    Raises
    ------
    InputError
        The ending is not known, or the file cannot be written.
    """
    content = picture_bytes(figure, picture_format(path))
    try:
        Path(path).write_bytes(content)
    except OSError as error:
        raise InputError(f"Picture '{path}' cannot be written: {error.strerror}", "", "Choose another place") from error
