"""Pages as they are looked at: what is drawn lies where the sheet's places say, at every resolution."""

import io

import numpy as np
import pytest
from PIL import Image

from curvelab.errors import SheetError
from curvelab.paths import shipped
from curvelab.records.sheet import Pixels
from curvelab.sheets.affine import IDENTITY
from curvelab.sheets.open import sheet_from_bytes
from curvelab.sheets.picture import picture_of
from curvelab.sheets.tiles import TILE, pyramid_of

SVG = b"""<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 100 50">
<line x1="10" y1="5" x2="10" y2="45" stroke="#0000ff" stroke-width="1"/>
<line x1="20" y1="30" x2="90" y2="30" stroke="black" stroke-width="1" stroke-dasharray="10 10"/>
<path d="M60 5 H80 V20 H60 Z M64 14 H76 V18 H64 Z" fill="#ff0000" fill-rule="evenodd"/>
<text x="30" y="15" font-size="8">64</text>
</svg>"""


def level_at(pixels: Pixels, place: tuple[float, float]) -> np.ndarray:
    column, row = np.round(pixels.columns_rows(np.array([place]))[0]).astype(int)
    image = pixels.grey[:, :, None] if pixels.colour is None else pixels.colour
    return image[row, column].astype(int)


def test_an_svg_is_drawn_where_its_places_are() -> None:
    sheet = sheet_from_bytes("drawing.svg", SVG)
    pixels = picture_of(sheet, SVG)
    assert level_at(pixels, (10, 25)).tolist() == [0, 0, 255]
    assert level_at(pixels, (12, 25)).tolist() == [255, 255, 255]
    assert level_at(pixels, (70, 10)).tolist() == [255, 0, 0]
    assert level_at(pixels, (70, 16)).tolist() == [255, 255, 255], "a hole stays a hole"
    dashes = [int(level_at(pixels, (x, 30)).sum()) for x in (25, 35, 45, 55)]
    assert dashes == [0, 765, 0, 765]
    rows, columns = (
        slice(*sorted(pixels.columns_rows(np.array([[29, 8], [41, 16]]))[:, k].astype(int))) for k in (1, 0)
    )
    assert pixels.grey[rows, columns].min() < 100, "the word is there"


def test_a_vector_pdf_is_rendered_where_its_places_are() -> None:
    data = (shipped("demo_curves") / "sheets" / "vector" / "mcb-b.pdf").read_bytes()
    sheet = sheet_from_bytes("mcb-b.pdf", data)
    pixels = picture_of(sheet, data)
    # The current of 2 In lies at x = 175.24 pt, see the worksheet beside the sheet.
    assert level_at(pixels, (175.24, 500.0)).min() < 235
    assert level_at(pixels, (172.0, 500.0)).min() == 255
    assert pixels.size_in_places == pytest.approx(72 / 200, rel=1e-3)


def test_an_image_is_its_own_pixels() -> None:
    image = np.random.default_rng(1).integers(0, 256, (40, 30), dtype=np.uint8)
    content = io.BytesIO()
    Image.fromarray(image).save(content, "PNG")
    sheet = sheet_from_bytes("noise.png", content.getvalue())
    assert picture_of(sheet, content.getvalue()) is sheet.pixels


@pytest.mark.parametrize("size", [(1, 1), (256, 256), (257, 100), (1000, 1543)])
def test_tiles_cover_the_page_once_at_every_level(size: tuple[int, int]) -> None:
    columns, rows = size
    grey = np.full((rows, columns), 77, dtype=np.uint8)
    pyramid = pyramid_of(Pixels(grey=grey, colour=None, to_place=IDENTITY))
    for level in range(pyramid.levels):
        wide, high = -(-columns // 2**level), -(-rows // 2**level)
        seen = 0
        for row in range(-(-high // TILE)):
            for column in range(-(-wide // TILE)):
                with Image.open(io.BytesIO(pyramid.tile(level, column, row))) as tile:
                    assert np.asarray(tile).min() == np.asarray(tile).max() == 77
                    seen += tile.width * tile.height
        assert seen == wide * high
    assert max(wide, high) <= TILE, "the last level is one tile"
    for wrong in ((pyramid.levels, 0, 0), (0, -(-columns // TILE), 0), (-1, 0, 0), (0, 0, -1)):
        with pytest.raises(SheetError):
            pyramid.tile(*wrong)
