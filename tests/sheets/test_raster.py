"""Image files against the exact values that were written."""

import io

import numpy as np
import pytest
import tifffile
from PIL import Image

from curvelab.errors import SheetError
from curvelab.sheets import limits
from curvelab.sheets.open import sheet_from_bytes

RNG = np.random.default_rng(20)
GREY = RNG.integers(0, 256, (23, 37), dtype=np.uint8)
RGB = RNG.integers(0, 256, (23, 37, 3), dtype=np.uint8)
ORIENTATION = 0x0112


def saved(image: Image.Image, kind: str, **options: object) -> bytes:
    buffer = io.BytesIO()
    image.save(buffer, kind, **options)
    return buffer.getvalue()


def luminance(rgb: np.ndarray) -> np.ndarray:
    """Luma of ITU-R BT.601, rounded."""
    return np.rint(rgb @ np.array([0.299, 0.587, 0.114]))


@pytest.mark.parametrize("kind", ["PNG", "TIFF", "BMP"])
def test_grey_levels_are_kept(kind: str) -> None:
    sheet = sheet_from_bytes("a.bin", saved(Image.fromarray(GREY), kind))
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.grey, GREY)
    assert sheet.pixels.colour is None
    assert (sheet.width, sheet.height, sheet.unit, sheet.page, sheet.pages) == (37.0, 23.0, "px", 1, 1)
    assert np.array_equal(sheet.pixels.to_place, [[1, 0, 0], [0, 1, 0]])
    assert not sheet.is_vector


@pytest.mark.parametrize(("kind", "options"), [("PNG", {}), ("TIFF", {}), ("BMP", {}), ("WEBP", {"lossless": True})])
def test_colours_are_kept_and_grey_is_their_luminance(kind: str, options: dict[str, object]) -> None:
    sheet = sheet_from_bytes("a.bin", saved(Image.fromarray(RGB), kind, **options))
    assert sheet.pixels is not None
    assert sheet.pixels.colour is not None
    assert np.array_equal(sheet.pixels.colour, RGB)
    assert np.abs(sheet.pixels.grey - luminance(RGB)).max() <= 1


def test_a_page_larger_than_one_band_is_whole() -> None:
    grey = RNG.integers(0, 256, (700, 11), dtype=np.uint8)
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(grey), "PNG"))
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.grey, grey)


def test_grey_written_as_rgb_has_no_colour() -> None:
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(GREY).convert("RGB"), "PNG"))
    assert sheet.pixels is not None
    assert sheet.pixels.colour is None
    assert np.array_equal(sheet.pixels.grey, GREY)


def test_one_thin_coloured_line_gives_the_page_colour() -> None:
    page = np.full((400, 300, 3), 255, dtype=np.uint8)
    page[100, 40:240] = (200, 30, 30)
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(page), "PNG"))
    assert sheet.pixels is not None
    assert sheet.pixels.colour is not None


def test_transparency_is_white_paper() -> None:
    rgba = np.zeros((4, 5, 4), dtype=np.uint8)
    rgba[1, 2] = (255, 0, 0, 255)
    rgba[2, 3] = (0, 0, 0, 128)
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(rgba), "PNG"))
    assert sheet.pixels is not None
    assert sheet.pixels.colour is not None
    assert tuple(sheet.pixels.colour[1, 2]) == (255, 0, 0)
    assert sheet.pixels.grey[0, 0] == 255
    assert abs(int(sheet.pixels.grey[2, 3]) - 127) <= 1


def test_a_transparent_grey_level_is_white_paper() -> None:
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(GREY), "PNG", transparency=int(GREY[3, 4])))
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.grey, np.where(GREY[3, 4] == GREY, 255, GREY))


def test_palette_colours() -> None:
    image = Image.fromarray(RGB).convert("P", palette=Image.Palette.ADAPTIVE)
    sheet = sheet_from_bytes("a.png", saved(image, "PNG"))
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.colour, np.asarray(image.convert("RGB")))


@pytest.mark.parametrize("compression", ["group4", "group3", "tiff_lzw", "tiff_deflate", "packbits", None])
def test_one_bit_tiff(compression: str | None) -> None:
    bits = GREY > 127
    options = {"compression": compression} if compression else {}
    sheet = sheet_from_bytes("a.tif", saved(Image.fromarray(bits), "TIFF", **options))
    assert sheet.pixels is not None
    assert np.array_equal(sheet.pixels.grey, np.where(bits, 255, 0))


def sixteen_bit_tiff(levels: np.ndarray, photometric: str, byteorder: str) -> bytes:
    buffer = io.BytesIO()
    tifffile.imwrite(buffer, levels, photometric=photometric, byteorder=byteorder)
    return buffer.getvalue()


@pytest.mark.parametrize(("photometric", "byteorder"), [("minisblack", "<"), ("minisblack", ">"), ("miniswhite", "<")])
def test_sixteen_bit_tiff_both_ways_round(photometric: str, byteorder: str) -> None:
    """Written by an independent library (tifffile): Pillow itself leaves 16-bit white-is-zero as it is."""
    levels = RNG.integers(0, 65536, (9, 13), dtype=np.uint16)
    sheet = sheet_from_bytes("a.tif", sixteen_bit_tiff(levels, photometric, byteorder))
    assert sheet.pixels is not None
    expected = np.rint(levels / 257.0)
    assert np.array_equal(sheet.pixels.grey, 255 - expected if photometric == "miniswhite" else expected)


