"""Review documents of stored devices, to keep."""

from pathlib import Path
from tempfile import TemporaryDirectory

from curvelab.library.key import split_key
from curvelab.library.library import Library
from curvelab.reading.restore import with_sheets
from curvelab.reports.case import Case
from curvelab.reports.html import html_text
from curvelab.reports.pdf import pdf_bytes
from curvelab.reports.review import review_document
from curvelab.standards.review import review
from curvelab.standards.rules import rules_beside
from curvelab.workbench.pictures import drawing
from curvelab.workbench.route import Content
from curvelab.workbench.settings import Settings

MEDIA = {"pdf": "application/pdf", "html": "text/html"}


def report_of(library: Library, key: str, settings: Settings, ending: str) -> Content:
    """The review document of a revision at settings, as PDF or HTML.

    Raises
    ------
    NotFoundError
        There is no such device or revision.
    DeviceError
        A setting it does not have.
    """
    device = library.device(*split_key(key)).at(**settings)
    with TemporaryDirectory() as folder, drawing:
        case = Case(
            device=device,
            evidence=with_sheets(library.evidence(device.key, device.revision), Path(folder)),
            history=library.history(device.key),
            log=library.log(device.key),
            findings=review([device], rules_beside(library.path)),
        )
        document = review_document(case)
        data = pdf_bytes(document) if ending == "pdf" else html_text(document).encode()
    return Content(data=data, media=MEDIA[ending], name=f"{device.key}-{device.revision}.{ending}")
