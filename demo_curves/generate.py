"""Draws the demo sheets afresh: `python -m demo_curves.generate`. The same files every time."""

import shutil
from collections.abc import Callable, Mapping
from pathlib import Path

from demo_curves.drawing.degrade import bilevel, scanned
from demo_curves.drawing.design import Page
from demo_curves.drawing.files import image_file
from demo_curves.drawing.layout import DrawnPage, lay_out
from demo_curves.drawing.render import VECTOR, raster
from demo_curves.drawing.truth import SheetTruth
from demo_curves.drawing.worksheet import Clicks, WorksheetHead, worksheet_text
from demo_curves.plain_worksheets import handbook_b32, isolator
from demo_curves.scenario import breakers, fuses, moulded_case, others, residual
from demo_curves.scenario.parts import DemoSheet, ScanCopy
from demo_curves.truth_file import truth_text

HERE = Path(__file__).parent

SHEETS: tuple[Callable[[], DemoSheet], ...] = (
    breakers.band_b,
    breakers.bands_c_and_d,
    breakers.late_breaker,
    breakers.loose_magnetic_breaker,
    fuses.family,
    fuses.both_lines,
    residual.general,
    residual.delayed,
    residual.rcbo_overcurrent,
    residual.rcbo_residual,
    moulded_case.long_time,
    moulded_case.short_time,
    moulded_case.instantaneous,
    others.relay,
    others.let_through,
)

Files = Mapping[str, bytes]
"""Path beneath demo_curves/ -> contents."""


def sheet_files(sheet: DemoSheet) -> Files:
    """Every file of one sheet: PNG, PDF, scan where it has one, a worksheet each, and the truth."""
    drawn = lay_out(sheet.design)
    page = sheet.design.page
    in_pixels = drawn.truth.to_pixels()
    files = {
        f"sheets/{sheet.name}.png": image_file(raster(drawn, page, sheet.renderer), "palette", page.dpi),
        f"sheets/{sheet.name}.toml": _worksheet(sheet, f"{sheet.name}.png", in_pixels, 0),
        f"sheets/vector/{sheet.name}.pdf": VECTOR[sheet.pdf](drawn.ink, page),
        f"sheets/vector/{sheet.name}.toml": _worksheet(sheet, f"{sheet.name}.pdf", drawn.truth, 1),
    }
    scans = {}
    if sheet.scan is not None:
        name = f"{sheet.name}.{'jpg' if sheet.scan.kind == 'jpg' else 'tif'}"
        files[f"sheets/scans/{name}"], scans[name] = _scan_file(drawn, page, sheet.scan)
        files[f"sheets/scans/{sheet.name}.toml"] = _worksheet(sheet, name, scans[name], 2)
    files[f"truth/{sheet.name}.json"] = truth_text(drawn.truth, in_pixels, scans).encode()
    return files


def plain_files() -> Files:
    """Worksheets without a sheet."""
    return {
        "sheets/handbook-b32.toml": handbook_b32().encode(),
        "sheets/isolator.toml": isolator().encode(),
    }


def _worksheet(sheet: DemoSheet, file: str, truth: SheetTruth, copy: int) -> bytes:
    head = WorksheetHead(file=file, document=sheet.document, devices=sheet.devices)
    return worksheet_text(truth, head, Clicks(seed=10 * sheet.seed + copy)).encode()


def _scan_file(drawn: DrawnPage, page: Page, copy: ScanCopy) -> tuple[bytes, SheetTruth]:
    """The scan's file and its truth, the page laid on the glass at the scan's own resolution."""
    scale = copy.dpi / page.dpi
    on_glass = Page(width_px=round(page.width_px * scale), height_px=round(page.height_px * scale), dpi=copy.dpi)
    pixels, truth = scanned(drawn, on_glass, copy.scan)
    if copy.kind == "g4":
        pixels = bilevel(pixels, copy.level)
    return image_file(pixels, copy.kind, copy.dpi, copy.quality), truth


def write_all(folder: Path) -> None:
    """Replace the folder's sheets and truth by newly drawn ones."""
    for part in ("sheets", "truth"):
        shutil.rmtree(folder / part, ignore_errors=True)
    for files in (*(sheet_files(make()) for make in SHEETS), plain_files()):
        for path, contents in files.items():
            target = folder / path
            target.parent.mkdir(parents=True, exist_ok=True)
            target.write_bytes(contents)


if __name__ == "__main__":
    write_all(HERE)