def test_sixteen_bit_white_is_zero_the_other_byte_order_is_refused_and_not_misread() -> None:
    with pytest.raises(SheetError, match="feature that is not known"):
        sheet_from_bytes("a.tif", sixteen_bit_tiff(np.ones((9, 13), dtype=np.uint16), "miniswhite", ">"))


def test_sixteen_bit_png_is_not_cut_off() -> None:
    levels = np.array([[0, 257, 32768, 65535]], dtype=np.uint16)
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(levels), "PNG"))
    assert sheet.pixels is not None
    assert sheet.pixels.grey.tolist() == [[0, 1, 128, 255]]


def test_pages_of_a_tiff() -> None:
    pages = [Image.fromarray(np.full((3, 4 + k), 40 * k, dtype=np.uint8)) for k in range(4)]
    data = saved(pages[0], "TIFF", save_all=True, append_images=pages[1:])
    for k in range(4):
        sheet = sheet_from_bytes("a.tif", data, page=k + 1)
        assert sheet.pixels is not None
        assert (sheet.pages, sheet.page, sheet.width) == (4, k + 1, 4.0 + k)
        assert np.all(sheet.pixels.grey == 40 * k)
    with pytest.raises(SheetError, match=r"'a.tif' has no page 5\. It has 4 pages\."):
        sheet_from_bytes("a.tif", data, page=5)
    with pytest.raises(SheetError, match="no page 0"):
        sheet_from_bytes("a.tif", data, page=0)


TURNS = {
    1: lambda a: a,
    2: np.fliplr,
    3: lambda a: np.rot90(a, 2),
    4: np.flipud,
    5: np.transpose,
    6: lambda a: np.rot90(a, -1),
    7: lambda a: np.rot90(a, 2).T,
    8: np.rot90,
}
"""How stored rows must be turned to be seen upright (TIFF 6.0 and Exif 2.3, tag Orientation)."""


@pytest.mark.parametrize("kind", ["PNG", "TIFF", "JPEG"])
@pytest.mark.parametrize("orientation", TURNS)
def test_orientation_tag(kind: str, orientation: int) -> None:
    stored = np.kron(np.array([[0, 60, 120], [160, 200, 255]], dtype=np.uint8), np.ones((16, 16), dtype=np.uint8))
    exif = Image.Exif()
    exif[ORIENTATION] = orientation
    sheet = sheet_from_bytes("a.bin", saved(Image.fromarray(stored), kind, exif=exif))
    assert sheet.pixels is not None
    seen = TURNS[orientation](stored)
    assert sheet.pixels.grey.shape == seen.shape
    assert np.abs(sheet.pixels.grey.astype(int) - seen).max() <= (3 if kind == "JPEG" else 0)


def test_cmyk_jpeg_has_dark_ink_on_light_paper() -> None:
    page = np.full((64, 64, 3), 255, dtype=np.uint8)
    page[:, 24:40] = 0
    sheet = sheet_from_bytes("a.jpg", saved(Image.fromarray(page).convert("CMYK"), "JPEG", quality=95))
    assert sheet.pixels is not None
    assert sheet.pixels.grey[:, :16].min() > 250
    assert sheet.pixels.grey[:, 28:36].max() < 5
    assert sheet.pixels.colour is None


def test_jpeg_noise_on_neutral_ink_is_not_colour() -> None:
    noisy = np.clip(Image.fromarray(GREY).resize((370, 230)) + RNG.normal(0, 12, (230, 370)), 0, 255).astype(np.uint8)
    data = saved(Image.fromarray(noisy).convert("RGB"), "JPEG", quality=40)
    sheet = sheet_from_bytes("a.jpg", data)
    assert sheet.pixels is not None
    assert sheet.pixels.colour is None


def test_pixels_cannot_be_changed() -> None:
    sheet = sheet_from_bytes("a.png", saved(Image.fromarray(GREY), "PNG"))
    assert sheet.pixels is not None
    with pytest.raises(ValueError, match="read-only"):
        sheet.pixels.grey[0, 0] = 1


def test_a_bomb_is_refused_before_it_is_decoded(monkeypatch: pytest.MonkeyPatch) -> None:
    data = saved(Image.new("1", (9_000, 9_000)), "PNG")
    with pytest.raises(SheetError, match=r"9000 x 9000 pixels.*72 million"):
        sheet_from_bytes("a.png", data)
    for most in (1_000_000, 60_000_000):  # past Pillow's own limit for an error, and for a warning
        monkeypatch.setattr(Image, "MAX_IMAGE_PIXELS", most)
        with pytest.raises(SheetError, match="pixels"):
            sheet_from_bytes("a.png", data)


def test_too_many_pages_are_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "FRAMES", 3)
    pages = [Image.fromarray(GREY)] * 5
    with pytest.raises(SheetError, match="more than 3 pages"):
        sheet_from_bytes("a.tif", saved(pages[0], "TIFF", save_all=True, append_images=pages[1:]))


def test_floating_point_levels_are_refused_by_name() -> None:
    with pytest.raises(SheetError, match="colour mode F"):
        sheet_from_bytes("a.tif", saved(Image.fromarray(GREY.astype(np.float32)), "TIFF"))
