"""Documents to files by their ending; the same document gives the same bytes."""

from pathlib import Path

from curvelab.errors import InputError
from curvelab.reports.document import Document
from curvelab.reports.html import html_text
from curvelab.reports.pdf import pdf_bytes

ENDINGS = (".pdf", ".html")


def checked_ending(path: str | Path) -> str:
    """``.pdf`` or ``.html``, by the file's ending.

    Raises
    ------
    InputError
        Another ending.
    """
    ending = Path(path).suffix.lower()
    if ending not in ENDINGS:
        raise InputError(
            f"No report can be written as '{Path(path).name}'", "Expected a name that ends in .pdf or .html"
        )
    return ending


def write_document(document: Document, path: str | Path) -> None:
    """Write a document as PDF or HTML; nothing is written unless all of it can be made.

    Raises
    ------
    InputError
        The ending is not known, or the file cannot be written.
    """
    is_pdf = checked_ending(path) == ".pdf"
    content = pdf_bytes(document) if is_pdf else html_text(document).encode("utf-8")
    try:
        Path(path).write_bytes(content)
    except OSError as error:
        raise InputError(f"Report '{path}' cannot be written: {error.strerror}", "", "Choose another place") from error
