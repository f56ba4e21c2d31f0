"""The type faces that matplotlib ships, so that a sheet looks the same on every machine."""

from functools import lru_cache
from pathlib import Path

import matplotlib
from matplotlib.font_manager import FontProperties
from matplotlib.textpath import TextToPath

FACES = {
    ("sans", False): "DejaVuSans.ttf",
    ("sans", True): "DejaVuSans-Bold.ttf",
    ("serif", False): "DejaVuSerif.ttf",
    ("serif", True): "DejaVuSerif-Bold.ttf",
    ("mono", False): "DejaVuSansMono.ttf",
    ("mono", True): "DejaVuSansMono-Bold.ttf",
    ("stix", False): "STIXGeneral.ttf",
    ("stix", True): "STIXGeneralBol.ttf",
}
FAMILIES = {"sans": "DejaVu Sans", "serif": "DejaVu Serif", "mono": "DejaVu Sans Mono", "stix": "STIXGeneral"}


def font_file(font: str, bold: bool) -> Path:
    """The face's file."""
    return Path(matplotlib.get_data_path()) / "fonts" / "ttf" / FACES[font, bold]


@lru_cache(maxsize=4096)
def text_width(text: str, font: str, bold: bool, size_pt: float) -> float:
    """Printed width of one line in points."""
    face = FontProperties(fname=str(font_file(font, bold)), size=size_pt)
    width, _, _ = TextToPath().get_text_width_height_descent(text, face, ismath=False)
    return float(width)
