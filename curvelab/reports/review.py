"""The review document of one device: all that a reviewer needs to sign, from the sheet to the findings."""

from dataclasses import replace
from functools import partial

from matplotlib.figure import Figure

from curvelab import __version__
from curvelab.plots.bands import bands_figure
from curvelab.plots.subject import description
from curvelab.reports.budget import budget_section
from curvelab.reports.case import Case
from curvelab.reports.device_parts import curves_section, device_section, sources_section
from curvelab.reports.document import Document, Free, Plate, Section
from curvelab.reports.forms import forms_section
from curvelab.reports.reading_parts import axes_section, residuals_section, sheets_section
from curvelab.reports.review_parts import (
    cautions_section,
    findings_section,
    history_section,
    summary_section,
    warnings_section,
)

HEADINGS = {"time": "Band and limits", "let_through": "Let-through energy", "peak": "Cut-off current"}
REDRAWN = "Redrawn from the stored points. Nothing is drawn beyond what the sheet shows."
CAPTIONS = {
    "time": f"{REDRAWN} A bracket is open to the side its requirement permits.",
    "let_through": REDRAWN,
    "peak": REDRAWN,
}


def review_document(case: Case) -> Document:
    """The whole document; sections without content are left out."""
    sections = [
        summary_section(case),
        device_section(case),
        curves_section(case),
        sources_section(case),
        findings_section(case),
        warnings_section(case),
        budget_section(case),
        forms_section(case),
        axes_section(case),
        cautions_section(case),
        history_section(case),
        *_bands_sections(case),
        sheets_section(case),
        residuals_section(case),
    ]
    return Document(
        title="Review document",
        name=case.name,
        subtitle=description(case.record.nameplate),
        sections=tuple(section for section in sections if section is not None),
        program=f"curvelab {__version__}",
    )


def _bands_sections(case: Case) -> list[Section]:
    """The bands redrawn: a section for each quantity, a page for each base that currents are counted in."""
    curves = case.record.curves
    return [
        Section(
            heading=HEADINGS[quantity],
            blocks=tuple(
                Plate(make=partial(_bands, case, quantity, base), caption=CAPTIONS[quantity])
                for base in dict.fromkeys(curve.base for curve in curves if curve.quantity == quantity)
            ),
        )
        for quantity in dict.fromkeys(curve.quantity for curve in curves)
    ]


def _bands(case: Case, quantity: str, base: str, free: Free) -> Figure:
    curves = tuple(curve for curve in case.record.curves if curve.base == base)
    return bands_figure([replace(case.record, curves=curves)], findings=case.findings, quantity=quantity, free=free)
