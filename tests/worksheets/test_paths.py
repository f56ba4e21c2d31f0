import pytest

from curvelab.errors import WorksheetError
from curvelab.worksheets.paths import check_relative, sheet_path
from curvelab.worksheets.read import parse_worksheet, read_worksheet

OUTSIDE = [
    "/etc/passwd",
    "../breaker.png",
    "sheets/../../breaker.png",
    "sheets\\..\\..\\breaker.png",
    "C:\\breaker.png",
    "C:breaker.png",
    "c:/breaker.png",
    "\\breaker.png",
    "\\\\server\\share\\breaker.png",
    "//server/share/breaker.png",
    "~/breaker.png",
    "~other/breaker.png",
    "breaker.png:stream",
    ".",
    "..",
    "a\0b.png",
    "a\nb.png",
    "x" * 2000,
]


@pytest.mark.parametrize("file", OUTSIDE)
def test_a_file_outside_the_worksheets_folder_is_refused(file):
    with pytest.raises(WorksheetError) as refused:
        check_relative(file, "works.toml, [sheet]")
    assert "works.toml, [sheet]" in str(refused.value)
    assert len(str(refused.value)) < 300


@pytest.mark.parametrize("file", ["breaker.png", "sheets/breaker.png", "a..b.png", "Blatt ä.png"])
def test_a_file_beside_or_beneath_the_worksheet_is_taken(file, tmp_path):
    assert sheet_path(tmp_path / "works.toml", file) == tmp_path / file


def test_a_windows_path_is_read_so_that_it_opens_elsewhere():
    assert parse_worksheet("format = 1\n[sheet]\nfile = 'sheets\\breaker.png'").sheet.file == "sheets/breaker.png"


def test_a_link_out_of_the_folder_is_refused(tmp_path):
    outside = tmp_path / "outside"
    folder = tmp_path / "works"
    outside.mkdir()
    folder.mkdir()
    (outside / "breaker.png").write_bytes(b"")
    try:
        (folder / "breaker.png").symlink_to(outside / "breaker.png")
        (folder / "sheets").symlink_to(outside, target_is_directory=True)
    except OSError:
        pytest.skip("links need a permission here")
    for file in ("breaker.png", "sheets/breaker.png"):
        (folder / "works.toml").write_text(f'format = 1\n[sheet]\nfile = "{file}"\n')
        with pytest.raises(WorksheetError, match="outside"):
            read_worksheet(folder / "works.toml")


def test_a_link_that_stays_inside_is_taken(tmp_path):
    (tmp_path / "real.png").write_bytes(b"")
    try:
        (tmp_path / "link.png").symlink_to(tmp_path / "real.png")
    except OSError:
        pytest.skip("links need a permission here")
    assert sheet_path(tmp_path / "works.toml", "link.png") == tmp_path / "link.png"


def test_a_link_in_a_circle_is_refused(tmp_path):
    try:
        (tmp_path / "a.png").symlink_to(tmp_path / "b.png")
        (tmp_path / "b.png").symlink_to(tmp_path / "a.png")
    except OSError:
        pytest.skip("links need a permission here")
    with pytest.raises(WorksheetError, match="followed"):
        sheet_path(tmp_path / "works.toml", "a.png")
