"""PDF files written object by object, so that a test knows every number in them."""

from collections.abc import Mapping


def stream(content: bytes, entries: str = "") -> bytes:
    """A stream object."""
    return b"<< /Length %d %s >>\nstream\n%s\nendstream" % (len(content), entries.encode(), content)


def pdf(objects: Mapping[int, bytes | str]) -> bytes:
    """A file of numbered objects; object 1 is the catalogue."""
    out = bytearray(b"%PDF-1.7\n")
    offsets: dict[int, int] = {}
    for number, body in sorted(objects.items()):
        offsets[number] = len(out)
        text = body.encode() if isinstance(body, str) else body
        out += b"%d 0 obj\n%s\nendobj\n" % (number, text)
    start, size = len(out), max(objects) + 1
    out += b"xref\n0 %d\n0000000000 65535 f \n" % size
    for number in range(1, size):
        out += b"%010d 00000 n \n" % offsets[number] if number in offsets else b"0000000000 00000 f \n"
    out += b"trailer\n<< /Size %d /Root 1 0 R >>\nstartxref\n%d\n%%%%EOF\n" % (size, start)
    return bytes(out)


def one_page(
    content: str, page: str = "", resources: str = "", extra: Mapping[int, bytes | str] | None = None
) -> bytes:
    """A file of one page, 200 x 300 points unless ``page`` says otherwise; ``extra`` objects count from 5."""
    box = "" if "/MediaBox" in page else "/MediaBox [0 0 200 300]"
    return pdf(
        {
            1: "<< /Type /Catalog /Pages 2 0 R >>",
            2: "<< /Type /Pages /Kids [3 0 R] /Count 1 >>",
            3: f"<< /Type /Page /Parent 2 0 R {box} {page} /Contents 4 0 R /Resources << {resources} >> >>",
            4: stream(content.encode()),
            **(extra or {}),
        }
    )
