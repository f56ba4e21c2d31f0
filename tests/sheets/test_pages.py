"""Page counts, against files written by other libraries."""

import pytest
from PIL import Image
from reportlab.pdfgen.canvas import Canvas

from curvelab.errors import SheetError
from curvelab.sheets.pages import page_count


def test_pages_are_those_the_writer_made(tmp_path):
    canvas = Canvas(str(tmp_path / "three.pdf"))
    for _ in range(3):
        canvas.showPage()
    canvas.save()
    page = Image.new("L", (8, 8))
    page.save(tmp_path / "two.tif", save_all=True, append_images=[page])
    page.save(tmp_path / "one.png")
    (tmp_path / "one.svg").write_text('<svg xmlns="http://www.w3.org/2000/svg"/>', encoding="utf-8")
    counts = {name: page_count(tmp_path / name) for name in ("three.pdf", "two.tif", "one.png", "one.svg")}
    assert counts == {"three.pdf": 3, "two.tif": 2, "one.png": 1, "one.svg": 1}


@pytest.mark.parametrize("content", [b"%PDF-1.4 nothing", b"\x89PNG\r\n\x1a\nnothing"])
def test_damaged_files_are_told(content, tmp_path):
    (tmp_path / "bad").write_bytes(content)
    with pytest.raises(SheetError, match="bad"):
        page_count(tmp_path / "bad")
