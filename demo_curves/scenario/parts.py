"""What every sheet of the scenario is made of: its record, page sizes and the maker's printed furniture."""

from collections.abc import Mapping
from dataclasses import dataclass

from demo_curves.drawing.degrade import Scan
from demo_curves.drawing.design import CurveDesign, Note, Page, SheetDesign, TitleBlock
from demo_curves.drawing.formulas import Line

MAKER = "Quolvane"
SITE = "Riverside pumping station"


@dataclass(frozen=True, kw_only=True, slots=True)
class ScanCopy:
    """A scanned copy of the sheet: how it was scanned, at which resolution, and kept as which kind of file."""

    scan: Scan
    kind: str  # jpg | tif | g4
    dpi: float
    quality: int = 80
    level: float = 170.0  # black below, for g4


@dataclass(frozen=True, kw_only=True, slots=True)
class DemoSheet:
    """One sheet: its design, renderer, the devices it serves, and how its worksheet's places were clicked."""

    name: str
    title: str
    number: str
    design: SheetDesign
    devices: tuple[Mapping[str, object], ...]
    seed: int
    renderer: str = "agg"
    pdf: str = "matplotlib-pdf"
    scan: ScanCopy | None = None
    note: str = ""

    @property
    def document(self) -> dict[str, object]:
        """The worksheet's [document] table."""
        known = {"title": self.title, "issue": self.number, "date": "2024-03", "maker": MAKER, "note": self.note}
        return {key: text for key, text in known.items() if text}


def a4(dpi: float, *, landscape: bool = False) -> Page:
    """A4 in whole pixels."""
    width, height = round(210 / 25.4 * dpi), round(297 / 25.4 * dpi)
    return Page(width_px=height if landscape else width, height_px=width if landscape else height, dpi=dpi)


def line(name: str, shape: Line, **words: object) -> CurveDesign:
    """A curve of a breaker unless the words say otherwise."""
    keys = {"edge": "slow", "meaning": "clearing", "element": "whole"} | words
    return CurveDesign(name=name, current=shape[0], value=shape[1], **keys)  # type: ignore[arg-type]


def block(at_pt: tuple[float, float], width_pt: float, title: str, number: str) -> TitleBlock:
    """The maker's title block, two rows."""
    first = (("MAKER", f"{MAKER} Switchgear"), ("TITLE", title))
    second = (("SITE", SITE), ("SHEET", number), ("ISSUE", "B  2024-03"))
    return TitleBlock(at_pt=at_pt, width_pt=width_pt, rows=(first, second))


def heading(text: str, at_pt: tuple[float, float], size_pt: float = 14.0) -> Note:
    """The sheet's title."""
    return Note(text=text, at_pt=at_pt, size_pt=size_pt, bold=True)


def remarks(at_pt: tuple[float, float], *lines: str) -> Note:
    """Numbered remarks beneath a plot."""
    text = "\n".join(f"{number}  {text}" for number, text in enumerate(lines, start=1))
    return Note(text=text, at_pt=at_pt, size_pt=7.5)
