"""The way in: what is told of files that are no sheets."""

import hashlib
import os
from pathlib import Path

import numpy as np
import pytest
from PIL import Image

from curvelab.errors import SheetError
from curvelab.sheets import limits
from curvelab.sheets.open import open_sheet, sheet_from_bytes
from tests.sheets.handmade import one_page


@pytest.fixture
def png(tmp_path: Path) -> Path:
    path = tmp_path / "breaker.png"
    Image.fromarray(np.zeros((3, 5), dtype=np.uint8)).save(path)
    return path


def test_the_file_is_known_by_its_hash(png: Path) -> None:
    sheet = open_sheet(png)
    assert sheet.sha256 == hashlib.sha256(png.read_bytes()).hexdigest()
    assert sheet.file == str(png)
    again = sheet_from_bytes("breaker.png", png.read_bytes())
    assert (again.sha256, again.file) == (sheet.sha256, "breaker.png")


def test_the_content_decides_and_not_the_name(png: Path) -> None:
    disguised = png.rename(png.with_suffix(".pdf"))
    assert open_sheet(disguised).unit == "px"


def test_missing_file(tmp_path: Path) -> None:
    with pytest.raises(SheetError, match=r"There is no file '.*nothing\.png'"):
        open_sheet(tmp_path / "nothing.png")


def test_folder(tmp_path: Path) -> None:
    with pytest.raises(SheetError, match="is a folder"):
        open_sheet(tmp_path)


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="no named pipes here")
def test_a_pipe_does_not_hang(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.png")
    with pytest.raises(SheetError, match="not a regular file"):
        open_sheet(tmp_path / "pipe.png")


@pytest.mark.parametrize("name", ["a\0b.png", "a" * 5000])
def test_impossible_names(name: str) -> None:
    with pytest.raises(SheetError):
        open_sheet(name)


@pytest.mark.parametrize("data", [b"", b"hello", b"GIF89a" + bytes(50), b"PK\x03\x04", b"<html></html>", bytes(100)])
def test_other_content(data: bytes) -> None:
    with pytest.raises(SheetError) as caught:
        sheet_from_bytes("x.png", data)
    assert "'x.png'" in str(caught.value)
    assert "PNG, JPEG, TIFF, BMP, WebP, PDF or SVG" in str(caught.value)


def test_too_large(png: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "FILE_BYTES", 10)
    with pytest.raises(SheetError, match="At most"):
        open_sheet(png)
    with pytest.raises(SheetError, match="At most"):
        sheet_from_bytes("a", png.read_bytes())


def test_messages_are_one_line() -> None:
    for data, page in ((b"%PDF-1.7\nrubbish", 1), (one_page("0 0 m 1 1 l S"), 7), (b"<svg>\n<\n", 1)):
        with pytest.raises(SheetError) as caught:
            sheet_from_bytes("a", data, page)
        assert "\n" not in str(caught.value)
