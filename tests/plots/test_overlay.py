from dataclasses import replace

import numpy as np
import pypdfium2
import pytest
from PIL import Image

from curvelab.errors import InputError
from curvelab.plots.ground import VECTOR_PIXELS, Ground
from curvelab.plots.overlay import draw_overlay, overlay_figure
from curvelab.plots.placing import Words
from curvelab.records.sheet import Sheet, Stroke, Word
from tests.reading.example import HEIGHT, WIDTH, reading, typed_reading


def shown(path):
    with Image.open(path) as image:
        return np.asarray(image.convert("RGB")).astype(int)


def bare(whole):
    return replace(whole, axes=None, curves=(), warnings=(), worksheet=replace(whole.worksheet, curves=()))


def vector_sheet():
    """A square of 100 pt with a hole, a stroke, and a word."""
    square = np.array([[100.0, 100.0], [200.0, 100.0], [200.0, 200.0], [100.0, 200.0]])
    common = {"colour": (0, 0, 0), "width": 0.0, "filled": True, "closed": True, "dash": (), "path": 1}
    hole = square[::-1] * 0.5 + 75.0
    line = replace(Stroke(points=[[0, 300], [595, 300]], **common), filled=False, closed=False, width=4.0, path=2)
    return Sheet(
        file="v.pdf",
        sha256="cd" * 32,
        page=1,
        pages=1,
        width=595.0,
        height=842.0,
        unit="pt",
        pixels=None,
        strokes=(Stroke(points=square, **common), Stroke(points=hole, **common), line),
        words=(Word(text="$10 kA", box=(300, 500, 340, 512), height=10),),
    )


def test_the_page_shows_through_pixel_for_pixel(tmp_path):
    whole = reading()
    draw_overlay(bare(whole), tmp_path / "over.png")
    found = shown(tmp_path / "over.png")
    assert found.shape == (HEIGHT, WIDTH, 3)
    assert np.array_equal(found[:, :, 0], whole.sheet.pixels.grey)


@pytest.mark.parametrize("shape", [(601, 437), (97, 1200), (1754, 1239)])
def test_any_size_of_page_keeps_its_pixels(shape, tmp_path):
    whole = bare(reading())
    grey = np.random.default_rng(1).integers(0, 255, shape, dtype=np.uint8)
    sheet = replace(whole.sheet, pixels=replace(whole.sheet.pixels, grey=grey), width=shape[1], height=shape[0])
    draw_overlay(replace(whole, sheet=sheet), tmp_path / "over.png")
    assert np.array_equal(shown(tmp_path / "over.png")[:, :, 1], grey)


def test_colours_of_the_page_are_kept(tmp_path):
    whole = bare(reading())
    colour = np.random.default_rng(2).integers(0, 255, (HEIGHT, WIDTH, 3), dtype=np.uint8)
    sheet = replace(whole.sheet, pixels=replace(whole.sheet.pixels, colour=colour))
    draw_overlay(replace(whole, sheet=sheet), tmp_path / "over.png")
    assert np.array_equal(shown(tmp_path / "over.png"), colour)


def test_what_was_read_lies_where_it_was_read(tmp_path):
    whole = reading()
    draw_overlay(whole, tmp_path / "over.png")
    draw_overlay(bare(whole), tmp_path / "bare.png")
    changed = np.abs(shown(tmp_path / "over.png") - shown(tmp_path / "bare.png")).sum(axis=2) > 60
    places = whole.curves[1].trace.places
    middle = (places[1] + places[2]) / 2
    column, row = np.round(middle).astype(int)
    assert changed[row - 1 : row + 2, column - 1 : column + 2].any()
    assert not changed[400:450, 300:390].any()


def test_places_are_drawn_through_the_pages_own_map():
    whole = reading()
    pixels = replace(whole.sheet.pixels, to_place=[[0.24, 0, 10.0], [0, 0.24, 20.0]])
    ground = Ground(replace(whole.sheet, pixels=pixels))
    across, down = ground.at([[10.0, 20.0], [34.0, 44.0]])
    assert across == pytest.approx([0, 100])
    assert down == pytest.approx([0, 100])


def test_names_marks_and_gaps_are_there():
    figure = overlay_figure(reading())
    words = [text.get_text() for text in figure.axes[0].texts]
    assert words == ["1 xIn", "100 xIn", "10 ms", "100 s", "riverside-b16 · fast", "riverside-b16 · slow"]


def test_a_vector_page_is_drawn_from_its_strokes_with_holes_open(tmp_path):
    whole = bare(reading())
    draw_overlay(replace(whole, sheet=vector_sheet()), tmp_path / "over.png")
    found = shown(tmp_path / "over.png").sum(axis=2)
    assert found.shape[0] == VECTOR_PIXELS
    scale = VECTOR_PIXELS / 842.0
    at = lambda x, y: found[round(y * scale), round(x * scale)]  # noqa: E731
    assert at(110, 150) == 0
    assert at(150, 150) == 3 * 255
    assert at(50, 300) == 0
    assert at(50, 305) == 3 * 255
    box = found[round(500 * scale) : round(512 * scale), round(300 * scale) : round(340 * scale)]
    assert (box < 300).any()


@pytest.mark.parametrize("ending", ["png", "svg", "pdf"])
def test_the_same_overlay_gives_the_same_bytes(ending, tmp_path):
    for name in ("a", "b"):
        draw_overlay(reading(), tmp_path / f"{name}.{ending}")
    assert (tmp_path / f"a.{ending}").read_bytes() == (tmp_path / f"b.{ending}").read_bytes()


def test_a_pdf_overlay_has_one_page_in_the_shape_of_the_sheet(tmp_path):
    draw_overlay(reading(), tmp_path / "over.pdf")
    document = pypdfium2.PdfDocument(tmp_path / "over.pdf")
    width, height = document[0].get_size()
    assert len(document) == 1
    document.close()
    assert width / height == pytest.approx(WIDTH / HEIGHT, rel=1e-3)


def test_typed_points_have_no_sheet_to_draw_on(tmp_path):
    with pytest.raises(InputError, match="no sheet"):
        draw_overlay(typed_reading(), tmp_path / "over.png")
    assert list(tmp_path.iterdir()) == []


def test_words_avoid_lines_other_words_and_the_pages_edge():
    down = np.column_stack([np.full(200, 50.0), np.linspace(0, 200, 200)])
    beside = np.column_stack([np.linspace(55, 200, 300), np.full(300, 100.0)])
    words = Words(lines=[down, beside], letter=(2.0, 5.0), room=(0, 0, 200.0, 200.0))
    place, right = words.beside(down, "slow edge")
    assert right
    assert abs(place[1] - 100) > 2.5
    second, right = words.beside(down, "slow edge")
    assert not right or abs(second[1] - place[1]) > 5
    narrow = Words(lines=[down], letter=(6.0, 5.0), room=(0, 0, 200.0, 200.0))
    assert narrow.beside(down, "slow edge")[1]
