"""Type faces: some to train on, others to fit the confidence on, others to measure on.

From the Debian packages fonts-liberation, fonts-freefont-ttf, fonts-croscore, fonts-open-sans, fonts-roboto-unhinted,
fonts-roboto-slab, fonts-lato, fonts-crosextra-carlito, fonts-crosextra-caladea, fonts-cantarell, fonts-linuxlibertine,
fonts-osifont, fonts-play, fonts-cabin, fonts-karla, fonts-go, fonts-hack, fonts-anonymous-pro, fonts-oxygen,
fonts-urw-base35, fonts-texgyre, fonts-sil-gentiumplus, fonts-dosis, fonts-mplus, fonts-junction.
The faces that matplotlib ships are held out: the demo sheets and the benchmark print with them.
"""

from pathlib import Path

import matplotlib

FOLDERS = (Path("/usr/share/fonts"), Path("/usr/share/texmf/fonts"))
SUFFIXES = {".ttf", ".otf"}

TRAINED = (
    "Liberation", "FreeSans", "FreeSerif", "FreeMono", "Arimo", "Tinos", "Cousine", "OpenSans", "Roboto-",
    "RobotoCondensed",
    "RobotoSlab", "Lato-Regular", "Lato-Bold", "Lato-Light", "Lato-Medium", "Caladea", "LinLibertine",
    "LinBiolinum", "osifont",
    "Cabin", "Karla-", "Go-", "AnonymousPro", "Oxygen", "Nimbus", "URWGothic", "C059", "P052", "texgyre",
    "GentiumPlus-", "mplus-1",
)  # fmt: skip
CALIBRATED = ("Carlito", "Cantarell", "Play-", "Hack-", "Dosis-", "Junction", "mplus-2m")
UNSEEN = ("DejaVuSans", "DejaVuSerif", "DejaVuSansMono", "DejaVuSans-Bold", "STIXGeneral", "STIXGeneralBol")
LEFT_OUT = (
    "smallcaps",
    "_K",
    "wght",
    "chorus",
    "Standard",
    "Display",
    "Initials",
    "Capitals",
    "Shadow",
    "Outline",
    "Keyboard",
    "thin",
    "black",
    "heavy",
)


def _matching(prefixes: tuple[str, ...]) -> list[Path]:
    files = sorted(path for folder in FOLDERS for path in folder.rglob("*") if path.suffix in SUFFIXES)
    chosen: dict[str, Path] = {}
    for path in files:
        name = path.stem.lower()
        if any(word.lower() in name for word in LEFT_OUT):
            continue
        if any(path.stem.startswith(prefix) for prefix in prefixes):
            chosen.setdefault(path.stem, path)
    return list(chosen.values())


def trained_faces() -> list[Path]:
    """Files of the faces to train on."""
    return _matching(TRAINED)


def calibration_faces() -> list[Path]:
    """Files of the faces that confidence is fitted on; no face of these families is trained on."""
    return _matching(CALIBRATED)


def unseen_faces() -> list[Path]:
    """Files of the faces to measure on, seen neither in training nor in fitting the confidence."""
    shipped = Path(matplotlib.get_data_path()) / "fonts" / "ttf"
    return [shipped / f"{name}.ttf" for name in UNSEEN]
