"""Random sheets with the words printed on them, at any resolution and quality."""

import math
from dataclasses import dataclass, replace

import numpy as np

from curvelab.records.sheet import Sheet
from curvelab.sheets.open import sheet_from_bytes
from demo_curves.drawing.degrade import Scan, bilevel, scanned
from demo_curves.drawing.design import PlotDesign, SheetDesign
from demo_curves.drawing.files import image_file
from demo_curves.drawing.fonts import text_width
from demo_curves.drawing.furniture import axis_words
from demo_curves.drawing.ink import Words
from demo_curves.drawing.layout import lay_out
from demo_curves.drawing.render import raster
from tests.drawing.shapes import KINDS
from tests.drawing.styles import styled

RAISED = str.maketrans("0123456789-−", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁻")
QUALITIES = ("clean", "grey", "jpeg", "bilevel")
RENDERERS = ("agg", "resvg", "pdfium")


@dataclass(frozen=True, kw_only=True, slots=True)
class Truth:
    """A printed word: its text, the middle of its letters in places, and whether it names an axis.

    ``half`` is half its length and the font size, in points.
    """

    text: str
    middle: tuple[float, float]
    half: tuple[float, float]
    turned_deg: float
    title: bool


@dataclass(frozen=True, kw_only=True, slots=True, eq=False)
class PrintedSheet:
    """A sheet and the words along its axes."""

    sheet: Sheet
    words: tuple[Truth, ...]


def printed_sheet(seed: int, quality: str, dpi: float) -> PrintedSheet:
    """A random sheet drawn at a resolution and spoilt to a quality."""
    rng = np.random.default_rng(seed)
    subject = KINDS[sorted(KINDS)[seed % len(KINDS)]](rng)
    design = _at(styled(subject, rng, line_art=quality == "bilevel"), dpi)
    drawn, page = lay_out(design), design.page
    renderer = RENDERERS[seed % len(RENDERERS)]
    truth = [word for plot in design.plots for word in _axis_truth(plot, design.font)]
    scale = page.dpi / 72.0
    middles = np.array([word.middle for word in truth]) * scale - 0.5
    if quality == "clean":
        data = image_file(raster(drawn, page, renderer), "png", page.dpi)
    else:
        scan = Scan(
            angle_deg=float(rng.uniform(-2, 2)),
            blur_px=float(rng.uniform(0.4, 0.9)),
            noise=float(rng.uniform(2, 8)),
            light=float(rng.uniform(0, 0.15)),
            seed=seed,
            renderer=renderer,
        )
        pixels, scanned_truth = scanned(drawn, page, scan)
        middles = scanned_truth.plots[0].place_map.forward(middles)
        if quality == "bilevel":
            data = image_file(bilevel(pixels, float(rng.uniform(150, 190))), "g4", page.dpi)
        elif quality == "jpeg":
            data = image_file(pixels, "jpg", page.dpi, quality=int(rng.integers(30, 61)))
        else:
            data = image_file(pixels, "tif", page.dpi)
    words = tuple(replace(word, middle=(float(x), float(y))) for word, (x, y) in zip(truth, middles, strict=True))
    return PrintedSheet(sheet=sheet_from_bytes(f"sheet-{seed}", data), words=words)


def _at(design: SheetDesign, dpi: float) -> SheetDesign:
    page = design.page
    size = (math.ceil(page.width_pt * dpi / 72), math.ceil(page.height_pt * dpi / 72))
    return replace(design, page=replace(page, width_px=size[0], height_px=size[1], dpi=dpi))


def _axis_truth(plot: PlotDesign, font: str) -> list[Truth]:
    truth: list[Truth] = []
    for ink in axis_words(plot, font):
        if not isinstance(ink, Words):
            continue
        width = text_width(ink.text, font, ink.bold, ink.size_pt)
        if ink.size_pt < 0.9 * plot.tick_size_pt:  # the exponent of the number before it
            base = truth[-1]
            reach = (base.half[0] + width, base.half[1])
            truth[-1] = replace(base, text=base.text + ink.text.translate(RAISED), half=reach)
        else:
            truth.append(_word(ink, width, title=ink.anchor == "middle"))
    return truth


def _word(ink: Words, width: float, *, title: bool) -> Truth:
    x, y = ink.at_pt
    along = 0.0 if ink.anchor == "middle" else width / 2
    up = 0.36 * ink.size_pt
    turn = math.radians(ink.rotation)
    middle = (x + along * math.cos(turn) - up * math.sin(turn), y - along * math.sin(turn) - up * math.cos(turn))
    return Truth(
        text=ink.text.replace("−", "-"),
        middle=middle,
        half=(width / 2, ink.size_pt),
        turned_deg=ink.rotation,
        title=title,
    )
