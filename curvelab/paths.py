"""Where the files shipped with the program lie: inside the package when installed, beside it in a checkout."""

from pathlib import Path

from curvelab.errors import InputError

PACKAGE = Path(__file__).parent


def shipped(folder: str) -> Path:
    """The folder ``database`` or ``demo_curves`` that belongs to this program.

    Raises
    ------
    InputError
        The program is not installed completely.
    """
    for place in (PACKAGE / folder, PACKAGE.parent / folder):
        if place.is_dir():
            return place
    raise InputError(f"The program's folder '{folder}' is missing beside {PACKAGE}", "", "Install curvelab again")
