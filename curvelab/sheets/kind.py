"""What a file is, told from its content and never from its name."""

from typing import Literal

Kind = Literal["raster", "pdf", "svg"]

SUPPORTED = "A sheet is a PNG, JPEG, TIFF, BMP, WebP, PDF or SVG file"

PDF_HEADER_WITHIN = 1024
"""Readers accept junk before the PDF header up to here (ISO 32000-1, annex H, implementation note 13)."""

SVG_ROOT_WITHIN = 65_536
"""Comments, a document type and a licence may stand before the root element."""

RASTER_STARTS = (
    b"\x89PNG\r\n\x1a\n",
    b"\xff\xd8\xff",
    b"II*\x00",
    b"MM\x00*",
    b"II+\x00",
    b"MM\x00+",
    b"BM",
)


def kind_of(data: bytes) -> Kind | None:
    """Kind of the content, or None where it is no sheet."""
    if data.startswith(RASTER_STARTS) or (data[:4] == b"RIFF" and data[8:12] == b"WEBP"):
        return "raster"
    if b"%PDF-" in data[:PDF_HEADER_WITHIN]:
        return "pdf"
    head = data[:SVG_ROOT_WITHIN]
    if head.startswith((b"\xff\xfe", b"\xfe\xff")):
        head = head.replace(b"\x00", b"")[2:]
    text = head.removeprefix(b"\xef\xbb\xbf").lstrip()
    if text.startswith(b"<") and (b"<svg" in text or b":svg" in text):
        return "svg"
    return None
