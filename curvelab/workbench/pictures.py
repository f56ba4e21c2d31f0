"""Overlays of stored readings as pictures."""

import tempfile
import threading
from pathlib import Path

from curvelab.plots.overlay import draw_overlay
from curvelab.reading.restore import restored
from curvelab.records.evidence import Evidence
from curvelab.workbench.failures import Unknown
from curvelab.workbench.route import Content

drawing = threading.Lock()
"""The plotting library's settings are global to the process, so pictures are drawn one at a time."""


def overlay_of(evidence: Evidence, number: int) -> Content:
    """A reading that led to a revision over its sheet, as it was stored.

    Raises
    ------
    Unknown
        There is no such reading.
    InputError
        The sheet's bytes were not kept, or there is no sheet.
    """
    if not 1 <= number <= len(evidence.readings):
        raise Unknown(f"'{evidence.key}' has {len(evidence.readings)} readings, no reading {number}")
    with tempfile.TemporaryDirectory() as folder, drawing:
        picture = Path(folder) / "overlay.png"
        draw_overlay(restored(evidence.readings[number - 1], Path(folder) / "sheet"), picture)
        return Content(data=picture.read_bytes(), media="image/png")
