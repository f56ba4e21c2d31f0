"""Pages that ask PDFium for more than there is: read apart within limits, or refused in one line."""

import zlib
from pathlib import Path

import numpy as np
import pytest

from curvelab.errors import SheetError
from curvelab.sheets import limits, pdf
from curvelab.sheets.apart import read_apart
from curvelab.sheets.open import sheet_from_bytes
from curvelab.sheets.source import Source
from curvelab.sheets.weight import is_light
from tests.sheets.handmade import one_page, stream

DEMO = Path(__file__).parents[2] / "demo_curves" / "sheets" / "vector"
DEEP, WIDE = 12, 10


def nested_forms() -> bytes:
    """Each form draws the next ten times: a million million lines in two thousand bytes."""
    uses = " ".join(["/F Do"] * WIDE)
    forms = {
        5 + level: stream(
            (uses if level < DEEP else "0 0 m 10 10 l S").encode(),
            f"/Type /XObject /Subtype /Form /BBox [0 0 99 99] /Resources << /XObject << /F {6 + level} 0 R >> >>",
        )
        for level in range(DEEP + 1)
    }
    return one_page("/F Do", resources="/XObject << /F 5 0 R >>", extra=forms)


def flate_bomb() -> bytes:
    """A content stream of two thousand million blanks in two million bytes."""
    packer = zlib.compressobj(9)
    packed = b"".join([*(packer.compress(b" " * 10_000_000) for _ in range(200)), packer.flush()])
    return one_page("q Q", resources="/XObject << /F 5 0 R >>", extra={
        5: stream(packed, "/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Filter /FlateDecode")
    }).replace(b"q Q", b"/F Do")  # fmt: skip


@pytest.mark.parametrize("bomb", [nested_forms, flate_bomb])
def test_bombs_are_heavy_and_refused_in_one_line(bomb: object, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "PAGE_SECONDS", 6)
    data = bomb()  # type: ignore[operator]
    assert not is_light(data)
    try:
        sheet = sheet_from_bytes("bomb.pdf", data)
    except SheetError as error:
        assert "\n" not in str(error)  # noqa: PT017 - both ways out are right
    else:
        assert len(sheet.strokes) <= limits.STROKES


@pytest.mark.parametrize("path", sorted(DEMO.glob("*.pdf"))[:4], ids=lambda path: path.name)
def test_printed_sheets_are_light(path: Path) -> None:
    assert is_light(path.read_bytes())


def test_a_page_read_apart_is_the_page_read_here() -> None:
    data = (DEMO / "mcb-b.pdf").read_bytes()
    source = Source(name="mcb-b.pdf", data=data, sha256="0", page=1)
    here, apart = pdf.pdf_here(source), read_apart(source)
    assert (apart.width, apart.height, apart.pages, apart.words) == (here.width, here.height, here.pages, here.words)
    assert len(apart.strokes) == len(here.strokes)
    for one, other in zip(here.strokes, apart.strokes, strict=True):
        np.testing.assert_array_equal(one.points, other.points)
        assert not other.points.flags.writeable


def test_what_the_reader_refuses_is_told_across() -> None:
    with pytest.raises(SheetError, match="has no page 7"):
        read_apart(Source(name="b.pdf", data=(DEMO / "mcb-b.pdf").read_bytes(), sha256="0", page=7))
